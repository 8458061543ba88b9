// Staff move one planned session to another day, in the prescription's hours. The old row stays, closed as moved.

import { closePlanned, findPlanned, insertPlanned, listPlannedRows } from '@/db/queries/course-plan';
import { lockCourse } from '@/db/queries/course-state';
import { findPrescription } from '@/db/queries/prescription';
import { lockParticipantInReach } from '@/db/queries/reach';
import { action, notFound, refuse } from '@/server/action';
import { viewCourse } from '@/server/features/course/view-course';
import { rescheduleSession as contract } from '@/shared/contracts/course';
import { moveTo } from '@/shared/rules/prescription-schedule';
import { windowClosed } from '@/shared/rules/schedule';
import { localDate, parseInstant } from '@/shared/values/zone';

export const rescheduleSession = action(contract, async ({ actor, params, body }, tx) => {
  const found = await findPlanned(tx.db, params.plannedSessionId);
  const participant = found && (await lockParticipantInReach(tx.db, actor, found.participantId));
  const course = found && participant && (await lockCourse(tx.db, found.courseId));
  const planned = course && (await findPlanned(tx.db, params.plannedSessionId));
  const prescription = planned && (await findPrescription(tx.db, planned.prescriptionId));
  if (!participant || !prescription) return notFound();
  const now = await tx.now();

  const whose = { participantId: participant.id, siteId: participant.siteId };
  if (planned.state !== 'open' || windowClosed(planned, now)) return refuse('planned_session.closed', whose);
  const { zone } = participant;
  const takenDays = (await listPlannedRows(tx.db, course.id))
    .filter(({ state }) => state === 'open' || state === 'running' || state === 'done')
    .map(({ windowFrom }) => localDate(parseInstant(windowFrom) ?? Number.NaN, zone));
  const answer = moveTo(
    body.day,
    prescription.schedule,
    { zone, takenDays, sessionMinutes: prescription.minutes },
    now,
  );
  if (!answer.allowed)
    return refuse(`planned_session.${answer.code}`, { ...whose, fields: [{ path: 'day', code: answer.code }] });

  const { windowFrom, windowTo } = answer;
  const moved = { id: crypto.randomUUID(), windowFrom, windowTo, replacesId: planned.id, createdAt: now };
  await closePlanned(tx.db, planned.id, now, 'moved');
  await insertPlanned(tx.db, [
    { ...moved, courseId: course.id, participantId: participant.id, prescriptionId: prescription.id },
  ]);
  tx.record({
    ...whose,
    subject: { kind: 'planned_session', id: moved.id },
    before: { plannedSessionId: planned.id, windowFrom: planned.windowFrom, windowTo: planned.windowTo },
    after: { windowFrom, windowTo },
    why: body.reason,
  });
  return viewCourse(tx.db, course.id, now);
});
