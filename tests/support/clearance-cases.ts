// One case for each reason of clearance: the change of a cleared person that makes it fire, the nearest one that does not, and
// the one that takes its fact away. Never used outside tests.

import type { ClearanceFacts } from '@/shared/rules/clearance';
import type { ReasonCode } from '@/shared/values/codes';
import { clearedAt, clearedFacts } from './clearance-facts';

/** Facts that replace those of the cleared person, group by group, and the instant of asking. */
export type Change = ClearanceFacts & { readonly now?: string };
export type Cases = {
  readonly fires: Change;
  /** The same in every other respect, one step before the limit. */
  readonly misses: Change;
  readonly missing: Change;
  readonly fact: string;
};

export const past = clearedFacts.sessions?.[0];
export const ended = (startedAt: string, endedAt: string, more: object = {}) => ({
  ...past,
  startedAt,
  endedAt,
  ...more,
});
export const yesterday = (endedAt: string, more: object = {}) => ended('2026-05-11T09:00:00Z', endedAt, more);
export const sponge = clearedFacts.supplies?.[0];
const minor = { participant: { bornOn: '2009-03-02' }, precheck: { isHelperPresent: true } };
export const often = { maxPerDay: 3, minGapHours: 4, maxPer7Days: 20 };
const noHours = { hoursFrom: '00:00', hoursTo: '23:59' };

export const cases: Readonly<Record<Exclude<ReasonCode, 'unknown_fact'>, Cases>> = {
  account_inactive: {
    fires: { account: { isActive: false } },
    misses: { account: { isActive: true } },
    missing: { account: { isActive: undefined } },
    fact: 'account.active',
  },
  consent_withdrawn: {
    fires: { consent: { isWithdrawn: true } },
    misses: { consent: { isWithdrawn: false } },
    missing: { consent: { isWithdrawn: undefined } },
    fact: 'consent.withdrawn',
  },
  consent_missing: {
    fires: { consent: { signedVersion: 0 } },
    misses: { consent: { signedVersion: 1, requiredVersion: 1 } },
    missing: { consent: { signedVersion: undefined } },
    fact: 'consent.signed_version',
  },
  consent_outdated: {
    fires: { consent: { signedVersion: 2, requiredFrom: clearedAt } },
    misses: { consent: { signedVersion: 2, requiredFrom: '2026-05-12T16:00:01Z' } },
    missing: { consent: { requiredFrom: undefined } },
    fact: 'consent.required_from',
  },
  guardian_consent_missing: {
    fires: { ...minor, consent: { guardianVersion: 2, assentVersion: 3 } },
    misses: { ...minor, consent: { guardianVersion: 3, assentVersion: 3 } },
    missing: { ...minor, consent: { assentVersion: 3 } },
    fact: 'consent.guardian_version',
  },
  assent_missing: {
    fires: { ...minor, consent: { guardianVersion: 3, assentVersion: 0 } },
    misses: { ...minor, consent: { guardianVersion: 3, assentVersion: 3 } },
    missing: { ...minor, consent: { guardianVersion: 3 } },
    fact: 'consent.assent_version',
  },
  screening_incomplete: {
    fires: { screening: { isComplete: false, outcome: undefined, validUntil: undefined } },
    misses: { screening: { isComplete: true } },
    missing: { screening: { isComplete: undefined } },
    fact: 'screening.complete',
  },
  screening_excluded: {
    fires: { screening: { outcome: 'excluded' } },
    misses: { screening: { outcome: 'clear' } },
    missing: { screening: { outcome: undefined } },
    fact: 'screening.outcome',
  },
  screening_expired: {
    fires: { screening: { validUntil: clearedAt } },
    misses: { screening: { validUntil: '2026-05-12T16:00:01Z' } },
    missing: { screening: { validUntil: undefined } },
    fact: 'screening.valid_until',
  },
  training_missing: {
    fires: { training: { isSignedOff: false, validUntil: undefined } },
    misses: { training: { isSignedOff: true } },
    missing: { training: { isSignedOff: undefined } },
    fact: 'training.signed_off',
  },
  training_expired: {
    fires: { training: { validUntil: clearedAt } },
    misses: { training: { validUntil: '2026-05-12T16:00:01Z' } },
    missing: { training: { validUntil: undefined } },
    fact: 'training.valid_until',
  },
  supervision_due: {
    fires: { supervision: { requiredSessions: 5, watchedSessions: 4 } },
    misses: { supervision: { requiredSessions: 5, watchedSessions: 5 } },
    missing: { supervision: { watchedSessions: undefined } },
    fact: 'supervision.watched',
  },
  mood_check_due: {
    fires: { moodCheck: { dueAt: clearedAt } },
    misses: { moodCheck: { dueAt: '2026-05-12T16:00:01Z' } },
    missing: { moodCheck: { dueAt: undefined } },
    fact: 'mood_check.due_at',
  },
  prescription_unsigned: {
    fires: { prescription: { status: 'draft' } },
    misses: { prescription: { status: 'signed' } },
    missing: { prescription: { status: undefined } },
    fact: 'prescription.status',
  },
  prescription_altered: {
    fires: { prescription: { isIntact: false } },
    misses: { prescription: { isIntact: true } },
    missing: { prescription: { isIntact: undefined } },
    fact: 'prescription.intact',
  },
  second_signature_missing: {
    fires: { prescription: { tier: 'second_signature' } },
    misses: { prescription: { tier: 'second_signature', hasSecondSignature: true } },
    missing: { prescription: { tier: undefined } },
    fact: 'prescription.tier',
  },
  dose_above_limit: {
    fires: { prescription: { overLimits: [{ quantity: 'current', value: 3, limit: 2, unit: 'mA', layer: 'site' }] } },
    misses: { prescription: { overLimits: [] } },
    missing: { prescription: { overLimits: [{ quantity: 'unknown_fact' }] } },
    fact: 'prescription.dose',
  },
  prescription_paused: {
    fires: { prescription: { isPaused: true } },
    misses: { prescription: { isPaused: false } },
    missing: { prescription: { isPaused: undefined } },
    fact: 'prescription.paused',
  },
  prescription_expired: {
    fires: { prescription: { expiresAt: clearedAt } },
    misses: { prescription: { expiresAt: '2026-05-12T16:00:01Z' } },
    missing: { prescription: { expiresAt: undefined } },
    fact: 'prescription.expires_at',
  },
  prescription_unacknowledged: {
    fires: { prescription: { version: 3 } },
    misses: { prescription: { version: 3, acknowledgedVersion: 3 } },
    missing: { prescription: { acknowledgedVersion: undefined } },
    fact: 'prescription.acknowledged_version',
  },
  lockout_safety: {
    fires: { lockouts: [{ level: 'safety', code: 'faint' }] },
    misses: { lockouts: [{ level: 'flag', code: 'adherence_low' }] },
    missing: { lockouts: [{ code: 'faint' }] },
    fact: 'lockouts.0.level',
  },
  lockout_review: {
    fires: { lockouts: [{ level: 'review', code: 'headache_high' }] },
    misses: { lockouts: [] },
    missing: { lockouts: undefined },
    fact: 'lockouts',
  },
  lockout_device: {
    fires: { lockouts: [{ level: 'device', code: 'lost_contact_twice' }] },
    misses: { lockouts: [{ level: 'flag', code: 'missed_three' }] },
    missing: { lockouts: [{ level: undefined, code: 'lost_contact_twice' }] },
    fact: 'lockouts.0.level',
  },
  lockout_hold: {
    fires: { lockouts: [{ level: 'hold', code: 'precheck_fever', until: '2026-05-12T16:00:01Z' }] },
    misses: {
      lockouts: [{ level: 'hold', code: 'precheck_fever', until: '2026-05-12T15:55:00Z' }],
      precheck: { answeredAt: '2026-05-12T15:55:00Z' },
    },
    missing: { lockouts: [{ level: 'hold', code: 'precheck_fever' }] },
    fact: 'lockouts.0.until',
  },
  outside_hours: {
    fires: { prescription: { hoursTo: '18:00' } },
    misses: { prescription: { hoursTo: '18:01' } },
    missing: { prescription: { hoursTo: undefined } },
    fact: 'prescription.hours_to',
  },
  gap_too_short: {
    fires: { sessions: [yesterday('2026-05-11T20:00:01Z')] },
    misses: { sessions: [yesterday('2026-05-11T20:00:00Z')] },
    missing: { prescription: { minGapHours: undefined } },
    fact: 'prescription.min_gap_h',
  },
  day_count_reached: {
    // 22:00 UTC is midnight in Berlin.
    fires: {
      sessions: [ended('2026-05-11T22:00:00Z', '2026-05-11T22:21:00Z')],
      prescription: { ...noHours, minGapHours: 4 },
    },
    misses: {
      sessions: [ended('2026-05-11T21:59:59Z', '2026-05-11T22:21:00Z')],
      prescription: { ...noHours, minGapHours: 4 },
    },
    missing: { prescription: { maxPerDay: undefined } },
    fact: 'prescription.max_per_day',
  },
  minutes_24h: {
    fires: { sessions: [yesterday('2026-05-11T16:00:01Z', { minutes: 39.5 })] },
    misses: { sessions: [yesterday('2026-05-11T16:00:00Z', { minutes: 39.5 })] },
    missing: { sessions: [{ ...past, minutes: undefined }] },
    fact: 'sessions.0.minutes',
  },
  week_count_reached: {
    fires: { prescription: { maxPer7Days: 1 } },
    misses: { prescription: { maxPer7Days: 2 } },
    missing: { prescription: { maxPer7Days: undefined } },
    fact: 'prescription.max_per_7_days',
  },
  charge_24h: {
    fires: { site: { maxCharge24hCoulomb: 4.91 }, sessions: [yesterday('2026-05-11T16:00:01Z')] },
    misses: { site: { maxCharge24hCoulomb: 4.92 }, sessions: [yesterday('2026-05-11T16:00:01Z')] },
    missing: { site: { maxCharge24hCoulomb: undefined } },
    fact: 'site.max_24h_C',
  },
  charge_7d: {
    fires: { site: { maxCharge7dCoulomb: 4.91 } },
    misses: { site: { maxCharge7dCoulomb: 4.92 } },
    missing: { site: { maxCharge7dCoulomb: undefined } },
    fact: 'site.max_7d_C',
  },
  course_complete: {
    fires: { prescription: { sessionsDone: 20 } },
    misses: { prescription: { sessionsDone: 19 } },
    missing: { prescription: { sessionsDone: undefined } },
    fact: 'prescription.sessions_done',
  },
  session_open: {
    fires: { sessions: [{ state: 'reserved', permitExpiresAt: '2026-05-10T16:00:00Z', chargeCoulomb: 1, minutes: 9 }] },
    misses: { sessions: [{ state: 'void' }] },
    missing: { sessions: [{ state: 'reserved', chargeCoulomb: 1, minutes: 9 }] },
    fact: 'sessions.0.permit_expires_at',
  },
  diary_missing: {
    fires: { sessions: [{ ...past, hasDiary: false }] },
    misses: { sessions: [ended('2026-05-10T15:30:00Z', '2026-05-10T15:51:00Z', { hasDiary: false }), { ...past }] },
    missing: { sessions: [{ ...past, hasDiary: undefined }] },
    fact: 'sessions.0.diary',
  },
  recall_call_due: {
    fires: { sessions: [ended('2026-05-05T15:30:00Z', '2026-05-05T15:59:59Z')], missedSinceLast: 1 },
    misses: { sessions: [ended('2026-05-05T15:30:00Z', '2026-05-05T16:00:00Z')], missedSinceLast: 1 },
    missing: { missedSinceLast: undefined },
    fact: 'missed_since_last',
  },
  device_unassigned: {
    fires: { device: { isAssigned: false, isRecalled: undefined, batteryPercent: undefined } },
    misses: { device: { isAssigned: true } },
    missing: { device: { isAssigned: undefined } },
    fact: 'device.assigned',
  },
  device_recalled: {
    fires: { device: { isRecalled: true } },
    misses: { device: { isRecalled: false } },
    missing: { device: { isRecalled: undefined } },
    fact: 'device.recalled',
  },
  battery_low: {
    fires: { device: { batteryPercent: 29 } },
    misses: { device: { batteryPercent: 30 } },
    missing: { device: { batteryPercent: undefined } },
    fact: 'device.battery_pct',
  },
  supply_used_up: {
    fires: { supplies: [{ ...sponge, uses: 10 }] },
    misses: { supplies: [{ ...sponge, uses: 9 }] },
    missing: { supplies: [{ ...sponge, maxUses: undefined }] },
    fact: 'supplies.0.max_uses',
  },
  supply_expired: {
    fires: { supplies: [{ ...sponge, openedAt: '2026-04-28T16:00:00Z' }] },
    misses: { supplies: [{ ...sponge, openedAt: '2026-04-28T16:00:01Z' }] },
    missing: { supplies: [{ ...sponge, openedAt: undefined }] },
    fact: 'supplies.0.opened_at',
  },
  precheck_missing: {
    // Absent means that none was answered, so its own absence is no missing fact; who asks is one.
    fires: { precheck: undefined },
    misses: { precheck: clearedFacts.precheck },
    missing: { asker: undefined },
    fact: 'asker',
  },
  precheck_expired: {
    fires: { precheck: { answeredAt: '2026-05-12T15:30:00Z' } },
    misses: { precheck: { answeredAt: '2026-05-12T15:30:01Z' } },
    missing: { precheck: { answeredAt: undefined } },
    fact: 'precheck.answered_at',
  },
  precheck_other_person: {
    fires: { precheck: { answeredBy: 'p2' }, asker: 'p2' },
    misses: { precheck: { answeredBy: 'p1' } },
    missing: { precheck: { answeredBy: undefined } },
    fact: 'precheck.by',
  },
  precheck_hold: {
    fires: { precheck: { outcome: 'hold_tomorrow' } },
    misses: { precheck: { outcome: 'caution' } },
    missing: { precheck: { outcome: undefined } },
    fact: 'precheck.outcome',
  },
  helper_absent: {
    fires: { prescription: { isAssisted: true } },
    misses: { prescription: { isAssisted: true }, precheck: { isHelperPresent: true } },
    missing: { precheck: { isHelperPresent: undefined } },
    fact: 'precheck.helper_present',
  },
  live_permit: {
    fires: { livePermits: [{ id: 'k1', issuedAt: '2026-05-12T15:50:00Z', expiresAt: '2026-05-12T16:00:01Z' }] },
    misses: { livePermits: [{ id: 'k1', issuedAt: '2026-05-12T15:30:00Z', expiresAt: clearedAt }] },
    missing: { livePermits: [{ id: 'k1', issuedAt: '2026-05-12T15:30:00Z' }] },
    fact: 'live_permits.0.expires_at',
  },
  clock_bad: {
    fires: { precheck: { answeredAt: '2026-05-12T16:00:01Z' } },
    misses: { precheck: { answeredAt: clearedAt } },
    missing: { now: 'today' },
    fact: 'now',
  },
};
