// A caregiver who has an account already joins another participant by the link in the mail.

import { closeInvitation, findCaregiverOfInvitation, giveCaregiverAccount, lockInvitation } from '@/db/queries/account';
import { action, isRefusal, refuse } from '@/server/action';
import { openInvitation } from '@/server/features/account/open-invitation';
import { hashOfMailToken } from '@/server/invitation';
import { joinByInvitation as contract } from '@/shared/contracts/account';

export const joinByInvitation = action(
  contract,
  async ({ actor, body }, tx) => {
    const locked = await lockInvitation(tx.db, hashOfMailToken(body.token));
    const now = await tx.now();
    const invitation = openInvitation(locked, now);
    if (isRefusal(invitation)) return invitation;
    const { id, role, email, siteId, subjectId } = invitation;
    // The link alone is not enough: it must have been sent to the address of whoever is signed in.
    if (email !== actor.email || role !== 'caregiver' || subjectId === null) {
      return refuse('invitation.other_address', { siteId });
    }
    const caregiver = await findCaregiverOfInvitation(tx.db, subjectId);
    if (!caregiver || !(await giveCaregiverAccount(tx.db, subjectId, actor.accountId, now))) {
      return refuse('invitation.expired', { siteId });
    }
    await closeInvitation(tx.db, id, now, 'accepted');
    tx.record({
      participantId: caregiver.participantId,
      siteId,
      subject: { kind: 'caregiver', id: subjectId },
      after: { accepted: true },
    });
    return { email, role };
  },
  { scope: 'house' },
);
