// Where many people stand at once: what their state and readiness are judged by, for lists as for one person. A fixed number of statements
// whatever the number of people. Judges nothing: shared/rules/readiness.ts and participant-state.ts do.

import { and, desc, eq, gt, isNotNull, isNull, ne, or, sql } from 'drizzle-orm';
import type { PgColumn } from 'drizzle-orm/pg-core';
import type { Db } from '@/db/client';
import { account } from '@/db/schema/account';
import { acknowledgement, course, coursePause, plannedSession, prescription, signature } from '@/db/schema/course';
import { device, deviceAssignment, deviceState, supply } from '@/db/schema/device';
import { consent, participant, screening, training, watchedSession } from '@/db/schema/participant';
import { lockout, session } from '@/db/schema/session';
import { hourMilliseconds } from '@/shared/values/units';
import { listProtocolsInForce, type ProtocolInForce } from './protocol';

export interface Standing {
  participantId: string;
  siteId: string;
  zone: string;
  bornOn: string;
  isWithdrawn: boolean;
  hasAccount: boolean;
  isAccountActive: boolean;
  protocol: ProtocolInForce | null;
  /** Newest version of each kind, 0 = none. */
  consent: { ownVersion: number; guardianVersion: number; assentVersion: number; isWithdrawn: boolean };
  screening: { outcome: 'clear' | 'excluded' | 'incomplete'; validUntil: string } | null;
  training: { isSignedOff: boolean; validUntil: string | null } | null;
  watchedDone: number;
  isWatchedNow: boolean;
  device: { id: string; label: string; state: string } | null;
  supplies: number;
  course: { id: string; closedWhy: string | null; isPaused: boolean } | null;
  /** In force, else the open draft. */
  prescription: StandingPrescription | null;
  /** Start of the window of the next planned session that is not over. */
  windowFrom: string | null;
  /** Open, and of holds those that are not over. */
  lockouts: { level: 'safety' | 'review' | 'device' | 'hold'; until: string | null }[];
  /** Begun in the last 7 days, and the last one before. */
  sessions: { startedAt: string; endedAt: string | null }[];
}

export interface StandingPrescription {
  id: string;
  isSigned: boolean;
  isAcknowledged: boolean;
  awaitsSecondSignature: boolean;
  intensityUa: number;
  onMs: number;
  expiresAt: string;
  minGapHours: number;
  maxPerDay: number;
  maxPer7Days: number;
  isAssisted: boolean;
}

/** One parameter however many ids: a list of thousands would be planned anew each time. */
function among(column: PgColumn, ids: readonly string[]) {
  return sql`${column} = any(${`{${ids.join(',')}}`}::uuid[])`;
}

function listPeople(db: Db, ids: string[]) {
  return db
    .select({
      participantId: participant.id,
      siteId: participant.siteId,
      zone: participant.zone,
      bornOn: participant.bornOn,
      closedAt: participant.closedAt,
      accountId: participant.accountId,
      accountState: account.state,
    })
    .from(participant)
    .leftJoin(account, eq(account.id, participant.accountId))
    .where(among(participant.id, ids));
}

function listNewestConsents(db: Db, ids: string[]) {
  return db
    .selectDistinctOn([consent.participantId, consent.kind], {
      participantId: consent.participantId,
      kind: consent.kind,
      documentVersion: consent.documentVersion,
      closedAt: consent.closedAt,
    })
    .from(consent)
    .where(among(consent.participantId, ids))
    .orderBy(consent.participantId, consent.kind, desc(consent.createdAt), desc(consent.id));
}

function listNewestScreenings(db: Db, ids: string[]) {
  return db
    .selectDistinctOn([screening.participantId], {
      participantId: screening.participantId,
      outcome: screening.outcome,
      validUntil: screening.validUntil,
    })
    .from(screening)
    .where(among(screening.participantId, ids))
    .orderBy(screening.participantId, desc(screening.createdAt), desc(screening.id));
}

function listNewestTrainings(db: Db, ids: string[]) {
  return db
    .selectDistinctOn([training.participantId], {
      participantId: training.participantId,
      isSignedOff: training.signedOff,
      validUntil: training.validUntil,
    })
    .from(training)
    .where(among(training.participantId, ids))
    .orderBy(training.participantId, desc(training.createdAt), desc(training.id));
}

function listWatched(db: Db, ids: string[], now: string) {
  return db
    .select({
      participantId: watchedSession.participantId,
      done: sql<number>`(count(*) filter (where ${watchedSession.until} is null))::int`,
      isNow: sql<boolean>`bool_or(coalesce(${watchedSession.until} > ${now}, false))`,
    })
    .from(watchedSession)
    .where(among(watchedSession.participantId, ids))
    .groupBy(watchedSession.participantId);
}

function listDevicesOf(db: Db, ids: string[]) {
  return db
    .select({
      participantId: deviceAssignment.participantId,
      id: device.id,
      label: device.label,
      state: sql<string>`(select d.state from ${deviceState} d where d.device_id = ${device.id} order by d.number desc limit 1)`,
    })
    .from(deviceAssignment)
    .innerJoin(device, eq(device.id, deviceAssignment.deviceId))
    .where(and(among(deviceAssignment.participantId, ids), isNull(deviceAssignment.closedAt)));
}

function listSupplyCounts(db: Db, ids: string[]) {
  return db
    .select({ participantId: supply.participantId, count: sql<number>`count(*)::int` })
    .from(supply)
    .where(and(among(supply.participantId, ids), isNull(supply.closedAt)))
    .groupBy(supply.participantId);
}

/** The open course, else the last one. */
function listCourses(db: Db, ids: string[]) {
  return db
    .selectDistinctOn([course.participantId], {
      participantId: course.participantId,
      id: course.id,
      closedWhy: course.closedWhy,
      isPaused: sql<boolean>`${coursePause.id} is not null`,
    })
    .from(course)
    .leftJoin(coursePause, and(eq(coursePause.courseId, course.id), isNull(coursePause.closedAt)))
    .where(among(course.participantId, ids))
    .orderBy(course.participantId, sql`${course.closedAt} is null desc`, desc(course.createdAt));
}

/** What is in force, else the newest open draft. */
function listPrescriptionsOf(db: Db, ids: string[]) {
  return db
    .selectDistinctOn([prescription.participantId], {
      participantId: prescription.participantId,
      id: prescription.id,
      signedAt: prescription.signedAt,
      tier: prescription.tier,
      isAcknowledged: sql<boolean>`${acknowledgement.prescriptionId} is not null`,
      isSignedOnce: sql<boolean>`exists (select 1 from ${signature} s where s.subject_id = ${prescription.id} and s.meaning = 'prescribed')`,
      intensityUa: prescription.intensityUa,
      onMs: prescription.onMs,
      expiresAt: prescription.expiresAt,
      minGapMs: prescription.minGapMs,
      maxPerDay: prescription.maxPerDay,
      maxPer7Days: prescription.maxPer7Days,
      isAssisted: prescription.assisted,
    })
    .from(prescription)
    .leftJoin(acknowledgement, eq(acknowledgement.prescriptionId, prescription.id))
    .where(and(among(prescription.participantId, ids), isNull(prescription.closedAt)))
    .orderBy(
      prescription.participantId,
      sql`${prescription.signedAt} is not null desc`,
      desc(prescription.createdAt),
      desc(prescription.id),
    );
}

function listNextWindows(db: Db, courseIds: string[], now: string) {
  return db
    .selectDistinctOn([plannedSession.courseId], {
      participantId: plannedSession.participantId,
      windowFrom: plannedSession.windowFrom,
    })
    .from(plannedSession)
    .where(
      and(among(plannedSession.courseId, courseIds), isNull(plannedSession.closedAt), gt(plannedSession.windowTo, now)),
    )
    .orderBy(plannedSession.courseId, plannedSession.windowFrom);
}

function listOpenLockouts(db: Db, ids: string[], now: string) {
  return db
    .select({ participantId: lockout.participantId, level: lockout.level, until: lockout.until })
    .from(lockout)
    .where(
      and(
        among(lockout.participantId, ids),
        isNull(lockout.closedAt),
        or(isNull(lockout.until), gt(lockout.until, now)),
      ),
    );
}

function listLateSessions(db: Db, ids: string[], now: string) {
  const isLast = sql`${session.startedAt} = (select max(l.started_at) from ${session} l where l.participant_id = ${session.participantId}
    and l.closed_why is distinct from 'unused')`;
  return db
    .select({
      participantId: session.participantId,
      startedAt: sql<string>`${session.startedAt}`.mapWith(session.startedAt),
      endedAt: session.endedAt,
    })
    .from(session)
    .where(
      and(
        among(session.participantId, ids),
        isNotNull(session.startedAt),
        or(isNull(session.closedWhy), ne(session.closedWhy, 'unused')),
        or(sql`${session.startedAt} > ${now}::timestamptz - interval '7 days'`, isLast),
      ),
    );
}

function byPerson<T extends { participantId: string }>(rows: readonly T[]): Map<string, T> {
  return new Map(rows.map((row) => [row.participantId, row]));
}

function listsByPerson<T extends { participantId: string }>(rows: readonly T[]): Map<string, T[]> {
  const lists = new Map<string, T[]>();
  for (const row of rows) {
    const list = lists.get(row.participantId);
    if (list) list.push(row);
    else lists.set(row.participantId, [row]);
  }
  return lists;
}

type PrescriptionRow = Awaited<ReturnType<typeof listPrescriptionsOf>>[number];

function prescriptionOf(row: PrescriptionRow | undefined): StandingPrescription | null {
  if (!row) return null;
  const { signedAt, tier, isSignedOnce, minGapMs, participantId: _person, ...same } = row;
  return {
    ...same,
    isSigned: signedAt !== null,
    awaitsSecondSignature: signedAt === null && isSignedOnce && tier === 'second_signature',
    minGapHours: minGapMs / hourMilliseconds,
  };
}

/** By participant; those that do not exist are left out. */
export async function loadStanding(
  db: Db,
  participantIds: readonly string[],
  now: string,
): Promise<Map<string, Standing>> {
  if (participantIds.length === 0) return new Map();
  const ids = [...participantIds];
  const people = await listPeople(db, ids);
  const protocols = await listProtocolsInForce(db, [...new Set(people.map(({ siteId }) => siteId))]);
  const consents = listsByPerson(await listNewestConsents(db, ids));
  const screenings = byPerson(await listNewestScreenings(db, ids));
  const trainings = byPerson(await listNewestTrainings(db, ids));
  const watched = byPerson(await listWatched(db, ids, now));
  const devices = byPerson(await listDevicesOf(db, ids));
  const supplies = byPerson(await listSupplyCounts(db, ids));
  const courses = byPerson(await listCourses(db, ids));
  const prescriptions = byPerson(await listPrescriptionsOf(db, ids));
  const windows = byPerson(
    await listNextWindows(
      db,
      [...courses.values()].map(({ id }) => id),
      now,
    ),
  );
  const lockouts = listsByPerson(await listOpenLockouts(db, ids, now));
  const sessions = listsByPerson(await listLateSessions(db, ids, now));

  return new Map(
    people.map(({ participantId, siteId, zone, bornOn, closedAt, accountId, accountState }) => {
      const newest = new Map(consents.get(participantId)?.map((row) => [row.kind, row]));
      const versionOf = (kind: 'own' | 'guardian' | 'assent') => Number(newest.get(kind)?.documentVersion ?? 0);
      const signedOff = trainings.get(participantId);
      const screened = screenings.get(participantId);
      const held = devices.get(participantId);
      const going = courses.get(participantId);
      const standing: Standing = {
        participantId,
        siteId,
        zone,
        bornOn,
        isWithdrawn: closedAt !== null,
        hasAccount: accountId !== null,
        isAccountActive: accountState === 'active' && closedAt === null,
        protocol: protocols.get(siteId) ?? null,
        consent: {
          ownVersion: versionOf('own'),
          guardianVersion: versionOf('guardian'),
          assentVersion: versionOf('assent'),
          isWithdrawn: [...newest.values()].some((row) => row.closedAt !== null),
        },
        screening: screened ? { outcome: screened.outcome, validUntil: screened.validUntil } : null,
        training: signedOff ? { isSignedOff: signedOff.isSignedOff, validUntil: signedOff.validUntil } : null,
        watchedDone: watched.get(participantId)?.done ?? 0,
        isWatchedNow: watched.get(participantId)?.isNow ?? false,
        device: held ? { id: held.id, label: held.label, state: held.state } : null,
        supplies: supplies.get(participantId)?.count ?? 0,
        course: going ? { id: going.id, closedWhy: going.closedWhy, isPaused: going.isPaused } : null,
        prescription: prescriptionOf(prescriptions.get(participantId)),
        windowFrom: windows.get(participantId)?.windowFrom ?? null,
        lockouts: (lockouts.get(participantId) ?? []).map(({ level, until }) => ({ level, until })),
        sessions: (sessions.get(participantId) ?? []).map(({ startedAt, endedAt }) => ({ startedAt, endedAt })),
      };
      return [participantId, standing];
    }),
  );
}
