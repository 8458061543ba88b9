// Switches what a caregiver may see, from now on; what was switched before stays on record.

import { findCaregiver, insertShares } from '@/db/queries/caregiver';
import { lockOwnParticipant } from '@/db/queries/reach';
import { action, notFound } from '@/server/action';
import { viewCaregiver } from '@/server/features/caregiver/view-caregiver';
import { changeShares as contract } from '@/shared/contracts/caregiver';

export const changeShares = action(contract, async ({ actor, params, body }, tx) => {
  const participant = await lockOwnParticipant(tx.db, actor.participantId);
  const caregiver = participant && (await findCaregiver(tx.db, participant.id, params.caregiverId));
  if (!participant || !caregiver || caregiver.closedAt !== null) return notFound();
  const now = await tx.now();

  await insertShares(tx.db, { id: crypto.randomUUID(), caregiverId: caregiver.id, ...body, createdAt: now });
  tx.record({
    ...{ participantId: participant.id, siteId: participant.siteId, subject: { kind: 'caregiver', id: caregiver.id } },
    before: { ...caregiver.shares },
    after: body,
  });
  return viewCaregiver({ ...caregiver, shares: body });
});
