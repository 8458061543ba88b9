// Invites somebody to work at an own site, by mail.

import { findRoleOfAddress, insertInvitation, isStaffInvited, lockAddress } from '@/db/queries/invitation';
import { findSite } from '@/db/queries/site';
import { action, notFound, refuse } from '@/server/action';
import { newMailToken } from '@/server/invitation';
import { inviteStaff as contract } from '@/shared/contracts/site';
import { invitationEnd } from '@/shared/rules/house-terms';

export const inviteStaff = action(contract, async ({ actor, body }, tx) => {
  const site = actor.siteIds.includes(body.siteId) ? await findSite(tx.db, body.siteId) : null;
  if (!site) return notFound();
  await lockAddress(tx.db, body.email);
  const now = await tx.now();
  const isTaken =
    (await findRoleOfAddress(tx.db, body.email)) !== null || (await isStaffInvited(tx.db, body.email, now));
  if (isTaken) {
    return refuse('staff.address_taken', { siteId: site.id, fields: [{ path: 'email', code: 'address_taken' }] });
  }

  const { token, hash } = newMailToken();
  const { email, name, role } = body;
  const invitation = {
    ...{ id: crypto.randomUUID(), role, email, name, siteId: site.id, subjectId: null, tokenHash: hash },
    ...{ invitedBy: actor.name, createdAt: now, expiresAt: invitationEnd(now) },
  };
  await insertInvitation(tx.db, invitation);
  tx.tell({
    kind: 'staff_invitation',
    toEmail: email,
    language: actor.language,
    facts: { name, siteName: site.name, invitedBy: actor.name, path: `/invitation#token=${token}` },
    key: `staff_invitation:${invitation.id}`,
    dropAt: invitation.expiresAt,
  });
  tx.record({ siteId: site.id, subject: { kind: 'invitation', id: invitation.id }, after: { role, email, name } });
  return {
    ...{ accountId: null, invitationId: invitation.id, name, email, role, siteIds: [site.id] },
    ...{ state: 'invited' as const, secondFactor: false, since: now },
  };
});
