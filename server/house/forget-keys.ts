// Forgets the answers of old idempotency keys: they hold parts of records, and nobody sends the same wish again after a week.

import { oldestKeySeen, pruneKeysSeen } from '@/db/queries/house';
import type { Job } from '@/server/action';
import { dayMilliseconds } from '@/shared/values/units';

/** A phone that was offline sends again within days (own choice: a week). */
const keptMilliseconds = 7 * dayMilliseconds;
const everything = 'all';

function shifted(instant: string, milliseconds: number): string {
  return new Date(Date.parse(instant) + milliseconds).toISOString();
}

export const forgetKeys: Job = {
  name: 'house.forget-keys',
  async listDue(db, now) {
    const oldest = await oldestKeySeen(db);
    return oldest !== null && oldest <= shifted(now, -keptMilliseconds) ? [everything] : [];
  },
  async nextDue(db) {
    const oldest = await oldestKeySeen(db);
    return oldest === null ? null : shifted(oldest, keptMilliseconds);
  },
  async run(_id, tx) {
    // A day's keys at once: one by one they would each make a stop of the demo's clock.
    await pruneKeysSeen(tx.db, shifted(await tx.now(), dayMilliseconds - keptMilliseconds));
  },
};
