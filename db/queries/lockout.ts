// Lockouts: opened, listed, closed once. Which finding opens which is the rules' business; a safety or review lockout never
// closes by time.

import { and, asc, eq, gt, isNotNull, isNull, lte, or } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { lockout } from '@/db/schema/session';
import { voidLivePermit } from './permit';
import { openItem, type NewItem } from './worklist';

export type LockoutLevel = 'safety' | 'review' | 'device' | 'hold';

export interface NewLockout {
  id: string;
  participantId: string;
  level: LockoutLevel;
  code: string;
  source: 'precheck' | 'diary' | 'session' | 'staff';
  sourceId: string | null;
  openedAt: string;
  /** Of a hold, and of a hold only. */
  until: string | null;
}

export async function insertLockout(db: Db, row: NewLockout): Promise<void> {
  await db.insert(lockout).values(row);
}

/** What findings lead to, in one go: lockouts, rows of the worklist, and the end of a live permit. */
export async function storeConsequences(
  db: Db,
  found: { lockouts: readonly NewLockout[]; items: readonly NewItem[]; endsPermit: boolean },
  participantId: string,
  at: string,
): Promise<void> {
  if (found.lockouts.length > 0) await db.insert(lockout).values([...found.lockouts]);
  for (const item of found.items) await openItem(db, item);
  if (found.endsPermit) await voidLivePermit(db, participantId, at, 'lockout');
}

export interface OpenLockout {
  id: string;
  level: LockoutLevel;
  code: string;
  until: string | null;
}

/** Open ones; of holds those that are not over at `now`. */
export async function listOpenLockouts(db: Db, participantId: string, now: string): Promise<OpenLockout[]> {
  return db
    .select({ id: lockout.id, level: lockout.level, code: lockout.code, until: lockout.until })
    .from(lockout)
    .where(
      and(
        eq(lockout.participantId, participantId),
        isNull(lockout.closedAt),
        or(isNull(lockout.until), gt(lockout.until, now)),
      ),
    )
    .orderBy(asc(lockout.openedAt), asc(lockout.id));
}

/** Lockouts that one diary page, pre-check or session opened. */
export async function listLockoutsFrom(db: Db, sourceIds: readonly string[]) {
  if (sourceIds.length === 0) return [];
  return db
    .select({ sourceId: lockout.sourceId, level: lockout.level, code: lockout.code })
    .from(lockout)
    .where(or(...sourceIds.map((sourceId) => eq(lockout.sourceId, sourceId))))
    .orderBy(asc(lockout.openedAt), asc(lockout.id));
}

/** Closes one, once. False when it was closed already. */
export async function closeLockout(db: Db, lockoutId: string, at: string, why: string): Promise<boolean> {
  const closed = await db
    .update(lockout)
    .set({ closedAt: at, closedWhy: why })
    .where(and(eq(lockout.id, lockoutId), isNull(lockout.closedAt)))
    .returning({ id: lockout.id });
  return closed.length > 0;
}

/** Holds that are over but not closed. */
export async function listEndedHolds(db: Db, now: string, limit: number): Promise<string[]> {
  const rows = await db
    .select({ id: lockout.id })
    .from(lockout)
    .where(and(isNull(lockout.closedAt), lte(lockout.until, now)))
    .orderBy(asc(lockout.until))
    .limit(limit);
  return rows.map((row) => row.id);
}

export async function findHold(db: Db, lockoutId: string) {
  const [row] = await db
    .select({ id: lockout.id, participantId: lockout.participantId, code: lockout.code, until: lockout.until })
    .from(lockout)
    .where(and(eq(lockout.id, lockoutId), isNull(lockout.closedAt), isNotNull(lockout.until)))
    .limit(1);
  return row ?? null;
}

/** When the next hold ends; null without one. */
export async function findNextHoldEnd(db: Db): Promise<string | null> {
  const [row] = await db
    .select({ until: lockout.until })
    .from(lockout)
    .where(and(isNull(lockout.closedAt), isNotNull(lockout.until)))
    .orderBy(asc(lockout.until))
    .limit(1);
  return row?.until ?? null;
}
