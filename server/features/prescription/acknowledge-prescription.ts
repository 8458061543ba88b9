// The participant has read the version in force. The same answer again if it was acknowledged before.

import { lockCourse } from '@/db/queries/course-state';
import { findPrescription, insertAcknowledgement, listAcknowledgements } from '@/db/queries/prescription';
import { lockParticipantInReach } from '@/db/queries/reach';
import { action, notFound, refuse } from '@/server/action';
import { mayRead } from '@/server/features/prescription/view-prescription';
import { acknowledgePrescription as contract } from '@/shared/contracts/prescription';

export const acknowledgePrescription = action(contract, async ({ actor, params }, tx) => {
  const found = await findPrescription(tx.db, params.prescriptionId);
  const participant = found && (await lockParticipantInReach(tx.db, actor, found.participantId));
  const course = found && participant && (await lockCourse(tx.db, found.courseId));
  const record = course && (await findPrescription(tx.db, params.prescriptionId));
  if (!participant || !record || !mayRead(record, actor.role)) return notFound();
  const now = await tx.now();

  const whose = { participantId: participant.id, siteId: participant.siteId };
  if (record.closedAt !== null) return refuse('version.stale', whose);

  const isNew = await insertAcknowledgement(tx.db, {
    prescriptionId: record.id,
    participantId: participant.id,
    createdAt: now,
  });
  const acknowledgedAt = (await listAcknowledgements(tx.db, [record.id])).get(record.id) ?? now;
  if (isNew)
    tx.record({
      ...whose,
      subject: { kind: 'prescription', id: record.id },
      after: { acknowledgedVersion: record.version },
    });
  return { acknowledgedAt };
});
