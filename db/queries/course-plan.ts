// Planned sessions of a course: made from a signed prescription, closed once, moved by a new row that names the old one.
// Which windows there should be is the rules' business.

import { and, asc, eq, gt, isNull, sql } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { plannedSession } from '@/db/schema/course';

export type PlannedState = 'open' | 'running' | 'done' | 'missed' | 'excused' | 'cancelled' | 'moved';

export interface PlannedRecord {
  id: string;
  courseId: string;
  participantId: string;
  prescriptionId: string;
  windowFrom: string;
  windowTo: string;
  state: PlannedState;
}

// Plain names below: in a select from one table the query builder leaves table names out, and `id` would be the inner one's.

/** A session of the row is under way, or its record is not whole. */
const isUnderWay = sql<boolean>`exists (
  select 1 from session s where s.planned_session_id = planned_session.id and s.started_at is not null and s.closed_at is null)`;

/** A row that was cancelled or moved while its phone was out of reach, and in which something was delivered after all. */
const isDelivered = sql<boolean>`exists (
  select 1 from session s where s.planned_session_id = planned_session.id and s.closed_why = 'recorded'
    and s.completeness in ('complete', 'partial'))`;

const stateColumn = sql<PlannedState>`case
  when ${isUnderWay} then 'running'
  when planned_session.closed_why is null then 'open'
  when planned_session.closed_why in ('cancelled', 'moved') and ${isDelivered} then 'done'
  else planned_session.closed_why end`;

const columns = {
  id: plannedSession.id,
  courseId: plannedSession.courseId,
  participantId: plannedSession.participantId,
  prescriptionId: plannedSession.prescriptionId,
  windowFrom: plannedSession.windowFrom,
  windowTo: plannedSession.windowTo,
  state: stateColumn,
};

/** All rows of a course, oldest window first. */
export async function listPlannedRows(db: Db, courseId: string): Promise<PlannedRecord[]> {
  return db
    .select(columns)
    .from(plannedSession)
    .where(eq(plannedSession.courseId, courseId))
    .orderBy(asc(plannedSession.windowFrom), asc(plannedSession.id));
}

export async function findPlanned(db: Db, plannedSessionId: string): Promise<PlannedRecord | null> {
  const [row] = await db.select(columns).from(plannedSession).where(eq(plannedSession.id, plannedSessionId)).limit(1);
  return row ?? null;
}

export interface NewPlanned {
  id: string;
  courseId: string;
  participantId: string;
  prescriptionId: string;
  windowFrom: string;
  windowTo: string;
  /** The row that this one takes the place of. */
  replacesId?: string | null;
  createdAt: string;
}

export async function insertPlanned(db: Db, rows: readonly NewPlanned[]): Promise<void> {
  if (rows.length > 0) await db.insert(plannedSession).values([...rows]);
}

/** Closes one row, once. False when it was closed already. */
export async function closePlanned(
  db: Db,
  plannedSessionId: string,
  at: string,
  why: Exclude<PlannedState, 'open' | 'running'>,
): Promise<boolean> {
  const rows = await db
    .update(plannedSession)
    .set({ closedAt: at, closedWhy: why })
    .where(and(eq(plannedSession.id, plannedSessionId), isNull(plannedSession.closedAt)))
    .returning({ id: plannedSession.id });
  return rows.length > 0;
}

/**
 * Cancels what is still to come in a course. A row whose session is under way stays, and so does one whose window is over:
 * that one was missed, whatever was signed since. Answers with how many.
 */
export async function cancelOpenPlanned(db: Db, courseId: string, at: string): Promise<number> {
  const rows = await db
    .update(plannedSession)
    .set({ closedAt: at, closedWhy: 'cancelled' })
    .where(
      and(
        eq(plannedSession.courseId, courseId),
        isNull(plannedSession.closedAt),
        gt(plannedSession.windowTo, at),
        sql`not ${isUnderWay}`,
      ),
    )
    .returning({ id: plannedSession.id });
  return rows.length;
}

/** How many sessions of a course are done, and how many are still to come. */
export async function countPlanned(db: Db, courseId: string): Promise<{ done: number; open: number }> {
  const states = db
    .select({ state: stateColumn.as('state') })
    .from(plannedSession)
    .where(eq(plannedSession.courseId, courseId))
    .as('states');
  const [row] = await db
    .select({
      done: sql<number>`count(*) filter (where ${states.state} = 'done')::int`,
      open: sql<number>`count(*) filter (where ${states.state} in ('open', 'running'))::int`,
    })
    .from(states);
  return row ?? { done: 0, open: 0 };
}
