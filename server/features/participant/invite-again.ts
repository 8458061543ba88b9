// Mails a new invitation to somebody who has not accepted the last one; the old link ends.

import { closeInvitationsOf } from '@/db/queries/invitation';
import { lockParticipantInReach } from '@/db/queries/reach';
import { findSite } from '@/db/queries/site';
import { action, notFound, refuse } from '@/server/action';
import { inviteByMail } from '@/server/features/participant/invite-by-mail';
import { inviteAgain as contract } from '@/shared/contracts/participant';

export const inviteAgain = action(contract, async ({ actor, params }, tx) => {
  const participant = await lockParticipantInReach(tx.db, actor, params.participantId);
  const site = participant && (await findSite(tx.db, participant.siteId));
  if (!participant || !site) return notFound();
  const now = await tx.now();
  const whose = { participantId: participant.id, siteId: participant.siteId };
  if (participant.closedAt !== null) return refuse('participant.withdrawn', whose);
  if (participant.accountId !== null) return refuse('participant.has_account', whose);

  await closeInvitationsOf(tx.db, participant.id, now, 'replaced');
  const invitationExpiresAt = await inviteByMail(tx, actor, participant, site.name, now);
  tx.record({ ...whose, subject: { kind: 'participant', id: participant.id }, after: { invitationExpiresAt } });
  return { invitationExpiresAt };
});
