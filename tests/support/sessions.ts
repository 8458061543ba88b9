// What: permits and sessions put straight into the database, for tests about what follows from them. How they come about is
// tested where they are made. Must not: say what is right; tests do.
import { randomUUID } from 'node:crypto';
import { z } from 'zod';
import { closePlanned } from '@/db/queries/course-plan';
import { closePermit, insertPermit } from '@/db/queries/permit';
import { closeSession, insertSession, startSession } from '@/db/queries/session';
import type { Clinic, Patient } from './clinic';

const microcoulombPlanned = 2_460_000;
const millisecondsOn = 1_260_000;

/** A live permit of the patient's version in force, for the first session that is still open. */
export async function givePermit(
  clinic: Clinic,
  patient: Patient,
): Promise<{ permitId: string; sessionId: string; plannedSessionId: string }> {
  const { db } = clinic.client;
  const now = await clinic.now();
  const [planned] = await clinic.rows(
    { id: z.string(), course_id: z.string(), prescription_id: z.string() },
    `select id, course_id, prescription_id from planned_session where participant_id = $1 and closed_at is null order by window_from limit 1`,
    [patient.participantId],
  );
  if (!planned) throw new Error('nothing is planned');
  const [deviceId, precheckId, permitId, sessionId] = [randomUUID(), randomUUID(), randomUUID(), randomUUID()];
  await clinic.client.pool.query(
    `insert into device (id, site_id, label, model, serial, firmware, calibration_due_on, created_at)
     select $1::uuid, site_id, 'D', 'M', $1::text, '1', '2030-01-01', $2::timestamptz from participant where id = $3`,
    [deviceId, now, patient.participantId],
  );
  await clinic.client.pool.query(
    `insert into precheck (id, participant_id, course_id, account_id, answers, language, complete, open, outcome, findings, emergency_advice, helper_present, answered_at)
     values ($1, $2, $3, $4, '{}', 'en', true, '[]', 'go_on', '[]', false, false, $5)`,
    [precheckId, patient.participantId, planned.course_id, patient.accountId, now],
  );
  const ids = {
    id: permitId,
    participantId: patient.participantId,
    courseId: planned.course_id,
    deviceId,
    precheckId,
    prescriptionId: planned.prescription_id,
  };
  const amounts = { intensityUa: 2000, chargeUc: microcoulombPlanned, onMs: millisecondsOn };
  const expiresAt = new Date(Date.parse(now) + 30 * 60_000).toISOString();
  await insertPermit(db, {
    ...ids,
    ...amounts,
    key: permitId,
    counter: 1,
    token: 't',
    issuedAt: now,
    expiresAt,
    expiresBy: 'issue',
  });
  const session = {
    id: sessionId,
    permitId,
    participantId: patient.participantId,
    courseId: planned.course_id,
    plannedSessionId: planned.id,
  };
  await insertSession(db, { ...session, createdAt: now });
  return { permitId, sessionId, plannedSessionId: planned.id };
}

/** A session under way. */
export async function beginSession(clinic: Clinic, patient: Patient) {
  const begun = await givePermit(clinic, patient);
  const now = await clinic.now();
  await startSession(clinic.client.db, begun.sessionId, now);
  await closePermit(clinic.client.db, begun.permitId, now, 'used');
  return begun;
}

/** A session whose record came in, with this part of the dose delivered. */
export async function recordSession(clinic: Clinic, patient: Patient, fraction = 1) {
  const begun = await beginSession(clinic, patient);
  await endWithRecord(clinic, begun, fraction);
  return begun;
}

export async function endWithRecord(
  clinic: Clinic,
  begun: { sessionId: string; plannedSessionId: string },
  fraction: number,
) {
  const { db } = clinic.client;
  const closedAt = await clinic.now();
  const uc = Math.round(microcoulombPlanned * fraction);
  const completeness = fraction >= 0.9 ? 'complete' : fraction >= 0.1 ? 'partial' : 'not_delivered';
  const summary = JSON.parse('{}');
  await closeSession(db, begun.sessionId, {
    ...{ closedAt, closedWhy: 'recorded', deliveredUc: uc, upperUc: uc, onMs: Math.round(millisecondsOn * fraction) },
    ...{ fractionPermille: Math.round(fraction * 1000), completeness, summary },
  });
  if (completeness !== 'not_delivered') await closePlanned(db, begun.plannedSessionId, closedAt, 'done');
}
