// A course with the marks of its strip, for the participant and for staff of the site.

import { findCourse } from '@/db/queries/course-state';
import { findParticipantInReach } from '@/db/queries/reach';
import { action, notFound } from '@/server/action';
import { viewCourse } from '@/server/features/course/view-course';
import { readCourse as contract } from '@/shared/contracts/course';

export const readCourse = action(contract, async ({ actor, params }, tx) => {
  const course = await findCourse(tx.db, params.courseId);
  const participant = course && (await findParticipantInReach(tx.db, actor, course.participantId));
  if (!participant) return notFound();
  const now = await tx.now();
  tx.record({
    participantId: participant.id,
    siteId: participant.siteId,
    kind: 'read',
    subject: { kind: 'course', id: course.id },
  });
  return viewCourse(tx.db, course.id, now);
});
