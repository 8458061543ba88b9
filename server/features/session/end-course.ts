// Ends a course whose count is done, or in which nothing is planned any more. The caller holds the course's lock.

import type { Db } from '@/db/client';
import { cancelOpenPlanned, countPlanned } from '@/db/queries/course-plan';
import { closeCourse } from '@/db/queries/course-state';
import { closePrescription, findPrescriptionInForce } from '@/db/queries/prescription';
import { courseHasEnded } from '@/shared/rules/course-end';

export async function endCourseIfDone(db: Db, courseId: string, now: string): Promise<boolean> {
  const inForce = await findPrescriptionInForce(db, courseId);
  if (!inForce) return false;
  const { done, open } = await countPlanned(db, courseId);
  const { sessionsTotal, makeUpMissed } = inForce.schedule;
  const hasEnded = courseHasEnded({ sessionsTotal, sessionsDone: done, sessionsOpen: open, makesUpMissed: makeUpMissed });
  if (!hasEnded || !(await closeCourse(db, courseId, now, 'finished'))) return false;
  await cancelOpenPlanned(db, courseId, now);
  await closePrescription(db, inForce.id, now, 'course_ended');
  return true;
}
