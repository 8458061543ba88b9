// Signs a new version of a site's protocol. No limit may exceed its ceiling; of two who sign at once, the second is told.

import { protocolHashOf } from '@/db/queries/content-hash';
import { insertProtocol, lockProtocol, readProtocolInForce } from '@/db/queries/protocol';
import { insertSignature } from '@/db/queries/signature';
import { findSite } from '@/db/queries/site';
import { action, confirmedOf, notFound, refuse } from '@/server/action';
import { changeProtocol as contract } from '@/shared/contracts/site';
import { siteLimitsAllowed } from '@/shared/rules/site-limits';

export const changeProtocol = action(contract, async ({ actor, body, confirmedAt }, tx) => {
  const { siteId, settings, reason } = body;
  const site = actor.siteIds.includes(siteId) ? await findSite(tx.db, siteId) : null;
  if (!site) return notFound();
  await lockProtocol(tx.db, siteId);
  const now = await tx.now();
  const inForce = await readProtocolInForce(tx.db, siteId);
  const version = inForce?.version ?? 0;
  if (version !== body.basedOnVersion) return refuse('version.stale', { siteId });
  const over = siteLimitsAllowed(settings.limits);
  if (over.length > 0) {
    return refuse('protocol.above_ceiling', {
      siteId,
      fields: over.map(({ field, code, limit, source, layer }) => ({
        path: `settings.limits.${field}`,
        code,
        facts: { limit, source, layer },
      })),
    });
  }

  const signed = {
    ...{ id: crypto.randomUUID(), siteId, version: version + 1, settings, reason },
    ...{ signedBy: actor.accountId, signedByName: actor.name, signedAt: now },
  };
  const contentHash = protocolHashOf(signed);
  if (!(await insertProtocol(tx.db, { ...signed, contentHash }))) return refuse('version.stale', { siteId });
  await insertSignature(tx.db, {
    ...{ id: crypto.randomUUID(), subjectKind: 'protocol', subjectId: signed.id, meaning: 'protocol', contentHash },
    ...{ accountId: actor.accountId, name: actor.name, role: actor.role },
    ...{ createdAt: now, confirmedAt: confirmedOf(confirmedAt) },
  });
  tx.record({
    siteId,
    subject: { kind: 'protocol', id: signed.id },
    before: inForce ? { version, settings: inForce.settings } : undefined,
    after: { version: signed.version, settings, contentHash },
    why: reason,
  });
  const { signedBy: _account, signedByName, ...shown } = signed;
  return { ...shown, siteName: site.name, signedBy: signedByName, current: true };
});
