// One version of a prescription, for the participant it concerns and for staff of the site.

import { findPrescription } from '@/db/queries/prescription';
import { findParticipantInReach } from '@/db/queries/reach';
import { action, notFound } from '@/server/action';
import { mayRead, viewPrescription } from '@/server/features/prescription/view-prescription';
import { readPrescription as contract } from '@/shared/contracts/prescription';

export const readPrescription = action(contract, async ({ actor, params }, tx) => {
  const record = await findPrescription(tx.db, params.prescriptionId);
  const participant = record && (await findParticipantInReach(tx.db, actor, record.participantId));
  if (!participant || !mayRead(record, actor.role)) return notFound();
  const now = await tx.now();
  tx.record({
    participantId: participant.id,
    siteId: participant.siteId,
    kind: 'read',
    subject: { kind: 'prescription', id: record.id },
  });
  return viewPrescription(tx.db, participant, record, actor.role, now);
});
