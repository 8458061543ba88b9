// The course on a person's page: the overview with the adherence that the rule makes of it. Changes nothing.

import type { Db } from '@/db/client';
import { listPlanned } from '@/db/queries/course';
import { listCourseOverviews } from '@/db/queries/course-state';
import type { CourseView } from '@/shared/contracts/course';
import { adherenceShown } from '@/shared/rules/adherence-shown';

export async function viewCourse(db: Db, courseId: string, now: string): Promise<CourseView | null> {
  const overview = (await listCourseOverviews(db, [courseId], now)).get(courseId);
  const facts = (await listPlanned(db, [courseId])).get(courseId);
  return overview && facts ? { ...overview, adherence: adherenceShown(facts, now) } : null;
}
