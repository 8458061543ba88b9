// What a prescription's last signature brings about: the old version ends, a live permit is void, what was still to come is
// planned anew, the participant is asked to read it. The caller holds the locks of participant and course.

import { cancelOpenPlanned, insertPlanned } from '@/db/queries/course-plan';
import { voidLivePermit } from '@/db/queries/permit';
import { closePrescription, putInForce as giveVersion, type PrescriptionRecord } from '@/db/queries/prescription';
import type { ParticipantRecord } from '@/db/queries/reach';
import { closeMatter } from '@/db/queries/worklist';
import type { Tx } from '@/server/action';
import { secondSignatureMatter } from '@/shared/rules/prescription-signing';
import { windowsToPlan } from '@/shared/rules/prescription-schedule';

export async function putInForce(
  tx: Tx,
  participant: ParticipantRecord,
  draft: PrescriptionRecord,
  before: PrescriptionRecord | null,
  takenDays: readonly string[],
  now: string,
): Promise<{ voidedPermitId: string | null; plannedSessions: number }> {
  const { id, courseId } = draft;
  if (before) await closePrescription(tx.db, before.id, now, 'superseded');
  await giveVersion(tx.db, id, courseId, now);
  const voided = await voidLivePermit(tx.db, participant.id, now, 'amended');
  await cancelOpenPlanned(tx.db, courseId, now);
  const windows = windowsToPlan(draft.schedule, { zone: participant.zone, takenDays }, now);
  await insertPlanned(
    tx.db,
    windows.map(({ windowFrom, windowTo }) => ({
      ...{ id: crypto.randomUUID(), courseId, participantId: participant.id, prescriptionId: id },
      ...{ windowFrom, windowTo, createdAt: now },
    })),
  );
  await closeMatter(tx.db, participant.id, secondSignatureMatter(id), now, 'signed');
  if (participant.accountId !== null) {
    tx.tell({
      kind: 'something_to_confirm',
      toEmail: participant.email,
      language: participant.language,
      facts: { name: participant.name, path: '/acknowledge' },
      key: `something_to_confirm:${id}`,
    });
  }
  return { voidedPermitId: voided?.id ?? null, plannedSessions: windows.length };
}
