// The database's clock, and with DEMO=1 how far the demo's clock is ahead of it. The only SQL that reads the time.

import { sql } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { demoClock } from '@/db/schema/house';

/** The demo's clock is one row. */
const onlyRow = 1;

/**
 * Now, as an ISO instant in UTC. `clock_timestamp()` and not `now()`: after a wait for a lock, `now()` is as old as the transaction.
 * @param withOffset whether the demo's offset counts; without DEMO a stray row changes nothing
 */
export async function readClock(db: Db, withOffset: boolean): Promise<string> {
  const offset = sql`make_interval(secs => coalesce((select ${demoClock.offsetSeconds} from ${demoClock} where ${demoClock.id} = ${onlyRow}), 0))`;
  const moment = withOffset ? sql`clock_timestamp() + ${offset}` : sql`clock_timestamp()`;
  const { rows } = await db.execute<{ now: string }>(
    sql`select to_char((${moment}) at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"') as now`,
  );
  const [row] = rows;
  if (!row) throw new Error('The database did not tell the time.');
  return row.now;
}

/** Seconds that the demo's clock is ahead. */
export async function readOffset(db: Db): Promise<number> {
  const [row] = await db.select({ seconds: demoClock.offsetSeconds }).from(demoClock);
  return row?.seconds ?? 0;
}

export async function setOffset(db: Db, offsetSeconds: number): Promise<void> {
  await db
    .insert(demoClock)
    .values({ id: onlyRow, offsetSeconds })
    .onConflictDoUpdate({ target: demoClock.id, set: { offsetSeconds } });
}
