// All scheduled work: what there is, and running what is due. What a job does stands in its feature; when it is due, too.

import type { Job } from '@/server/action';
import type { Delivery } from '@/server/mail/deliver-outbox';
import type { Transact } from '@/server/transact';
import { nextOutboxDue } from '@/db/queries/house';
import { setOffset, readOffset } from '@/db/queries/clock';
import { endHolds } from '@/server/features/lockout/end-holds';
import { escalatePages } from '@/server/features/lockout/escalate-pages';
import { expirePermits } from '@/server/features/permit/expire-permits';
import { markMissed } from '@/server/features/session/mark-missed';
import { remind } from '@/server/features/session/remind';
import { anchorAudit } from '@/server/house/anchor-audit';
import { forgetKeys } from '@/server/house/forget-keys';

/** In the order in which they matter when much is due at once. */
export const jobs: readonly Job[] = [escalatePages, endHolds, expirePermits, markMissed, remind, forgetKeys, anchorAudit];

export interface Runner {
  /** Runs everything that is due now, mails too, until nothing is. Returns how much was done. */
  runDue(): Promise<number>;
  /** The demo's clock: goes from one due instant to the next, so that things happen at their time. */
  moveClock(seconds: number): Promise<{ now: string; jobsRun: number }>;
}

/** Passes over the table before a run gives up on quiet: a job that opens work for another needs two or three (own choice). */
const passesMost = 50;
/** The step over work that stays due because it fails (own choice). */
const stuckStepSeconds = 3600;

export function makeRunner(
  transact: Transact,
  delivery: Delivery,
  onFault: (error: unknown, job: string) => void,
  table: readonly Job[] = jobs,
): Runner {
  const { db } = transact;

  async function runDue(): Promise<number> {
    let done = 0;
    // What failed, or is still due after it ran, waits for the next wake: a job that cannot finish must not hold the others up.
    const tried = new Set<string>();
    for (let pass = 0; pass < passesMost; pass += 1) {
      const before = done;
      const now = await transact.now();
      for (const job of table) done += await runOne(job, now, tried);
      done += await delivery.deliverDue();
      if (done === before) break;
    }
    return done;
  }

  async function runOne(job: Job, now: string, tried: Set<string>): Promise<number> {
    let done = 0;
    for (const id of await job.listDue(db, now)) {
      const name = `${job.name}:${id}`;
      if (tried.has(name)) continue;
      tried.add(name);
      try {
        if (await transact.job(job, id)) done += 1;
      } catch (error) {
        onFault(error, job.name);
      }
    }
    return done;
  }

  /** Seconds from `now` to the next due instant; null when nothing waits. */
  async function secondsToNext(now: string): Promise<number | null> {
    const dues = [await nextOutboxDue(db), ...(await Promise.all(table.map((job) => job.nextDue(db))))];
    const waits = dues.flatMap((due) => (due === null ? [] : [Math.ceil((Date.parse(due) - Date.parse(now)) / 1000)]));
    if (waits.length === 0) return null;
    const ahead = waits.filter((seconds) => seconds > 0);
    // Work that stays due hides when its kind is due next: then the step is short enough to miss nothing by much.
    return Math.min(...ahead, ...(ahead.length < waits.length ? [stuckStepSeconds] : []));
  }

  async function moveClock(seconds: number): Promise<{ now: string; jobsRun: number }> {
    const goal = (await readOffset(db)) + seconds;
    let jobsRun = await runDue();
    for (let offset = goal - seconds; offset < goal;) {
      const wait = await secondsToNext(await transact.now());
      offset = wait === null ? goal : Math.min(goal, offset + Math.max(1, wait));
      await setOffset(db, offset);
      jobsRun += await runDue();
    }
    return { now: await transact.now(), jobsRun };
  }

  return { runDue, moveClock };
}
