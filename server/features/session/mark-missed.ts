// A planned window closed and nothing was done: missed, or excused if the person was held all through it. The participant is nudged, caregivers
// who may know are told that something planned was not done, and what repeats reaches the worklist. May run twice; does its work once.

import { listPlanned } from '@/db/queries/course';
import { closePlanned, findPlanned } from '@/db/queries/course-plan';
import { lockCourse } from '@/db/queries/course-state';
import { findNextWindowEnd, listClosedWindows } from '@/db/queries/notice';
import { openItem } from '@/db/queries/worklist';
import type { Job, Tx } from '@/server/action';
import { closeCourseIfDone } from '@/server/course-end';
import { planMakeUp } from '@/server/features/session/plan-make-up';
import { tellOfMissed } from '@/server/features/session/tell-of-missed';
import { adherence, type AdherenceFacts } from '@/shared/rules/adherence';
import { jobBatch } from '@/shared/rules/house-limits';
import { missedOrExcused, windowClosed } from '@/shared/rules/schedule';

/** Flags that have come up: each one open row, however often it comes up again. */
async function flag(
  tx: Tx,
  facts: AdherenceFacts,
  whose: { participantId: string; siteId: string },
  now: string,
): Promise<readonly string[]> {
  const { flags, missedRunning, counts, planned } = adherence(facts, now);
  for (const code of flags) {
    await openItem(tx.db, {
      id: crypto.randomUUID(),
      ...whose,
      level: code === 'recall_needed' ? 'due' : 'flag',
      why: code,
      facts: { missedRunning, complete: counts.complete, planned },
      matter: code,
      openedAt: now,
    });
  }
  return flags;
}

export const markMissed: Job = {
  name: 'session.mark-missed',
  listDue: (db, now) => listClosedWindows(db, now, jobBatch),
  nextDue: findNextWindowEnd,
  async run(id, tx) {
    const found = await findPlanned(tx.db, id);
    const course = found && (await lockCourse(tx.db, found.courseId));
    const planned = course && (await findPlanned(tx.db, id));
    const now = await tx.now();
    if (!planned || planned.state !== 'open' || !windowClosed(planned, now)) return;
    const before = (await listPlanned(tx.db, [course.id])).get(course.id);
    if (!before) return;
    const state = missedOrExcused(planned, before.holds);
    const whose = { participantId: course.participantId, siteId: course.siteId };

    await closePlanned(tx.db, id, now, state);
    const isMissed = state === 'missed';
    const madeUpBy = isMissed ? await planMakeUp(tx.db, planned, now) : null;
    const after = (await listPlanned(tx.db, [course.id])).get(course.id) ?? before;
    const flags = isMissed ? await flag(tx, after, whose, now) : [];
    if (isMissed) await tellOfMissed(tx, planned, now);
    await closeCourseIfDone(tx.db, course.id, now);
    tx.record({ ...whose, subject: { kind: 'planned_session', id }, after: { state, madeUpBy, flags } });
  },
};
