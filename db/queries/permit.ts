// Permits: found, counted, made, closed once. A permit is never changed; the partial unique index of the schema keeps one live
// permit a participant, so an insert that loses a race answers null instead of failing the transaction.

import { and, asc, eq, gt, isNull, lte, ne, sql } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { prescription } from '@/db/schema/course';
import { device } from '@/db/schema/device';
import { signingKey } from '@/db/schema/house';
import { participant } from '@/db/schema/participant';
import { permit, session } from '@/db/schema/session';
import type { VoidCause } from '@/shared/values/void-causes';
import { doseOf, type DoseRecord } from './dose';

export interface PermitRecord {
  id: string;
  sessionId: string;
  plannedSessionId: string;
  courseId: string;
  participantId: string;
  siteId: string;
  deviceId: string;
  prescriptionId: string;
  prescriptionVersion: number;
  precheckId: string;
  counter: number;
  token: string;
  issuedAt: string;
  expiresAt: string;
  expiresBy: string;
  closedAt: string | null;
  closedWhy: string | null;
  dose: DoseRecord;
  sessionsTotal: number;
}

function selectPermits(db: Db) {
  return db
    .select({
      permit,
      prescription,
      sessionId: session.id,
      plannedSessionId: session.plannedSessionId,
      siteId: participant.siteId,
    })
    .from(permit)
    .innerJoin(session, eq(session.permitId, permit.id))
    .innerJoin(prescription, eq(prescription.id, permit.prescriptionId))
    .innerJoin(participant, eq(participant.id, permit.participantId));
}

function recordOf(row: Awaited<ReturnType<typeof selectPermits>>[number]): PermitRecord {
  const { key: _asked, chargeUc: _charge, onMs: _on, intensityUa: _intensity, ...own } = row.permit;
  return {
    ...own,
    sessionId: row.sessionId,
    plannedSessionId: row.plannedSessionId,
    siteId: row.siteId,
    prescriptionVersion: row.prescription.version ?? 0,
    dose: doseOf(row.prescription),
    sessionsTotal: row.prescription.sessionsTotal,
  };
}

export async function findPermit(db: Db, permitId: string): Promise<PermitRecord | null> {
  const [row] = await selectPermits(db).where(eq(permit.id, permitId)).limit(1);
  return row ? recordOf(row) : null;
}

/** The permit that this key was given, whatever has become of it. */
export async function findPermitByKey(db: Db, participantId: string, key: string): Promise<PermitRecord | null> {
  const [row] = await selectPermits(db)
    .where(and(eq(permit.participantId, participantId), eq(permit.key, key)))
    .limit(1);
  return row ? recordOf(row) : null;
}

export async function countPermitsSince(db: Db, participantId: string, since: string): Promise<number> {
  const [row] = await db
    .select({ count: sql<number>`count(*)::int` })
    .from(permit)
    .where(and(eq(permit.participantId, participantId), gt(permit.issuedAt, since)));
  return row?.count ?? 0;
}

export interface NewPermit {
  id: string;
  participantId: string;
  courseId: string;
  deviceId: string;
  prescriptionId: string;
  precheckId: string;
  key: string;
  counter: number;
  intensityUa: number;
  chargeUc: number;
  onMs: number;
  token: string;
  issuedAt: string;
  expiresAt: string;
  expiresBy: string;
}

/** False when a live permit, or a permit of this pre-check or counter, is there already. */
export async function insertPermit(db: Db, row: NewPermit): Promise<boolean> {
  const made = await db.insert(permit).values(row).onConflictDoNothing().returning({ id: permit.id });
  return made.length > 0;
}

/** Closes a permit, once. False when it was closed already. */
export async function closePermit(db: Db, permitId: string, at: string, why: 'used' | 'expired'): Promise<boolean> {
  const closed = await db
    .update(permit)
    .set({ closedAt: at, closedWhy: why })
    .where(and(eq(permit.id, permitId), isNull(permit.closedAt)))
    .returning({ id: permit.id });
  return closed.length > 0;
}

/** Closes permits of a participant whose time is over, so that the live one is the only open one. */
export async function closeExpiredPermits(db: Db, participantId: string, now: string): Promise<void> {
  await db
    .update(permit)
    .set({ closedAt: now, closedWhy: 'expired' })
    .where(and(eq(permit.participantId, participantId), isNull(permit.closedAt), lte(permit.expiresAt, now)));
}

/**
 * Makes the live permit of a participant void: after an amendment, a pause, a lockout, a withdrawal, or something about the
 * device. Null when there was none. Its session stays reserved until the device's record or read-out shows that it never ran.
 */
export async function voidLivePermit(
  db: Db,
  participantId: string,
  at: string,
  cause: VoidCause,
): Promise<{ id: string } | null> {
  const [closed] = await db
    .update(permit)
    .set({
      closedAt: at,
      closedWhy: sql`case when ${permit.expiresAt} <= ${at} then 'expired' else ${`void_${cause}`} end`,
    })
    .where(and(eq(permit.participantId, participantId), isNull(permit.closedAt)))
    .returning({ id: permit.id, why: permit.closedWhy });
  return closed && closed.why !== 'expired' ? { id: closed.id } : null;
}

/** Open permits whose time is over. */
export async function listExpiredPermits(db: Db, now: string, limit: number): Promise<string[]> {
  const rows = await db
    .select({ id: permit.id })
    .from(permit)
    .where(and(isNull(permit.closedAt), lte(permit.expiresAt, now)))
    .orderBy(asc(permit.expiresAt))
    .limit(limit);
  return rows.map((row) => row.id);
}

/** When the next open permit ends; null without one. */
export async function findNextPermitEnd(db: Db): Promise<string | null> {
  const [row] = await db
    .select({ at: permit.expiresAt })
    .from(permit)
    .where(isNull(permit.closedAt))
    .orderBy(asc(permit.expiresAt))
    .limit(1);
  return row?.at ?? null;
}

/** The next counter of a device, under its row lock: no two permits of one device share one. */
export async function raiseDeviceCounter(db: Db, deviceId: string): Promise<number | null> {
  const [row] = await db
    .update(device)
    .set({ lastCounter: sql`${device.lastCounter} + 1` })
    .where(eq(device.id, deviceId))
    .returning({ counter: device.lastCounter });
  return row?.counter ?? null;
}

export interface SigningKeyRecord {
  kid: string;
  publicX: string;
  sealedPrivate: string;
  createdAt: string;
  /** Set when it was withdrawn. */
  closedAt: string | null;
}

/** Every key that ever signed, old to new; which of them is trusted is asked of shared/rules/permit-keys.ts. */
export async function listSigningKeys(db: Db): Promise<SigningKeyRecord[]> {
  return db
    .select({
      kid: signingKey.kid,
      publicX: signingKey.publicX,
      sealedPrivate: signingKey.sealedPrivate,
      createdAt: signingKey.createdAt,
      closedAt: signingKey.closedAt,
    })
    .from(signingKey)
    .orderBy(asc(signingKey.createdAt), asc(signingKey.kid));
}

/** One key at a time is made, whatever the number of processes; released at commit. */
export async function lockSigningKeys(db: Db): Promise<void> {
  await db.execute(sql`select pg_advisory_xact_lock(hashtext('rampwell.signing_key'))`);
}

export async function insertSigningKey(db: Db, row: Omit<SigningKeyRecord, 'closedAt'>): Promise<void> {
  await db.insert(signingKey).values(row);
}

/** Withdraws every key but one; gives back the names of those that were open. */
export async function closeOtherSigningKeys(db: Db, kid: string, at: string): Promise<string[]> {
  const closed = await db
    .update(signingKey)
    .set({ closedAt: at, closedWhy: 'withdrawn' })
    .where(and(ne(signingKey.kid, kid), isNull(signingKey.closedAt)))
    .returning({ kid: signingKey.kid });
  return closed.map((each) => each.kid);
}
