// Ends a course whose last session is done. Called under the locks of participant and course, by whatever closed a session.

import type { Db } from '@/db/client';
import { cancelOpenPlanned, countPlanned } from '@/db/queries/course-plan';
import { closeCourse, lockCourse } from '@/db/queries/course-state';
import { closePrescription, discardDrafts, findPrescriptionInForce } from '@/db/queries/prescription';
import { openItem } from '@/db/queries/worklist';
import { courseHasEnded } from '@/shared/rules/course-end';

/** True when the course ended now: its prescription ends with it, nothing more is planned, and the worklist says so. */
export async function closeCourseIfDone(db: Db, courseId: string, now: string): Promise<boolean> {
  const course = await lockCourse(db, courseId);
  const prescription = course && (await findPrescriptionInForce(db, courseId));
  if (!prescription || course.closedAt !== null) return false;
  const { done, open } = await countPlanned(db, courseId);
  const { sessionsTotal, makeUpMissed } = prescription.schedule;
  if (!courseHasEnded({ sessionsTotal, sessionsDone: done, sessionsOpen: open, makesUpMissed: makeUpMissed }))
    return false;

  await cancelOpenPlanned(db, courseId, now);
  await closePrescription(db, prescription.id, now, 'course_ended');
  await discardDrafts(db, courseId, now);
  await closeCourse(db, courseId, now, 'finished');
  await openItem(db, {
    id: crypto.randomUUID(),
    siteId: course.siteId,
    participantId: course.participantId,
    level: 'due',
    why: 'course_ending',
    facts: { sessionsDone: done, sessionsTotal },
    matter: `course_ending:${courseId}`,
    openedAt: now,
  });
  return true;
}
