// Courses: their planned sessions, the marks of the strip, and the facts that adherence is judged by. For any number of
// courses one statement; decides nothing about what may be planned or who may start.

import { and, asc, desc, eq, inArray, isNotNull, isNull, max, ne, or, sql } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { course, coursePause, plannedSession, prescription } from '@/db/schema/course';
import { diary, lockout, review, session, worklistItem } from '@/db/schema/session';
import { minuteMilliseconds } from '@/shared/values/units';

/** Same shape as `CourseMark` of the contract. */
export interface CourseMarkRecord {
  plannedSessionId: string;
  sessionId: string | null;
  number: number;
  state: 'delivered' | 'partial' | 'planned' | 'next' | 'missed' | 'held' | 'running' | 'excused' | 'cancelled';
  fraction: number | null;
  windowFrom: string;
  windowTo: string;
  startedAt: string | null;
  deliveredMinutes: number | null;
  plannedMinutes: number;
  headache: number | null;
}

/** The one session that stands for a planned one: begun, not shown to be unused; the latest if there were several. */
function sessionOfPlanned(db: Db, courseIds: readonly string[]) {
  return db
    .selectDistinctOn([session.plannedSessionId], {
      plannedSessionId: session.plannedSessionId,
      id: sql<string>`${session.id}`.as('begun_session_id'),
      startedAt: session.startedAt,
      endedAt: session.endedAt,
      isClosed: sql<boolean>`${session.closedAt} is not null`.as('begun_is_closed'),
      onMs: sql<number | null>`${session.onMs}`.as('begun_on_ms'),
      fractionPermille: session.fractionPermille,
      completeness: session.completeness,
    })
    .from(session)
    .where(
      and(
        inArray(session.courseId, [...courseIds]),
        isNotNull(session.startedAt),
        or(isNull(session.closedWhy), ne(session.closedWhy, 'unused')),
      ),
    )
    .orderBy(session.plannedSessionId, desc(session.startedAt))
    .as('of_planned');
}

/** Worst headache of a session's pages. */
function headacheOfSession(db: Db, courseIds: readonly string[]) {
  return db
    .select({ sessionId: diary.sessionId, headache: max(diary.headache).as('worst_headache') })
    .from(diary)
    .innerJoin(session, eq(session.id, diary.sessionId))
    .where(inArray(session.courseId, [...courseIds]))
    .groupBy(diary.sessionId)
    .as('of_session');
}

/** Who is held now: a lockout that is open, and if it is a hold, not over. */
function heldParticipants(db: Db, courseIds: readonly string[], now: string) {
  return db
    .selectDistinct({ participantId: lockout.participantId })
    .from(lockout)
    .innerJoin(course, eq(course.participantId, lockout.participantId))
    .where(
      and(
        inArray(course.id, [...courseIds]),
        isNull(lockout.closedAt),
        sql`(${lockout.until} is null or ${lockout.until} > ${now})`,
      ),
    )
    .as('held');
}

function loadStrip(db: Db, courseIds: readonly string[], now: string) {
  const ofPlanned = sessionOfPlanned(db, courseIds);
  const ofSession = headacheOfSession(db, courseIds);
  const held = heldParticipants(db, courseIds, now);
  return db
    .select({
      courseId: plannedSession.courseId,
      plannedSessionId: plannedSession.id,
      windowFrom: plannedSession.windowFrom,
      windowTo: plannedSession.windowTo,
      closedWhy: plannedSession.closedWhy,
      plannedOnMs: prescription.onMs,
      sessionId: ofPlanned.id,
      startedAt: ofPlanned.startedAt,
      isClosed: ofPlanned.isClosed,
      onMs: ofPlanned.onMs,
      fractionPermille: ofPlanned.fractionPermille,
      completeness: ofPlanned.completeness,
      headache: ofSession.headache,
      heldId: held.participantId,
    })
    .from(plannedSession)
    .innerJoin(prescription, eq(prescription.id, plannedSession.prescriptionId))
    .leftJoin(ofPlanned, eq(ofPlanned.plannedSessionId, plannedSession.id))
    .leftJoin(ofSession, eq(ofSession.sessionId, ofPlanned.id))
    .leftJoin(held, eq(held.participantId, plannedSession.participantId))
    .where(
      and(
        inArray(plannedSession.courseId, [...courseIds]),
        // A cancelled or moved one leaves the strip, unless something was delivered in it.
        or(
          isNull(plannedSession.closedWhy),
          inArray(plannedSession.closedWhy, ['done', 'missed', 'excused']),
          isNotNull(ofPlanned.id),
        ),
      ),
    )
    .orderBy(
      asc(plannedSession.courseId),
      asc(plannedSession.windowFrom),
      asc(plannedSession.createdAt),
      asc(plannedSession.id),
    );
}

type StripRow = Awaited<ReturnType<typeof loadStrip>>[number];

/** Hardly any current flowed and the window is still open: the session is still to be done. */
function isStillToDo(row: StripRow, now: string): boolean {
  if (row.closedWhy !== null || row.windowTo <= now) return false;
  return row.sessionId === null || (row.isClosed === true && row.completeness === 'not_delivered');
}

function stateOf(row: StripRow, isNext: boolean, now: string): CourseMarkRecord['state'] {
  if (row.sessionId !== null && !isStillToDo(row, now)) {
    if (row.isClosed !== true) return 'running';
    return row.completeness === 'complete' ? 'delivered' : 'partial';
  }
  if (row.closedWhy === 'done') return 'partial';
  if (row.closedWhy === 'excused') return 'excused';
  if (row.closedWhy !== null || row.windowTo <= now) return 'missed';
  const isOpenNow = row.windowFrom <= now;
  if (row.heldId !== null && (isNext || isOpenNow)) return 'held';
  return isNext ? 'next' : 'planned';
}

/**
 * The strips of any number of courses, oldest window first, numbered in running order. Moved and cancelled sessions are left
 * out. A course without planned sessions has an empty strip.
 */
export async function listMarks(
  db: Db,
  courseIds: readonly string[],
  now: string,
): Promise<Map<string, CourseMarkRecord[]>> {
  const strips = new Map<string, CourseMarkRecord[]>(courseIds.map((id) => [id, []]));
  if (courseIds.length === 0) return strips;
  const withNext = new Set<string>();
  for (const row of await loadStrip(db, courseIds, now)) {
    const strip = strips.get(row.courseId) ?? [];
    const isNext = isStillToDo(row, now) && !withNext.has(row.courseId);
    if (isNext) withNext.add(row.courseId);
    strip.push({
      plannedSessionId: row.plannedSessionId,
      sessionId: row.sessionId,
      number: strip.length + 1,
      state: stateOf(row, isNext, now),
      fraction: row.fractionPermille === null ? null : row.fractionPermille / 1000,
      windowFrom: row.windowFrom,
      windowTo: row.windowTo,
      startedAt: row.startedAt,
      deliveredMinutes: row.onMs === null ? null : row.onMs / minuteMilliseconds,
      plannedMinutes: row.plannedOnMs / minuteMilliseconds,
      headache: row.headache,
    });
    strips.set(row.courseId, strip);
  }
  return strips;
}

/** Same shape as `AdherenceFacts` of shared/rules/adherence.ts. */
export interface PlannedFacts {
  sessions: {
    windowFrom: string;
    windowTo: string;
    state: 'complete' | 'partial' | 'not_delivered' | 'missed' | 'excused' | 'cancelled' | 'future';
    endedAt?: string;
  }[];
  holds: { from: string; until?: string }[];
  recallCallAt?: string;
}

/** The worklist matter whose review is the call before a re-start (shared/rules/adherence.ts flags it). */
export const recallMatter = 'recall_needed';

function loadPlanned(db: Db, courseIds: readonly string[]) {
  const ofPlanned = sessionOfPlanned(db, courseIds);
  return db
    .select({
      courseId: plannedSession.courseId,
      windowFrom: plannedSession.windowFrom,
      windowTo: plannedSession.windowTo,
      closedWhy: plannedSession.closedWhy,
      endedAt: ofPlanned.endedAt,
      isClosed: ofPlanned.isClosed,
      completeness: ofPlanned.completeness,
    })
    .from(plannedSession)
    .leftJoin(ofPlanned, eq(ofPlanned.plannedSessionId, plannedSession.id))
    .where(
      and(
        inArray(plannedSession.courseId, [...courseIds]),
        or(isNull(plannedSession.closedWhy), ne(plannedSession.closedWhy, 'moved'), isNotNull(ofPlanned.id)),
      ),
    )
    .orderBy(
      asc(plannedSession.courseId),
      asc(plannedSession.windowFrom),
      asc(plannedSession.createdAt),
      asc(plannedSession.id),
    );
}

type PlannedRow = Awaited<ReturnType<typeof loadPlanned>>[number];

function adherenceStateOf(row: PlannedRow): PlannedFacts['sessions'][number]['state'] {
  const isOpen = row.closedWhy === null;
  if (row.isClosed === true && !(isOpen && row.completeness === 'not_delivered'))
    return row.completeness ?? 'not_delivered';
  // Begun, its record not whole: neither done nor missed yet.
  if (row.isClosed === false || isOpen) return 'future';
  if (row.closedWhy === 'missed' || row.closedWhy === 'excused' || row.closedWhy === 'cancelled') return row.closedWhy;
  return 'not_delivered';
}

/** Lockouts and pauses of the courses' people as spans of time: what can excuse a window. */
async function listHolds(db: Db, courseIds: readonly string[]) {
  const lockouts = db
    .select({
      courseId: sql<string>`${course.id}`.as('held_course_id'),
      from: sql<string>`${lockout.openedAt}`.mapWith(lockout.openedAt).as('held_from'),
      until: sql<string | null>`least(${lockout.until}, ${lockout.closedAt})`
        .mapWith(lockout.openedAt)
        .as('held_until'),
    })
    .from(lockout)
    .innerJoin(course, eq(course.participantId, lockout.participantId))
    .where(inArray(course.id, [...courseIds]));
  const pauses = db
    .select({
      courseId: sql<string>`${coursePause.courseId}`.as('held_course_id'),
      from: sql<string>`${coursePause.createdAt}`.mapWith(coursePause.createdAt).as('held_from'),
      until: sql<string | null>`${coursePause.closedAt}`.mapWith(coursePause.createdAt).as('held_until'),
    })
    .from(coursePause)
    .where(inArray(coursePause.courseId, [...courseIds]));
  return lockouts.unionAll(pauses);
}

async function listRecallCalls(db: Db, courseIds: readonly string[]) {
  return db
    .select({ courseId: course.id, at: sql<string>`max(${review.createdAt})`.mapWith(review.createdAt) })
    .from(review)
    .innerJoin(worklistItem, eq(worklistItem.id, review.itemId))
    .innerJoin(course, eq(course.participantId, review.participantId))
    .where(and(inArray(course.id, [...courseIds]), eq(worklistItem.why, recallMatter)))
    .groupBy(course.id);
}

/** What adherence is judged by, for any number of courses: three statements, whatever their number. */
export async function listPlanned(db: Db, courseIds: readonly string[]): Promise<Map<string, PlannedFacts>> {
  const found = new Map<string, PlannedFacts>(courseIds.map((id) => [id, { sessions: [], holds: [] }]));
  if (courseIds.length === 0) return found;
  for (const row of await loadPlanned(db, courseIds)) {
    const { courseId, windowFrom, windowTo, endedAt } = row;
    found.get(courseId)?.sessions.push({
      windowFrom,
      windowTo,
      state: adherenceStateOf(row),
      ...(row.isClosed === true && endedAt !== null ? { endedAt } : {}),
    });
  }
  for (const { courseId, from, until } of await listHolds(db, courseIds)) {
    found.get(courseId)?.holds.push(until === null ? { from } : { from, until });
  }
  for (const { courseId, at } of await listRecallCalls(db, courseIds)) {
    const facts = found.get(courseId);
    if (facts) facts.recallCallAt = at;
  }
  return found;
}
