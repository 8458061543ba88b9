// "May I start now?": the same facts and the same rule as at the issue of a permit, for showing. Changes nothing.

import { findCourse, findNewestCourse } from '@/db/queries/course-state';
import { loadClearanceFacts } from '@/db/queries/clearance';
import { findCaregiverLink, findParticipantInReach } from '@/db/queries/reach';
import type { Db } from '@/db/client';
import { action, invalid, notFound, type AccountActor } from '@/server/action';
import { viewClearance } from '@/server/features/clearance/view-clearance';
import { readClearance as contract } from '@/shared/contracts/clearance';

/** Whose clearance is asked: one's own, a participant's of an own site, or the one that a caregiver assists. */
async function findWhose(db: Db, actor: AccountActor, courseId: string | undefined): Promise<string | null> {
  if (courseId === undefined) return actor.participantId;
  const course = await findCourse(db, courseId);
  if (!course) return null;
  // Only the course that counts now has a clearance.
  const newest = await findNewestCourse(db, course.participantId);
  if (newest?.id !== courseId) return null;
  if (actor.role !== 'caregiver') {
    return (await findParticipantInReach(db, actor, course.participantId)) ? course.participantId : null;
  }
  return (await findCaregiverLink(db, actor.accountId, course.participantId)) ? course.participantId : null;
}

export const readClearance = action(contract, async ({ actor, query }, tx) => {
  if (query.courseId === undefined && actor.role !== 'participant') {
    return invalid([{ path: 'courseId', code: 'missing' }]);
  }
  const participantId = await findWhose(tx.db, actor, query.courseId);
  if (participantId === null) return notFound();
  const now = await tx.now();
  const gathered = await loadClearanceFacts(tx.db, participantId, now);
  if (gathered === null) return notFound();
  const { person } = gathered;
  // A caregiver runs sessions beside the person only where the prescription says so.
  if (actor.role === 'caregiver' && person.prescription?.assisted !== true) return notFound();
  tx.record({
    participantId,
    siteId: person.participant.siteId,
    kind: 'read',
    subject: { kind: 'course', id: person.course?.id ?? participantId },
  });
  const view = await viewClearance(tx, gathered, now);
  // Whether it may start and what is in the way is what stands beside a session; the dose and the answers are the person's own.
  return actor.role === 'caregiver' ? { ...view, dose: null, precheck: null } : view;
});
