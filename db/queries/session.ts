// Sessions and their events: found, locked, listed, begun once, closed once. Events are added and never changed. What a record amounts to
// is asked of shared/rules/session-summary.ts.

import { and, asc, desc, eq, inArray, isNull, lt, or, sql } from 'drizzle-orm';
import { z } from 'zod';
import type { Db } from '@/db/client';
import { prescription } from '@/db/schema/course';
import { participant } from '@/db/schema/participant';
import { permit, session, sessionEvent } from '@/db/schema/session';
import { coulombOf, secondsOf } from '@/shared/values/units';
import { doseOf, type DoseRecord } from './dose';

/** A record of an older shape has less to show; it is still a record. */
const storedSummary = z.object({
  curve: z.array(z.tuple([z.number(), z.number()])).default([]),
  contact: z
    .array(z.object({ position: z.string(), worstKiloohm: z.number().nullable(), lastKiloohm: z.number().nullable() }))
    .default([]),
  pauses: z.array(z.object({ atSeconds: z.number(), lengthSeconds: z.number() })).default([]),
  sensations: z.array(z.object({ atSeconds: z.number(), sensation: z.string(), strength: z.number() })).default([]),
  gaps: z.array(z.object({ fromSeconds: z.number(), toSeconds: z.number() })).default([]),
  conflicts: z.number().default(0),
});
export type StoredSummary = z.infer<typeof storedSummary>;

export interface SessionRecord {
  id: string;
  permitId: string;
  courseId: string;
  participantId: string;
  siteId: string;
  zone: string;
  plannedSessionId: string;
  createdAt: string;
  startedAt: string | null;
  endedAt: string | null;
  endReason: string | null;
  closedAt: string | null;
  closedWhy: string | null;
  permit: {
    closedWhy: string | null;
    issuedAt: string;
    expiresAt: string;
    deviceId: string;
    prescriptionVersion: number;
    minGapMs: number;
  };
  dose: DoseRecord;
  sessionsTotal: number;
  /** Null until the record is whole, and where nothing is known to have been measured. */
  delivered: {
    chargeCoulomb: number | null;
    upperChargeCoulomb: number;
    seconds: number;
    fraction: number;
    completeness: 'complete' | 'partial' | 'not_delivered';
  } | null;
  summary: StoredSummary | null;
}

function selectSessions(db: Db) {
  return db
    .select({ session, permit, prescription, siteId: participant.siteId, zone: participant.zone })
    .from(session)
    .innerJoin(permit, eq(permit.id, session.permitId))
    .innerJoin(prescription, eq(prescription.id, permit.prescriptionId))
    .innerJoin(participant, eq(participant.id, session.participantId));
}

type SessionRow = Awaited<ReturnType<typeof selectSessions>>[number];

function deliveredOf({
  upperUc,
  completeness,
  deliveredUc,
  onMs,
  fractionPermille,
}: SessionRow['session']): SessionRecord['delivered'] {
  if (upperUc === null || completeness === null) return null;
  return {
    chargeCoulomb: deliveredUc === null ? null : coulombOf(deliveredUc),
    upperChargeCoulomb: coulombOf(upperUc),
    seconds: secondsOf(onMs ?? 0),
    fraction: (fractionPermille ?? 0) / 1000,
    completeness,
  };
}

function recordOf(row: SessionRow): SessionRecord {
  const own = row.session;
  const { closedWhy, issuedAt, expiresAt, deviceId } = row.permit;
  return {
    id: own.id,
    permitId: own.permitId,
    courseId: own.courseId,
    participantId: own.participantId,
    siteId: row.siteId,
    zone: row.zone,
    plannedSessionId: own.plannedSessionId,
    createdAt: own.createdAt,
    startedAt: own.startedAt,
    endedAt: own.endedAt,
    endReason: own.endReason,
    closedAt: own.closedAt,
    closedWhy: own.closedWhy,
    permit: {
      closedWhy,
      issuedAt,
      expiresAt,
      deviceId,
      prescriptionVersion: row.prescription.version ?? 0,
      minGapMs: row.prescription.minGapMs,
    },
    dose: doseOf(row.prescription),
    sessionsTotal: row.prescription.sessionsTotal,
    delivered: deliveredOf(own),
    summary: own.summary === null ? null : storedSummary.parse(own.summary),
  };
}

export async function findSession(db: Db, sessionId: string): Promise<SessionRecord | null> {
  const [row] = await selectSessions(db).where(eq(session.id, sessionId)).limit(1);
  return row ? recordOf(row) : null;
}

export async function findSessionOfPermit(db: Db, permitId: string): Promise<SessionRecord | null> {
  const [row] = await selectSessions(db).where(eq(session.permitId, permitId)).limit(1);
  return row ? recordOf(row) : null;
}

/** Begun sessions of a participant, the latest first; those that a read-out showed never to have run are left out. */
export async function listBegunSessions(
  db: Db,
  participantId: string,
  page: { limit: number; after: { at: string; id: string } | null },
): Promise<SessionRecord[]> {
  const after =
    page.after &&
    or(lt(session.startedAt, page.after.at), and(eq(session.startedAt, page.after.at), lt(session.id, page.after.id)));
  const rows = await selectSessions(db)
    .where(
      and(
        eq(session.participantId, participantId),
        sql`${session.startedAt} is not null and ${session.closedWhy} is distinct from 'unused'`,
        after ?? undefined,
      ),
    )
    .orderBy(desc(session.startedAt), desc(session.id))
    .limit(page.limit);
  return rows.map(recordOf);
}

export interface NewSession {
  id: string;
  permitId: string;
  participantId: string;
  courseId: string;
  plannedSessionId: string;
  createdAt: string;
}

export async function insertSession(db: Db, row: NewSession): Promise<void> {
  await db.insert(session).values(row);
}

/** Sets the start, once. */
export async function startSession(db: Db, sessionId: string, startedAt: string): Promise<void> {
  await db
    .update(session)
    .set({ startedAt })
    .where(and(eq(session.id, sessionId), isNull(session.startedAt)));
}

/** Sets the end as the device told it, once; the session stays open until its record is whole. */
export async function endSession(db: Db, sessionId: string, endedAt: string, endReason: string): Promise<void> {
  await db
    .update(session)
    .set({ endedAt, endReason })
    .where(and(eq(session.id, sessionId), isNull(session.endedAt)));
}

export interface SessionClosing {
  closedAt: string;
  /** unused: the device's record shows that it never ran. */
  closedWhy: 'recorded' | 'unused';
  deliveredUc: number | null;
  upperUc: number;
  onMs: number;
  fractionPermille: number;
  completeness: 'complete' | 'partial' | 'not_delivered';
  summary: StoredSummary & Readonly<Record<string, unknown>>;
}

/** Closes a session with what was delivered, once. */
export async function closeSession(db: Db, sessionId: string, row: SessionClosing): Promise<boolean> {
  const closed = await db
    .update(session)
    .set(row)
    .where(and(eq(session.id, sessionId), isNull(session.closedAt)))
    .returning({ id: session.id });
  return closed.length > 0;
}

export interface EventRow {
  id: string;
  sequence: number;
  atMs: number;
  kind: string;
  body: unknown;
  contentHash: string;
  receivedAt: string;
}

/** The caller has sorted out ids and sequences that are there already. */
export async function insertEvents(db: Db, sessionId: string, rows: readonly EventRow[]): Promise<void> {
  if (rows.length > 0) await db.insert(sessionEvent).values(rows.map((row) => ({ ...row, sessionId })));
}

/** Id, place and hash of every event that is kept: enough to tell new from known. */
export async function listKeptEvents(db: Db, sessionId: string) {
  return db
    .select({
      id: sessionEvent.id,
      sequence: sessionEvent.sequence,
      kind: sessionEvent.kind,
      contentHash: sessionEvent.contentHash,
    })
    .from(sessionEvent)
    .where(eq(sessionEvent.sessionId, sessionId));
}

/** The events themselves in their own order; of some kinds if so asked. */
export async function listEventBodies(
  db: Db,
  sessionId: string,
  want: { kinds?: readonly string[] } = {},
): Promise<unknown[]> {
  const rows = await db
    .select({ body: sessionEvent.body })
    .from(sessionEvent)
    .where(
      and(eq(sessionEvent.sessionId, sessionId), want.kinds ? inArray(sessionEvent.kind, [...want.kinds]) : undefined),
    )
    .orderBy(asc(sessionEvent.sequence));
  return rows.map((row) => row.body);
}

/** How a participant's closed sessions ended, old to new, at most so many. */
export async function listEndReasons(db: Db, participantId: string, limit: number): Promise<string[]> {
  const rows = await db
    .select({ endReason: session.endReason })
    .from(session)
    .where(and(eq(session.participantId, participantId), eq(session.closedWhy, 'recorded')))
    .orderBy(desc(session.endedAt))
    .limit(limit);
  return rows.map((row) => row.endReason ?? '').reverse();
}
