// A course as a whole: found, locked, opened, paused, closed, and the view that its readers share. At most one active course
// a person, by the partial unique index.

import { and, desc, eq, inArray, isNotNull, isNull, sql } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { acknowledgement, course, coursePause, prescription } from '@/db/schema/course';
import { participant } from '@/db/schema/participant';
import { listMarks, type CourseMarkRecord } from './course';
import { doseOf, type DoseRecord } from './dose';

export interface CourseRecord {
  id: string;
  participantId: string;
  siteId: string;
  createdAt: string;
  closedAt: string | null;
  closedWhy: string | null;
}

export async function findCourse(db: Db, courseId: string): Promise<CourseRecord | null> {
  const [row] = await db.select().from(course).where(eq(course.id, courseId)).limit(1);
  return row ?? null;
}

/** The course under its row lock; the participant's lock comes before it. */
export async function lockCourse(db: Db, courseId: string): Promise<CourseRecord | null> {
  const [row] = await db.select().from(course).where(eq(course.id, courseId)).limit(1).for('update');
  return row ?? null;
}

export async function findActiveCourse(db: Db, participantId: string): Promise<CourseRecord | null> {
  const [row] = await db
    .select()
    .from(course)
    .where(and(eq(course.participantId, participantId), isNull(course.closedAt)))
    .limit(1);
  return row ?? null;
}

/** The active course, or else the one made last: what a person's page shows. */
export async function findNewestCourse(db: Db, participantId: string): Promise<CourseRecord | null> {
  const [row] = await db
    .select()
    .from(course)
    .where(eq(course.participantId, participantId))
    .orderBy(desc(sql`${course.closedAt} is null`), desc(course.createdAt))
    .limit(1);
  return row ?? null;
}

/** Active or newest course of each participant that has one. */
export async function listNewestCourses(db: Db, participantIds: readonly string[]): Promise<Map<string, string>> {
  if (participantIds.length === 0) return new Map();
  const rows = await db
    .selectDistinctOn([course.participantId], { participantId: course.participantId, id: course.id })
    .from(course)
    .where(inArray(course.participantId, [...participantIds]))
    .orderBy(course.participantId, desc(sql`${course.closedAt} is null`), desc(course.createdAt));
  return new Map(rows.map((row) => [row.participantId, row.id]));
}

export async function insertCourse(
  db: Db,
  row: { id: string; participantId: string; siteId: string; createdAt: string },
): Promise<void> {
  await db.insert(course).values(row);
}

/** Closes a course, once. False when it was closed already. */
export async function closeCourse(
  db: Db,
  courseId: string,
  at: string,
  why: 'finished' | 'withdrawn',
): Promise<boolean> {
  const rows = await db
    .update(course)
    .set({ closedAt: at, closedWhy: why })
    .where(and(eq(course.id, courseId), isNull(course.closedAt)))
    .returning({ id: course.id });
  return rows.length > 0;
}

export async function findOpenPause(db: Db, courseId: string): Promise<{ id: string; reason: string } | null> {
  const [row] = await db
    .select({ id: coursePause.id, reason: coursePause.reason })
    .from(coursePause)
    .where(and(eq(coursePause.courseId, courseId), isNull(coursePause.closedAt)))
    .limit(1);
  return row ?? null;
}

export async function insertPause(
  db: Db,
  row: { id: string; courseId: string; reason: string; by: string; createdAt: string },
): Promise<void> {
  await db.insert(coursePause).values(row);
}

export async function closePause(db: Db, pauseId: string, at: string): Promise<void> {
  await db
    .update(coursePause)
    .set({ closedAt: at, closedWhy: 'resumed' })
    .where(and(eq(coursePause.id, pauseId), isNull(coursePause.closedAt)));
}

/** Same shape as `CourseView` of the contract, but for adherence, which is the rule's. */
export interface CourseOverview {
  id: string;
  participantId: string;
  state: 'active' | 'paused' | 'finished' | 'withdrawn';
  startsOn: string;
  zone: string;
  prescriptionId: string | null;
  prescriptionVersion: number | null;
  awaitingAcknowledgement: boolean;
  dose: DoseRecord | null;
  sessionsTotal: number;
  sessionsDone: number;
  marks: CourseMarkRecord[];
}

// Plain names in what follows: a correlated subquery must say whose id it means.

/** Sessions done, of each course: closed as done, or delivered in a row that had been cancelled or moved. */
const sessionsDone = sql<number>`(
  select count(*)::int from planned_session p where p.course_id = course.id and (
    p.closed_why = 'done' or (p.closed_why in ('cancelled', 'moved') and exists (
      select 1 from session s where s.planned_session_id = p.id and s.closed_why = 'recorded'
        and s.completeness in ('complete', 'partial')))))`;

const isPaused = sql<boolean>`exists (select 1 from course_pause p where p.course_id = course.id and p.closed_at is null)`;

/** First day of the first signed version, else the day when the course was made. */
const startsOn = sql<string>`coalesce(
  (select min(p.starts_on) from prescription p where p.course_id = course.id and p.signed_at is not null),
  (course.created_at at time zone participant.zone)::date)::text`;

/** The newest signed version of each course: the one in force, or the last of a course that is over. */
async function listNewestVersions(db: Db, courseIds: readonly string[]) {
  const rows = await db
    .selectDistinctOn([prescription.courseId], { prescription, acknowledgedAt: acknowledgement.createdAt })
    .from(prescription)
    .leftJoin(acknowledgement, eq(acknowledgement.prescriptionId, prescription.id))
    .where(and(inArray(prescription.courseId, [...courseIds]), isNotNull(prescription.signedAt)))
    .orderBy(prescription.courseId, desc(prescription.version));
  return new Map(rows.map((row) => [row.prescription.courseId, row]));
}

function stateOf(row: { closedWhy: string | null; isPaused: boolean }): CourseOverview['state'] {
  if (row.closedWhy === 'withdrawn') return 'withdrawn';
  if (row.closedWhy !== null) return 'finished';
  return row.isPaused ? 'paused' : 'active';
}

/** The overview of any number of courses in three statements. */
export async function listCourseOverviews(
  db: Db,
  courseIds: readonly string[],
  now: string,
): Promise<Map<string, CourseOverview>> {
  if (courseIds.length === 0) return new Map();
  const rows = await db
    .select({
      id: course.id,
      participantId: course.participantId,
      closedWhy: course.closedWhy,
      zone: participant.zone,
      isPaused,
      sessionsDone,
      startsOn,
    })
    .from(course)
    .innerJoin(participant, eq(participant.id, course.participantId))
    .where(inArray(course.id, [...courseIds]));
  const versions = await listNewestVersions(db, courseIds);
  const marks = await listMarks(db, courseIds, now);
  const overviews = new Map<string, CourseOverview>();
  for (const row of rows) {
    const newest = versions.get(row.id);
    overviews.set(row.id, {
      id: row.id,
      participantId: row.participantId,
      state: stateOf(row),
      startsOn: row.startsOn,
      zone: row.zone,
      prescriptionId: newest?.prescription.id ?? null,
      prescriptionVersion: newest?.prescription.version ?? null,
      awaitingAcknowledgement:
        newest !== undefined && newest.prescription.closedAt === null && newest.acknowledgedAt === null,
      dose: newest ? doseOf(newest.prescription) : null,
      sessionsTotal: newest?.prescription.sessionsTotal ?? 0,
      sessionsDone: row.sessionsDone,
      marks: marks.get(row.id) ?? [],
    });
  }
  return overviews;
}
