// The house's own rows: outbox, keys seen, heartbeats, the demo's mailbox, advisory locks. No clinical row is touched here.

import { and, asc, desc, eq, gt, isNull, lt, lte, min, or, sql } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { demoMail, demoProgress, heartbeat, keySeen, outbox } from '@/db/schema/house';

export interface NewOutboxRow {
  id: string;
  kind: string;
  facts: Readonly<Record<string, string | number | boolean | null>>;
  toEmail: string;
  language: string;
  key: string;
  urgent: boolean;
  createdAt: string;
  dueAt: string;
  dropAt: string | null;
}

/**
 * Keeps mails to be sent; one whose key is there already is left out. No target is named: that would ask to read the outbox, which whoever
 * causes a mail may not (D22).
 */
export async function insertOutbox(db: Db, rows: readonly NewOutboxRow[]): Promise<void> {
  if (rows.length === 0) return;
  await db
    .insert(outbox)
    .values([...rows])
    .onConflictDoNothing();
}

export type OutboxRow = typeof outbox.$inferSelect;

/**
 * Takes due rows for one sender: urgent ones first, rows that another sender holds left out. A taken row is not due again before
 * `heldUntil`, so that a sender that dies is followed by another: at least once, never lost.
 */
export async function claimOutbox(db: Db, now: string, heldUntil: string, limit: number): Promise<OutboxRow[]> {
  const due = db
    .select({ id: outbox.id })
    .from(outbox)
    .where(and(isNull(outbox.closedAt), lte(outbox.dueAt, now)))
    .orderBy(desc(outbox.urgent), asc(outbox.dueAt))
    .limit(limit)
    .for('update', { skipLocked: true });
  const rows = await db
    .update(outbox)
    .set({ dueAt: heldUntil, attempts: sql`${outbox.attempts} + 1` })
    .where(sql`${outbox.id} in (${due})`)
    .returning();
  return rows.sort((a, b) => Number(b.urgent) - Number(a.urgent) || a.createdAt.localeCompare(b.createdAt));
}

/** Closes a row for good and forgets its links: they carry tokens, and the mail alone may have those. */
export async function closeOutbox(db: Db, id: string, at: string, why: 'sent' | 'dropped' | 'refused'): Promise<void> {
  await db
    .update(outbox)
    .set({ closedAt: at, closedWhy: why, facts: sql`${outbox.facts} - 'path' - 'stopPath'` })
    .where(and(eq(outbox.id, id), isNull(outbox.closedAt)));
}

export async function postponeOutbox(db: Db, id: string, dueAt: string, error: string): Promise<void> {
  await db
    .update(outbox)
    .set({ dueAt, lastError: error })
    .where(and(eq(outbox.id, id), isNull(outbox.closedAt)));
}

/** When the next mail is due; null when none waits. */
export async function nextOutboxDue(db: Db): Promise<string | null> {
  const [row] = await db
    .select({ at: min(outbox.dueAt) })
    .from(outbox)
    .where(isNull(outbox.closedAt));
  return row?.at ?? null;
}

export type KeySeen = typeof keySeen.$inferSelect;

export async function findKeySeen(db: Db, accountId: string, key: string): Promise<KeySeen | null> {
  const [row] = await db
    .select()
    .from(keySeen)
    .where(and(eq(keySeen.accountId, accountId), eq(keySeen.key, key)))
    .limit(1);
  return row ?? null;
}

export async function insertKeySeen(db: Db, row: typeof keySeen.$inferInsert): Promise<void> {
  await db.insert(keySeen).values(row).onConflictDoNothing();
}

/** Forgets keys older than `before`. Returns how many. */
export async function pruneKeysSeen(db: Db, before: string): Promise<number> {
  const { rowCount } = await db.delete(keySeen).where(lt(keySeen.createdAt, before));
  return rowCount ?? 0;
}

export async function oldestKeySeen(db: Db): Promise<string | null> {
  const [row] = await db.select({ at: min(keySeen.createdAt) }).from(keySeen);
  return row?.at ?? null;
}

/** Waits until nobody else in the database holds this name; let go of at the end of the transaction. */
export async function lockName(db: Db, name: string): Promise<void> {
  await db.execute(sql`select pg_advisory_xact_lock(hashtextextended(${name}, 0))`);
}

/** True if nobody else in the database holds this name. */
export async function tryLockName(db: Db, name: string): Promise<boolean> {
  const { rows } = await db.execute<{ held: boolean }>(
    sql`select pg_try_advisory_xact_lock(hashtextextended(${name}, 0)) as held`,
  );
  return rows[0]?.held === true;
}

/** Says that jobs run, in real time. */
export async function beat(db: Db, name: string): Promise<void> {
  const at = sql`clock_timestamp()`;
  await db.insert(heartbeat).values({ name, at }).onConflictDoUpdate({ target: heartbeat.name, set: { at } });
}

/** True when some process ran jobs within the last `seconds`. */
export async function hasBeaten(db: Db, seconds: number): Promise<boolean> {
  const [row] = await db
    .select({ name: heartbeat.name })
    .from(heartbeat)
    .where(gt(heartbeat.at, sql`clock_timestamp() - make_interval(secs => ${seconds})`))
    .limit(1);
  return row !== undefined;
}

/** Takes beats of processes that ended long ago out of the way. */
export async function forgetBeats(db: Db, seconds: number): Promise<void> {
  await db.delete(heartbeat).where(lt(heartbeat.at, sql`clock_timestamp() - make_interval(secs => ${seconds})`));
}

export type DemoMail = typeof demoMail.$inferSelect;

export async function insertDemoMail(db: Db, mail: DemoMail): Promise<void> {
  await db.insert(demoMail).values(mail);
}

/** Mails of the demo's catcher, newest first. */
export async function listDemoMails(db: Db, to: string | undefined, limit: number): Promise<DemoMail[]> {
  return db
    .select()
    .from(demoMail)
    .where(to === undefined ? undefined : or(eq(demoMail.toEmail, to), eq(demoMail.toEmail, to.toLowerCase())))
    .orderBy(desc(demoMail.sentAt), desc(demoMail.id))
    .limit(limit);
}

/** Facts of the newest invitation that waits to be sent to an address; null when none does. Only the demo reads links here. */
export async function findOutboxFacts(db: Db, toEmail: string): Promise<unknown> {
  const [row] = await db
    .select({ facts: outbox.facts })
    .from(outbox)
    .where(and(eq(outbox.toEmail, toEmail), isNull(outbox.closedAt), sql`${outbox.kind} like '%_invitation'`))
    .orderBy(desc(outbox.createdAt))
    .limit(1);
  return row?.facts ?? null;
}

/** What a step of the demo made; null when it was not done yet. */
export async function findDemoStep(db: Db, step: string): Promise<unknown> {
  const [row] = await db
    .select({ facts: demoProgress.facts })
    .from(demoProgress)
    .where(eq(demoProgress.step, step))
    .limit(1);
  return row?.facts ?? null;
}

export async function insertDemoStep(db: Db, step: string, facts: unknown): Promise<void> {
  await db.insert(demoProgress).values({ step, facts }).onConflictDoNothing();
}
