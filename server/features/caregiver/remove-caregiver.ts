// Removes a caregiver at once. Removing again answers the same.

import { closeCaregiver, findCaregiver } from '@/db/queries/caregiver';
import { closeInvitationsOf } from '@/db/queries/invitation';
import { lockOwnParticipant } from '@/db/queries/reach';
import { action, notFound } from '@/server/action';
import { removeCaregiver as contract } from '@/shared/contracts/caregiver';

export const removeCaregiver = action(contract, async ({ actor, params }, tx) => {
  const participant = await lockOwnParticipant(tx.db, actor.participantId);
  const caregiver = participant && (await findCaregiver(tx.db, participant.id, params.caregiverId));
  if (!participant || !caregiver) return notFound();
  if (caregiver.closedAt !== null) return { removedAt: caregiver.closedAt };
  const now = await tx.now();

  await closeCaregiver(tx.db, caregiver.id, now);
  await closeInvitationsOf(tx.db, caregiver.id, now, 'withdrawn');
  tx.record({
    ...{ participantId: participant.id, siteId: participant.siteId, subject: { kind: 'caregiver', id: caregiver.id } },
    before: { name: caregiver.name, email: caregiver.email },
    after: { removedAt: now },
  });
  return { removedAt: now };
});
