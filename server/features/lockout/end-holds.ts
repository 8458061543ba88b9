// A hold is over at its instant: the row is closed, so that lists and later readers see it. Clearance does not wait for this.

import { closeLockout, findHold, findNextHoldEnd, listEndedHolds } from '@/db/queries/lockout';
import type { Job } from '@/server/action';
import { jobBatch } from '@/shared/rules/house-limits';

export const endHolds: Job = {
  name: 'lockout.end-holds',
  listDue: (db, now) => listEndedHolds(db, now, jobBatch),
  nextDue: findNextHoldEnd,
  async run(id, tx) {
    const hold = await findHold(tx.db, id);
    const now = await tx.now();
    if (!hold || hold.until === null || hold.until > now) return;
    if (!(await closeLockout(tx.db, id, now, 'time'))) return;
    tx.record({
      participantId: hold.participantId,
      subject: { kind: 'lockout', id },
      after: { code: hold.code, until: hold.until, closed: 'time' },
    });
  },
};
