// The server's clocks: `houseNow` for rules, jobs and permits (the demo may move it); `elapsedSince` for logs. Nothing else reads the time.

import type { Db } from '@/db/client';
import { readClock } from '@/db/queries/clock';

/** The house's clock: the database's, so that every process agrees, plus the demo's offset. */
export function houseNow(db: Db, isDemo: boolean): Promise<string> {
  return readClock(db, isDemo);
}

/** Milliseconds of this process, for measuring only. */
export function tick(): number {
  return performance.now();
}

/** The computer's own clock, for sign-in alone: the demo never moves it. */
export function realNow(): Date {
  return new Date();
}
