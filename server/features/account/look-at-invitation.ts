// What an invitation is for, before it is accepted. Changes nothing.

import { findAccountByEmail, findCaregiverOfInvitation, findInvitation } from '@/db/queries/account';
import { action, isRefusal } from '@/server/action';
import { openInvitation } from '@/server/features/account/open-invitation';
import { hashOfMailToken } from '@/server/invitation';
import { lookAtInvitation as contract } from '@/shared/contracts/account';
import { firstNameOf } from '@/shared/values/first-name';

export const lookAtInvitation = action(contract, async ({ body }, tx) => {
  const found = openInvitation(await findInvitation(tx.db, hashOfMailToken(body.token)), await tx.now());
  if (isRefusal(found)) return found;
  const { role, email, siteName, subjectId, expiresAt } = found;
  const caregiver = role === 'caregiver' && subjectId ? await findCaregiverOfInvitation(tx.db, subjectId) : null;
  const invitedBy = caregiver ? firstNameOf(caregiver.participantName) : siteName;
  const hasAccount = (await findAccountByEmail(tx.db, email)) !== null;
  return { role, email, siteName, invitedBy, expiresAt, hasAccount };
});
