// A permit that is over is closed. Without a word from the device its session stays reserved, and somebody asks what became of it.

import { lockCourse } from '@/db/queries/course-state';
import { closePermit, findNextPermitEnd, findPermit, listExpiredPermits } from '@/db/queries/permit';
import { findSession } from '@/db/queries/session';
import { openItem } from '@/db/queries/worklist';
import type { Job } from '@/server/action';
import { jobBatch } from '@/shared/rules/house-limits';
import { noWordMatter } from '@/shared/rules/matters';

export const expirePermits: Job = {
  name: 'permit.expire',
  listDue: (db, now) => listExpiredPermits(db, now, jobBatch),
  nextDue: findNextPermitEnd,
  async run(id, tx) {
    const found = await findPermit(tx.db, id);
    if (!found) return;
    await lockCourse(tx.db, found.courseId);
    const now = await tx.now();
    const { sessionId, participantId, siteId } = found;
    if (found.expiresAt > now || !(await closePermit(tx.db, id, now, 'expired'))) return;
    const session = await findSession(tx.db, sessionId);
    if (session?.startedAt === null && session.closedAt === null) {
      await openItem(tx.db, {
        id: crypto.randomUUID(),
        ...{ siteId, participantId, sessionId },
        level: 'flag',
        why: 'permit_no_word',
        facts: {},
        matter: noWordMatter(sessionId),
        openedAt: now,
      });
    }
    tx.record({ participantId, siteId, subject: { kind: 'permit', id }, after: { closed: 'expired' } });
  },
};
