// One reason why a session may not start, and who can take it out of the way.

import type { LimitLayer, ReasonCode, Resolver } from '@/shared/values/codes';

export type Reason = {
  readonly code: ReasonCode;
  /** When this reason alone passes by itself, ISO UTC. */
  readonly until?: string;
  /** Of `unknown_fact`: what is missing, in the stable dotted names. */
  readonly fact?: string;
  readonly resolvedBy: Resolver;
  /** What it is about: the code of the lockout, the kind of supply, the outcome of a pre-check, the quantity of a dose. */
  readonly subject?: string;
  readonly layer?: LimitLayer;
  readonly value?: number;
  readonly limit?: number;
  readonly unit?: string;
  readonly source: string;
};

/** Who can resolve each code; `precheck_hold` depends on its cause and is said where it is found. */
export const resolverOf: Readonly<Record<ReasonCode, Resolver>> = {
  account_inactive: 'administrator',
  consent_withdrawn: 'participant',
  consent_missing: 'participant',
  consent_outdated: 'participant',
  guardian_consent_missing: 'guardian',
  assent_missing: 'participant',
  screening_incomplete: 'coordinator',
  screening_excluded: 'clinician',
  screening_expired: 'coordinator',
  training_missing: 'coordinator',
  training_expired: 'coordinator',
  supervision_due: 'coordinator',
  mood_check_due: 'participant',
  prescription_unsigned: 'clinician',
  prescription_altered: 'clinician',
  second_signature_missing: 'clinician',
  dose_above_limit: 'clinician',
  prescription_paused: 'clinician',
  prescription_expired: 'clinician',
  prescription_unacknowledged: 'participant',
  lockout_safety: 'clinician',
  lockout_review: 'clinician',
  lockout_device: 'coordinator',
  lockout_hold: 'time',
  outside_hours: 'time',
  gap_too_short: 'time',
  day_count_reached: 'time',
  minutes_24h: 'time',
  week_count_reached: 'time',
  charge_24h: 'time',
  charge_7d: 'time',
  course_complete: 'clinician',
  session_open: 'participant',
  diary_missing: 'participant',
  recall_call_due: 'coordinator',
  device_unassigned: 'coordinator',
  device_recalled: 'coordinator',
  battery_low: 'participant',
  supply_used_up: 'coordinator',
  supply_expired: 'coordinator',
  precheck_missing: 'participant',
  precheck_expired: 'participant',
  precheck_other_person: 'participant',
  precheck_hold: 'participant',
  helper_absent: 'participant',
  live_permit: 'time',
  clock_bad: 'staff',
  unknown_fact: 'staff',
};

/** Who set the rule, or which guidance says so; a finding of a limit names the limit's own source instead. */
export const sourceOf: Readonly<Record<ReasonCode, string>> = {
  account_inactive: 'own choice',
  consent_withdrawn: 'common practice',
  consent_missing: 'common practice',
  consent_outdated: 'common practice',
  guardian_consent_missing: 'common practice',
  assent_missing: 'common practice',
  screening_incomplete: 'guidance R3',
  screening_excluded: 'guidance R3',
  screening_expired: 'guidance R3',
  training_missing: 'guidance R11',
  training_expired: 'guidance R11',
  supervision_due: 'guidance R10',
  mood_check_due: 'guidance R42',
  prescription_unsigned: 'common practice',
  prescription_altered: '21 CFR 11.70',
  second_signature_missing: 'own choice',
  dose_above_limit: 'own choice',
  prescription_paused: 'prescription',
  prescription_expired: 'prescription',
  prescription_unacknowledged: 'own choice',
  lockout_safety: 'own choice',
  lockout_review: 'own choice',
  lockout_device: 'own choice',
  lockout_hold: 'own choice',
  outside_hours: 'prescription',
  gap_too_short: 'prescription',
  day_count_reached: 'prescription',
  minutes_24h: 'site protocol',
  week_count_reached: 'prescription',
  charge_24h: 'site protocol',
  charge_7d: 'site protocol',
  course_complete: 'prescription',
  session_open: 'own choice',
  diary_missing: 'own choice',
  recall_call_due: 'own choice',
  device_unassigned: 'own choice',
  device_recalled: 'own choice',
  battery_low: 'common practice',
  supply_used_up: 'guidance R56',
  supply_expired: 'guidance R56',
  precheck_missing: 'own choice',
  precheck_expired: 'own choice',
  precheck_other_person: 'own choice',
  precheck_hold: 'own choice',
  helper_absent: 'own choice',
  live_permit: 'own choice',
  clock_bad: 'own choice',
  unknown_fact: 'own choice',
};

export function reason(code: ReasonCode, more: Omit<Partial<Reason>, 'code'> = {}): Reason {
  return { code, resolvedBy: resolverOf[code], source: sourceOf[code], ...more };
}

/** The reason if it holds. */
export function when(holds: boolean, code: ReasonCode, more?: Omit<Partial<Reason>, 'code'>): Reason[] {
  return holds ? [reason(code, more)] : [];
}
