// A clinician pauses a course, which voids a live permit at once, or lets it go on.

import { closePause, findCourse, findOpenPause, insertPause, lockCourse } from '@/db/queries/course-state';
import { voidLivePermit } from '@/db/queries/permit';
import { lockParticipantInReach } from '@/db/queries/reach';
import { action, notFound, refuse } from '@/server/action';
import { viewCourse } from '@/server/features/course/view-course';
import { pauseCourse as contract } from '@/shared/contracts/course';

export const pauseCourse = action(contract, async ({ actor, params, body }, tx) => {
  const found = await findCourse(tx.db, params.courseId);
  const participant = found && (await lockParticipantInReach(tx.db, actor, found.participantId));
  const course = participant && (await lockCourse(tx.db, params.courseId));
  if (!participant || !course) return notFound();
  const now = await tx.now();

  const whose = { participantId: participant.id, siteId: participant.siteId };
  if (course.closedAt !== null) return refuse('course.not_active', whose);
  const pause = await findOpenPause(tx.db, course.id);
  if (body.paused === (pause !== null)) return refuse('course.already_so', whose);

  if (pause) await closePause(tx.db, pause.id, now);
  else
    await insertPause(tx.db, {
      id: crypto.randomUUID(),
      courseId: course.id,
      reason: body.reason,
      by: actor.accountId,
      createdAt: now,
    });
  const voided = body.paused ? await voidLivePermit(tx.db, participant.id, now, 'paused') : null;

  tx.record({
    ...whose,
    subject: { kind: 'course', id: course.id },
    before: { paused: pause !== null },
    after: { paused: body.paused, ...(voided ? { voidedPermitId: voided.id } : {}) },
    why: body.reason,
  });
  return viewCourse(tx.db, course.id, now);
});
