// Adds a site. The administrator who adds it belongs to it; its protocol is signed apart, and until then nobody can be cleared there.

import { insertMembership } from '@/db/queries/account';
import { insertSite } from '@/db/queries/site';
import { action, refuse } from '@/server/action';
import { addSite as contract } from '@/shared/contracts/site';

export const addSite = action(
  contract,
  async ({ actor, body }, tx) => {
    const now = await tx.now();
    const site = { id: crypto.randomUUID(), ...body, createdAt: now };
    if (!(await insertSite(tx.db, site)))
      return refuse('site.code_taken', { fields: [{ path: 'code', code: 'code_taken' }] });
    await insertMembership(tx.db, actor.accountId, site.id, now);
    tx.record({ siteId: site.id, subject: { kind: 'site', id: site.id }, after: body });
    return site;
  },
  { scope: 'house' },
);
