// A course as its readers see it: the overview with the adherence that the rule makes of it. Changes nothing.

import type { Db } from '@/db/client';
import { listPlanned } from '@/db/queries/course';
import { listCourseOverviews } from '@/db/queries/course-state';
import type { CourseView } from '@/shared/contracts/course';
import { adherence } from '@/shared/rules/adherence';

export async function viewCourse(db: Db, courseId: string, now: string): Promise<CourseView> {
  const overview = (await listCourseOverviews(db, [courseId], now)).get(courseId);
  const facts = (await listPlanned(db, [courseId])).get(courseId);
  if (!overview || !facts) throw new Error('a course that was found has an overview');
  const { counts, planned, interval, missedRunning } = adherence(facts, now);
  return { ...overview, adherence: { complete: counts.complete, planned, interval, missedRunning } };
}
