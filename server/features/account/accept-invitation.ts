// Accepts an invitation: the account comes into being with its password, and is tied to what it was invited for.

import { randomUUID } from 'node:crypto';
import {
  closeInvitation,
  findAccountByEmail,
  giveCaregiverAccount,
  giveParticipantAccount,
  insertAccount,
  insertMembership,
  lockInvitation,
  type InvitationRow,
} from '@/db/queries/account';
import { action, isRefusal, refuse, type Tx } from '@/server/action';
import { openInvitation } from '@/server/features/account/open-invitation';
import { hashOfMailToken } from '@/server/invitation';
import { hashSecret } from '@/server/password';
import { acceptInvitation as contract } from '@/shared/contracts/account';

export const acceptInvitation = action(contract, async ({ body }, tx) => {
  // Hashed before any lock: it takes a tenth of a second on purpose.
  const passwordHash = await hashSecret(body.password);
  const locked = await lockInvitation(tx.db, hashOfMailToken(body.token));
  const now = await tx.now();
  const invitation = openInvitation(locked, now);
  if (isRefusal(invitation)) return invitation;
  const { role, email, siteId, subjectId } = invitation;
  if (await findAccountByEmail(tx.db, email)) return refuse('invitation.account_exists', { siteId });

  const account = { role, name: body.name, email, passwordHash, language: body.language, createdAt: now };
  const made = await insertAccount(tx.db, { id: randomUUID(), credentialId: randomUUID(), ...account });
  if (!made) return refuse('invitation.account_exists', { siteId });
  if (!(await tie(tx, invitation, made.id, now))) return refuse('invitation.expired', { siteId });
  await closeInvitation(tx.db, invitation.id, now, 'accepted');
  tx.record({
    participantId: role === 'participant' ? (subjectId ?? undefined) : undefined,
    siteId,
    subject: { kind: 'account', id: made.id },
    after: { role, invitationId: invitation.id },
  });
  return { email, role };
});

/** Ties the account to the person, the caregiver's row or the site that the invitation names; false when that is gone. */
async function tie(
  tx: Tx,
  { role, siteId, subjectId }: InvitationRow,
  accountId: string,
  now: string,
): Promise<boolean> {
  if (role === 'participant') return subjectId !== null && giveParticipantAccount(tx.db, subjectId, accountId);
  if (role === 'caregiver') return subjectId !== null && giveCaregiverAccount(tx.db, subjectId, accountId, now);
  await insertMembership(tx.db, accountId, siteId, now);
  return true;
}
