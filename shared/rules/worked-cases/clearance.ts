// Worked cases of kind `clearance`: everything the server knows when somebody asks to start.

import { z } from 'zod';
import { lockoutLevels, precheckOutcomes, sessionFactStates, tiers } from '@/shared/values/codes';
import { clearance, type ClearanceFacts } from '../clearance';
import { kindOf, present } from './form';

const number = z.number().optional();
const flag = z.boolean().optional();
const text = z.string().optional();

const prescriptionSchema = z.strictObject({
  status: z.enum(['none', 'draft', 'signed']).optional(),
  version: number,
  acknowledged_version: number,
  paused: flag,
  expires_at: text,
  tier: z.enum(tiers).optional(),
  second_signature: flag,
  sessions_total: number,
  sessions_done: number,
  max_per_day: number,
  max_per_7_days: number,
  min_gap_h: number,
  hours_from: text,
  hours_to: text,
  assisted: flag,
  dose: z.strictObject({ charge_C: number, minutes: number }).optional(),
});
const sessionSchema = z.strictObject({
  state: z.enum(sessionFactStates).optional(),
  started_at: text,
  ended_at: text,
  permit_expires_at: text,
  charge_C: number,
  minutes: number,
  diary: flag,
});
const givenSchema = z.strictObject({
  account: z.strictObject({ active: flag }).optional(),
  asker: text,
  participant: z.strictObject({ id: text, born: text, zone: text }).optional(),
  consent: z
    .strictObject({
      signed_version: number,
      required_version: number,
      required_from: text,
      previous_version: number,
      withdrawn: flag,
      guardian_version: number,
      assent_version: number,
    })
    .optional(),
  screening: z
    .strictObject({ complete: flag, outcome: z.enum(['clear', 'excluded']).optional(), valid_until: text })
    .optional(),
  training: z.strictObject({ signed_off: flag, valid_until: text }).optional(),
  supervision: z.strictObject({ required: number, watched: number, watched_now: flag }).optional(),
  mood_check: z.strictObject({ due_at: z.string().nullable().optional() }).optional(),
  prescription: prescriptionSchema.optional(),
  site: z.strictObject({ max_24h_C: number, max_7d_C: number, max_minutes_24h: number }).optional(),
  lockouts: z.array(z.strictObject({ level: z.enum(lockoutLevels).optional(), code: text, until: text })).optional(),
  sessions: z.array(sessionSchema).optional(),
  missed_since_last: number,
  recall_call_at: text,
  device: z.strictObject({ assigned: flag, recalled: flag, battery_pct: number }).optional(),
  supplies: z
    .array(z.strictObject({ kind: text, uses: number, max_uses: number, opened_at: text, max_days: number }))
    .optional(),
  precheck: z
    .strictObject({ answered_at: text, by: text, outcome: z.enum(precheckOutcomes).optional(), helper_present: flag })
    .optional(),
  live_permits: z.array(z.strictObject({ id: text, issued_at: text, expires_at: text })).optional(),
});
type Given = z.infer<typeof givenSchema>;

function prescriptionOf(given: NonNullable<Given['prescription']>): ClearanceFacts['prescription'] {
  return {
    status: given.status,
    version: given.version,
    acknowledgedVersion: given.acknowledged_version,
    // A case states what was signed; there is nothing beside it that it could differ from.
    isIntact: true,
    isPaused: given.paused,
    expiresAt: given.expires_at,
    tier: given.tier,
    hasSecondSignature: given.second_signature,
    sessionsTotal: given.sessions_total,
    sessionsDone: given.sessions_done,
    maxPerDay: given.max_per_day,
    maxPer7Days: given.max_per_7_days,
    minGapHours: given.min_gap_h,
    hoursFrom: given.hours_from,
    hoursTo: given.hours_to,
    isAssisted: given.assisted,
    dose: given.dose && { chargeCoulomb: given.dose.charge_C, minutes: given.dose.minutes },
  };
}

function personFacts(given: Given): Partial<ClearanceFacts> {
  const { account, consent, participant, screening, training, supervision, mood_check: mood } = given;
  return {
    account: account && { isActive: account.active },
    asker: given.asker,
    participant: participant && { id: participant.id, bornOn: participant.born, zone: participant.zone },
    consent: consent && {
      signedVersion: consent.signed_version,
      requiredVersion: consent.required_version,
      requiredFrom: consent.required_from,
      previousVersion: consent.previous_version,
      isWithdrawn: consent.withdrawn,
      guardianVersion: consent.guardian_version,
      assentVersion: consent.assent_version,
    },
    screening: screening && {
      isComplete: screening.complete,
      outcome: screening.outcome,
      validUntil: screening.valid_until,
    },
    training: training && { isSignedOff: training.signed_off, validUntil: training.valid_until },
    supervision: supervision && {
      requiredSessions: supervision.required,
      watchedSessions: supervision.watched,
      isWatchedNow: supervision.watched_now,
    },
    moodCheck: mood && { dueAt: mood.due_at },
  };
}

export function clearanceFactsOf(given: Given): ClearanceFacts {
  const { site, device, precheck } = given;
  return {
    ...personFacts(given),
    prescription: given.prescription && prescriptionOf(given.prescription),
    site: site && {
      maxCharge24hCoulomb: site.max_24h_C,
      maxCharge7dCoulomb: site.max_7d_C,
      maxMinutes24h: site.max_minutes_24h,
    },
    lockouts: given.lockouts,
    sessions: given.sessions?.map((session) => ({
      state: session.state,
      startedAt: session.started_at,
      endedAt: session.ended_at,
      permitExpiresAt: session.permit_expires_at,
      chargeCoulomb: session.charge_C,
      minutes: session.minutes,
      hasDiary: session.diary,
    })),
    missedSinceLast: given.missed_since_last,
    recallCallAt: given.recall_call_at,
    device: device && {
      isAssigned: device.assigned,
      isRecalled: device.recalled,
      batteryPercent: device.battery_pct,
    },
    supplies: given.supplies?.map((supply) => ({
      kind: supply.kind,
      uses: supply.uses,
      maxUses: supply.max_uses,
      openedAt: supply.opened_at,
      maxDays: supply.max_days,
    })),
    precheck: precheck && {
      answeredAt: precheck.answered_at,
      answeredBy: precheck.by,
      outcome: precheck.outcome,
      isHelperPresent: precheck.helper_present,
    },
    livePermits: given.live_permits?.map(({ id, issued_at, expires_at }) => ({
      id,
      issuedAt: issued_at,
      expiresAt: expires_at,
    })),
  };
}

export const clearanceKind = kindOf(givenSchema, (given, now) => {
  const { allowed, reasons } = clearance(clearanceFactsOf(given), now);
  return { allowed, reasons: reasons.map(({ code, until, fact }) => present({ code, until, fact })) };
});
