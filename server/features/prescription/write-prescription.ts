// A clinician writes a draft, the first or an amendment. Refused with every limit that it crosses; nothing is clamped.

import { prescriptionHashOf } from '@/db/queries/content-hash';
import { findActiveCourse, insertCourse, lockCourse } from '@/db/queries/course-state';
import { discardDrafts, findPrescriptionInForce, insertPrescription, wholeAmounts } from '@/db/queries/prescription';
import { lockParticipantInReach } from '@/db/queries/reach';
import { action, notFound, refuse } from '@/server/action';
import { judgeContent, refusalOf } from '@/server/features/prescription/judge-content';
import { viewPrescription } from '@/server/features/prescription/view-prescription';
import { writePrescription as contract } from '@/shared/contracts/prescription';
import { chargeOf, minutesOn } from '@/shared/rules/dose';
import { endOfDay, isoOf } from '@/shared/values/zone';

export const writePrescription = action(contract, async ({ actor, body }, tx) => {
  const participant = await lockParticipantInReach(tx.db, actor, body.participantId);
  if (!participant) return notFound();
  const active = await findActiveCourse(tx.db, participant.id);
  if (active) await lockCourse(tx.db, active.id);
  const now = await tx.now();

  const whose = { participantId: participant.id, siteId: participant.siteId };
  if (participant.closedAt !== null) return refuse('participant.withdrawn', whose);
  const inForce = active ? await findPrescriptionInForce(tx.db, active.id) : null;
  if ((inForce?.id ?? null) !== body.amendsId) return refuse('version.stale', whose);
  if (body.amendsId !== null && body.reason === null) {
    return refuse('prescription.reason_missing', { ...whose, fields: [{ path: 'reason', code: 'reason_missing' }] });
  }
  const content = wholeAmounts(body);
  const courseId = active?.id ?? null;
  const judged = await judgeContent(tx.db, { content, participant, courseId, mayHaveBegun: false, now });
  const refusal = refusalOf(judged, content, participant);
  if (refusal) return refusal;

  const course = active ?? { id: crypto.randomUUID(), ...whose, createdAt: now };
  if (!active) await insertCourse(tx.db, course);
  await discardDrafts(tx.db, course.id, now);
  const draft = await insertPrescription(tx.db, {
    ...content,
    id: crypto.randomUUID(),
    courseId: course.id,
    chargeCoulomb: chargeOf(content.dose),
    minutes: minutesOn(content.dose),
    expiresAt: isoOf(endOfDay(content.schedule.expiresOn, participant.zone)),
    tier: judged.judgement.verdict === 'accept' ? 'accept' : 'second_signature',
    contentHash: prescriptionHashOf(content),
    writtenBy: actor.accountId,
    createdAt: now,
  });
  const { dose, schedule, assisted } = content;
  tx.record({
    ...whose,
    subject: { kind: 'prescription', id: draft.id },
    ...(inForce
      ? {
          before: {
            version: inForce.version,
            dose: inForce.dose,
            schedule: inForce.schedule,
            assisted: inForce.assisted,
          },
        }
      : {}),
    after: { dose, schedule, assisted },
    why: body.reason ?? undefined,
  });
  return viewPrescription(tx.db, participant, draft, actor.role, now);
});
