// Prescriptions and their acknowledgements. A row's content never changes: it gets its version once, with the last signature,
// and is closed once. Amounts are whole µA, µC and ms in the database, mA, C and s outside.

import { and, desc, eq, gt, inArray, isNotNull, isNull, lt, max, or, sql, type SQL } from 'drizzle-orm';
import { z } from 'zod';
import type { Db } from '@/db/client';
import { acknowledgement, prescription } from '@/db/schema/course';
import { permit } from '@/db/schema/session';
import { closeItemsOfPrescriptions } from './worklist';
import {
  coulombOf,
  hourMilliseconds,
  microampOf,
  microcoulombOf,
  milliampOf,
  millisecondsOf,
  minuteMilliseconds,
  secondsOf,
} from '@/shared/values/units';

export type PrescribedElectrode = {
  position: string;
  polarity: 'anode' | 'cathode';
  shape: 'pad';
  areaSquareCentimetre: number;
  share: number;
};

export type PrescribedDose = {
  waveform: 'tDCS';
  intensityMilliamp: number;
  rampUpSeconds: number;
  holdSeconds: number;
  rampDownSeconds: number;
  electrodes: PrescribedElectrode[];
};

export type PrescribedSchedule = {
  startsOn: string;
  days: number[];
  hoursFrom: string;
  hoursTo: string;
  sessionsTotal: number;
  minGapHours: number;
  maxPerDay: number;
  maxPer7Days: number;
  expiresOn: string;
  makeUpMissed: boolean;
};

/** What a signature is given for. */
export interface PrescriptionContent {
  participantId: string;
  amendsId: string | null;
  reason: string | null;
  dose: PrescribedDose;
  schedule: PrescribedSchedule;
  assisted: boolean;
}

export interface PrescriptionRecord extends PrescriptionContent {
  id: string;
  courseId: string;
  chargeCoulomb: number;
  minutes: number;
  expiresAt: string;
  tier: 'accept' | 'second_signature';
  contentHash: string;
  writtenBy: string;
  createdAt: string;
  version: number | null;
  signedAt: string | null;
  closedAt: string | null;
  closedWhy: string | null;
}

function gapMillisecondsOf(hours: number): number {
  return millisecondsOf((hours * hourMilliseconds) / 1000);
}

/** Amounts as whole as the database keeps them, rounded up: what is judged, shown and signed is what is stored. */
export function wholeAmounts<T extends Pick<PrescriptionContent, 'dose' | 'schedule'>>(content: T): T {
  const { dose, schedule } = content;
  const wholeSeconds = (seconds: number) => secondsOf(millisecondsOf(seconds));
  return {
    ...content,
    dose: {
      ...dose,
      intensityMilliamp: milliampOf(microampOf(dose.intensityMilliamp)),
      rampUpSeconds: wholeSeconds(dose.rampUpSeconds),
      holdSeconds: wholeSeconds(dose.holdSeconds),
      rampDownSeconds: wholeSeconds(dose.rampDownSeconds),
    },
    schedule: { ...schedule, minGapHours: gapMillisecondsOf(schedule.minGapHours) / hourMilliseconds },
  };
}

const storedElectrodes: z.ZodType<PrescribedElectrode[]> = z.array(
  z.object({
    position: z.string(),
    polarity: z.enum(['anode', 'cathode']),
    shape: z.enum(['pad']),
    areaSquareCentimetre: z.number(),
    share: z.number(),
  }),
);

function recordOf(row: typeof prescription.$inferSelect): PrescriptionRecord {
  const { id, courseId, participantId, amendsId, reason, assisted, expiresAt, tier } = row;
  const { contentHash, writtenBy, createdAt, version, signedAt, closedAt, closedWhy } = row;
  return {
    ...{ id, courseId, participantId, amendsId, reason, assisted, expiresAt, tier },
    ...{ contentHash, writtenBy, createdAt, version, signedAt, closedAt, closedWhy },
    chargeCoulomb: coulombOf(row.chargeUc),
    minutes: row.onMs / minuteMilliseconds,
    dose: {
      waveform: row.waveform,
      intensityMilliamp: milliampOf(row.intensityUa),
      rampUpSeconds: secondsOf(row.rampUpMs),
      holdSeconds: secondsOf(row.holdMs),
      rampDownSeconds: secondsOf(row.rampDownMs),
      electrodes: storedElectrodes.parse(row.electrodes),
    },
    schedule: {
      startsOn: row.startsOn,
      days: row.days,
      hoursFrom: row.hoursFrom,
      hoursTo: row.hoursTo,
      sessionsTotal: row.sessionsTotal,
      minGapHours: row.minGapMs / hourMilliseconds,
      maxPerDay: row.maxPerDay,
      maxPer7Days: row.maxPer7Days,
      expiresOn: row.expiresOn,
      makeUpMissed: row.makeUpMissed,
    },
  };
}

/** What of a row was signed; null where it cannot even be read as a prescription. */
export function contentOf(row: typeof prescription.$inferSelect): PrescriptionContent | null {
  return storedElectrodes.safeParse(row.electrodes).success ? recordOf(row) : null;
}

export type NewPrescription = Omit<PrescriptionRecord, 'version' | 'signedAt' | 'closedAt' | 'closedWhy'>;

/** A draft. The database's own ceilings refuse what no rule should have let through. */
export async function insertPrescription(db: Db, draft: NewPrescription): Promise<PrescriptionRecord> {
  const { dose, schedule, chargeCoulomb, minutes, ...own } = draft;
  const { minGapHours, ...calendar } = schedule;
  const rows = await db
    .insert(prescription)
    .values({
      ...own,
      ...calendar,
      waveform: dose.waveform,
      intensityUa: microampOf(dose.intensityMilliamp),
      rampUpMs: millisecondsOf(dose.rampUpSeconds),
      holdMs: millisecondsOf(dose.holdSeconds),
      rampDownMs: millisecondsOf(dose.rampDownSeconds),
      chargeUc: microcoulombOf(chargeCoulomb),
      onMs: millisecondsOf(minutes * 60),
      electrodes: dose.electrodes,
      minGapMs: gapMillisecondsOf(minGapHours),
    })
    .returning();
  const [row] = rows;
  if (!row) throw new Error('a draft was not stored');
  return recordOf(row);
}

export async function findPrescription(db: Db, prescriptionId: string): Promise<PrescriptionRecord | null> {
  const [row] = await db.select().from(prescription).where(eq(prescription.id, prescriptionId)).limit(1);
  return row ? recordOf(row) : null;
}

/** Signed and not closed: at most one a course. */
export async function findPrescriptionInForce(db: Db, courseId: string): Promise<PrescriptionRecord | null> {
  const [row] = await db
    .select()
    .from(prescription)
    .where(and(eq(prescription.courseId, courseId), isNotNull(prescription.signedAt), isNull(prescription.closedAt)))
    .limit(1);
  return row ? recordOf(row) : null;
}

/** A participant's prescriptions, newest first. */
export async function listPrescriptions(
  db: Db,
  want: { participantId: string; signedOnly: boolean; limit: number; after: { createdAt: string; id: string } | null },
): Promise<PrescriptionRecord[]> {
  const conditions: (SQL | undefined)[] = [eq(prescription.participantId, want.participantId)];
  if (want.signedOnly) conditions.push(isNotNull(prescription.signedAt));
  if (want.after) {
    const { createdAt, id } = want.after;
    conditions.push(
      or(lt(prescription.createdAt, createdAt), and(eq(prescription.createdAt, createdAt), lt(prescription.id, id))),
    );
  }
  const rows = await db
    .select()
    .from(prescription)
    .where(and(...conditions))
    .orderBy(desc(prescription.createdAt), desc(prescription.id))
    .limit(want.limit);
  return rows.map(recordOf);
}

export async function closePrescription(
  db: Db,
  prescriptionId: string,
  at: string,
  why: 'superseded' | 'discarded' | 'course_ended',
): Promise<void> {
  await db
    .update(prescription)
    .set({ closedAt: at, closedWhy: why })
    .where(and(eq(prescription.id, prescriptionId), isNull(prescription.closedAt)));
}

/** Closes what waits for a signature in a course, and its rows on the worklist. Answers with their ids. */
export async function discardDrafts(db: Db, courseId: string, at: string): Promise<string[]> {
  const rows = await db
    .update(prescription)
    .set({ closedAt: at, closedWhy: 'discarded' })
    .where(and(eq(prescription.courseId, courseId), isNull(prescription.signedAt), isNull(prescription.closedAt)))
    .returning({ id: prescription.id });
  const ids = rows.map(({ id }) => id);
  await closeItemsOfPrescriptions(db, ids, at, 'discarded');
  return ids;
}

/** Puts a draft in force as the next version of its course. The version before it must be closed first. */
export async function putInForce(db: Db, prescriptionId: string, courseId: string, at: string): Promise<void> {
  const [newest] = await db
    .select({ version: max(prescription.version) })
    .from(prescription)
    .where(eq(prescription.courseId, courseId));
  await db
    .update(prescription)
    .set({ version: (newest?.version ?? 0) + 1, signedAt: at })
    .where(and(eq(prescription.id, prescriptionId), isNull(prescription.signedAt), isNull(prescription.closedAt)));
}

/** When each was acknowledged, for those that were. */
export async function listAcknowledgements(db: Db, prescriptionIds: readonly string[]): Promise<Map<string, string>> {
  if (prescriptionIds.length === 0) return new Map();
  const rows = await db
    .select({ id: acknowledgement.prescriptionId, at: acknowledgement.createdAt })
    .from(acknowledgement)
    .where(inArray(acknowledgement.prescriptionId, [...prescriptionIds]));
  return new Map(rows.map(({ id, at }) => [id, at]));
}

/** Kept once. False when it was acknowledged already. */
export async function insertAcknowledgement(
  db: Db,
  row: { prescriptionId: string; participantId: string; createdAt: string },
): Promise<boolean> {
  const made = await db
    .insert(acknowledgement)
    .values(row)
    .onConflictDoNothing()
    .returning({ id: acknowledgement.prescriptionId });
  return made.length > 0;
}

export async function countLivePermits(db: Db, participantId: string, now: string): Promise<number> {
  const [row] = await db
    .select({ count: sql<number>`count(*)::int` })
    .from(permit)
    .where(and(eq(permit.participantId, participantId), isNull(permit.closedAt), gt(permit.expiresAt, now)));
  return row?.count ?? 0;
}
