// Clearance: a person's recent sessions, planned sessions, lockouts and supplies. Loads; decides nothing.

import { and, asc, desc, eq, gt, gte, isNotNull, isNull, or, sql } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { plannedSession } from '@/db/schema/course';
import { supply } from '@/db/schema/device';
import { diary, lockout, permit, session } from '@/db/schema/session';
import { findPlanned } from '../course-plan';

/** The rules look 7 days back; sessions may be made well before they end. */
const daysBack = sql.raw(`interval '9 days'`);

/** Of the last days, every one whose record is not whole, and the last one whenever it was. */
export async function listRecentSessions(db: Db, participantId: string, now: string) {
  return db
    .select({
      id: session.id,
      courseId: session.courseId,
      startedAt: session.startedAt,
      endedAt: session.endedAt,
      upperUc: session.upperUc,
      upperMs: sql<number | null>`coalesce((${session.summary} ->> 'upperOnMs')::int, ${session.onMs})`,
      completeness: session.completeness,
      closedAt: session.closedAt,
      closedWhy: session.closedWhy,
      permitId: permit.id,
      permitExpiresAt: permit.expiresAt,
      permitClosedWhy: permit.closedWhy,
      plannedUc: permit.chargeUc,
      plannedMs: permit.onMs,
      hasDiary: sql<boolean>`exists (select 1 from ${diary} a where a.session_id = ${session.id} and a.kind = 'after')`,
      hasNextDay: sql<boolean>`exists (select 1 from ${diary} b where b.session_id = ${session.id} and b.kind = 'next_day')`,
    })
    .from(session)
    .innerJoin(permit, eq(permit.id, session.permitId))
    .where(
      and(
        eq(session.participantId, participantId),
        or(
          gte(session.createdAt, sql`${now}::timestamptz - ${daysBack}`),
          isNull(session.closedAt),
          eq(
            session.id,
            sql`(select l.id from ${session} l where l.participant_id = ${participantId} and l.ended_at is not null
              order by l.ended_at desc limit 1)`,
          ),
        ),
      ),
    )
    .orderBy(desc(session.createdAt), desc(session.id));
}

export type RecentSession = Awaited<ReturnType<typeof listRecentSessions>>[number];

/** Planned sessions of a course as its strip numbers them: moved and cancelled ones left out unless something was begun in them. */
export async function listPlannedOfCourse(db: Db, courseId: string) {
  const isBegun = sql<boolean>`exists (select 1 from ${session} s where s.planned_session_id = ${plannedSession.id}
    and s.started_at is not null and s.closed_why is distinct from 'unused')`;
  return db
    .select({
      id: plannedSession.id,
      windowFrom: plannedSession.windowFrom,
      windowTo: plannedSession.windowTo,
      closedWhy: plannedSession.closedWhy,
    })
    .from(plannedSession)
    .where(
      and(
        eq(plannedSession.courseId, courseId),
        sql`(${plannedSession.closedWhy} is null or ${plannedSession.closedWhy} in ('done', 'missed', 'excused') or ${isBegun})`,
      ),
    )
    .orderBy(asc(plannedSession.windowFrom), asc(plannedSession.createdAt), asc(plannedSession.id));
}

export type PlannedRow = Awaited<ReturnType<typeof listPlannedOfCourse>>[number];

/** Open ones, and holds that time has ended within the last day: a pre-check answered during such a hold does not count. */
export async function listLockoutsForClearance(db: Db, participantId: string, now: string) {
  return db
    .select({ level: lockout.level, code: lockout.code, until: lockout.until })
    .from(lockout)
    .where(
      and(
        eq(lockout.participantId, participantId),
        or(
          isNull(lockout.closedAt),
          and(eq(lockout.closedWhy, 'time'), gt(lockout.until, sql`${now}::timestamptz - interval '1 day'`)),
        ),
      ),
    )
    .orderBy(asc(lockout.openedAt), asc(lockout.id));
}

/** Supplies in use, each with the sessions begun since it was opened. */
export async function listSuppliesInUse(db: Db, participantId: string) {
  return db
    .select({
      kind: supply.kind,
      openedAt: supply.openedAt,
      maxUses: supply.maxUses,
      maxDays: supply.maxDays,
      // Plain names: in a select from one table the query builder leaves table names out.
      uses: sql<number>`(select count(*)::int from session s where s.participant_id = supply.participant_id
        and s.started_at >= supply.opened_at)`,
    })
    .from(supply)
    .where(and(eq(supply.participantId, participantId), isNull(supply.closedAt), isNotNull(supply.openedAt)))
    .orderBy(asc(supply.createdAt), asc(supply.id));
}

/** Which session of its course a planned one is, counted as on the strip; one that has left the strip keeps its place by its window. */
export async function findNumber(
  db: Db,
  courseId: string,
  plannedSessionId: string,
): Promise<{ number: number; of: number }> {
  const strip = await listPlannedOfCourse(db, courseId);
  const place = strip.findIndex(({ id }) => id === plannedSessionId);
  if (place >= 0) return { number: place + 1, of: strip.length };
  const planned = await findPlanned(db, plannedSessionId);
  const before = strip.filter(({ windowFrom }) => planned !== null && windowFrom < planned.windowFrom);
  return { number: before.length + 1, of: strip.length };
}

/** Start of the next window in which nothing was begun yet; null when nothing is planned. */
export async function findNextWindow(db: Db, courseId: string, now: string): Promise<string | null> {
  const [row] = await db
    .select({ windowFrom: plannedSession.windowFrom })
    .from(plannedSession)
    .where(
      and(
        eq(plannedSession.courseId, courseId),
        isNull(plannedSession.closedAt),
        gt(plannedSession.windowTo, now),
        sql`not exists (select 1 from ${session} s where s.planned_session_id = ${plannedSession.id} and s.started_at is not null
          and s.closed_at is null)`,
      ),
    )
    .orderBy(asc(plannedSession.windowFrom))
    .limit(1);
  return row?.windowFrom ?? null;
}
