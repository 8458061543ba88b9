// Every stable code that a rule can answer with. Codes are never renamed and never reused: stored rows, other
// programs and the sentences in locales/ depend on them. No words for people and no decisions here.

/** Why a session may not start, in the order in which clearance lists them. */
export const reasonCodes = [
  'account_inactive',
  'consent_withdrawn',
  'consent_missing',
  'consent_outdated',
  'guardian_consent_missing',
  'assent_missing',
  'screening_incomplete',
  'screening_excluded',
  'screening_expired',
  'training_missing',
  'training_expired',
  'supervision_due',
  'mood_check_due',
  'prescription_unsigned',
  'prescription_altered',
  'second_signature_missing',
  'dose_above_limit',
  'prescription_paused',
  'prescription_expired',
  'prescription_unacknowledged',
  'lockout_safety',
  'lockout_review',
  'lockout_device',
  'lockout_hold',
  'outside_hours',
  'gap_too_short',
  'day_count_reached',
  'minutes_24h',
  'week_count_reached',
  'charge_24h',
  'charge_7d',
  'course_complete',
  'session_open',
  'diary_missing',
  'recall_call_due',
  'device_unassigned',
  'device_recalled',
  'battery_low',
  'supply_used_up',
  'supply_expired',
  'precheck_missing',
  'precheck_expired',
  'precheck_other_person',
  'precheck_hold',
  'helper_absent',
  'live_permit',
  'clock_bad',
  'unknown_fact',
] as const;
export type ReasonCode = (typeof reasonCodes)[number];

/** Who can take a reason out of the way. `time` = it passes by itself, `staff` = whoever runs the server. */
export const resolvers = [
  'participant',
  'guardian',
  'coordinator',
  'clinician',
  'administrator',
  'time',
  'staff',
] as const;
export type Resolver = (typeof resolvers)[number];

/** Rows of a judged dose, in the order in which they are listed. */
export const doseQuantities = [
  'current',
  'minutes',
  'charge',
  'density',
  'area',
  'per_day',
  'day_minutes',
  'gap',
  'ramp',
  'frequency',
  'minor',
  'ring',
  'shares',
  'site_limit',
  'unknown_fact',
] as const;
export type DoseQuantity = (typeof doseQuantities)[number];

/** From good to bad. */
export const tiers = ['accept', 'second_signature', 'refuse'] as const;
export type Tier = (typeof tiers)[number];

/**
 * Which layer a limit belongs to: `ceiling` compiled in, `site` set by the site's protocol, `default` the row that
 * ships with the program until the site sets its own, `prescription` what the prescriber wrote.
 */
export const limitLayers = ['ceiling', 'site', 'default', 'prescription'] as const;
export type LimitLayer = (typeof limitLayers)[number];

export const waveforms = ['tDCS', 'tACS', 'tRNS'] as const;
export type Waveform = (typeof waveforms)[number];
export const amplitudeMeanings = ['peak', 'peak_to_peak', 'rms'] as const;
export type AmplitudeMeaning = (typeof amplitudeMeanings)[number];
export const polarities = ['anode', 'cathode'] as const;
export type Polarity = (typeof polarities)[number];
export const electrodeShapes = ['pad', 'ring'] as const;
export type ElectrodeShape = (typeof electrodeShapes)[number];

/** From bad to good for a lockout; a `flag` blocks nothing, a `hold` ends by itself. */
export const lockoutLevels = ['safety', 'review', 'device', 'hold', 'flag'] as const;
export type LockoutLevel = (typeof lockoutLevels)[number];

/** Answers that stop everything at once, in a session, in the diary, or the day after. */
export const redFlags = [
  'seizure',
  'faint',
  'burn_or_blister',
  'neuro_deficit',
  'chest_pain',
  'worst_headache',
  'self_harm_thoughts',
  'mania_signs',
] as const;
export type RedFlag = (typeof redFlags)[number];

/** What the lockout rules can open after a session, a diary, a scale or a planned session that passed. */
export const lockoutCodes = [
  ...redFlags,
  'scores_worse_twice',
  'self_harm_item',
  'severe_effect',
  'headache_high',
  'headache_rising',
  'pain_high',
  'skin_next_day',
  'photo_missing',
  'over_current',
  'lost_contact_twice',
  'moderate_3_of_5',
  'missed_three',
  'adherence_low',
] as const;
export type LockoutCode = (typeof lockoutCodes)[number];

/** Pre-check outcomes from good to bad. */
export const precheckOutcomes = ['go_on', 'caution', 'hold_tomorrow', 'hold_review', 'emergency'] as const;
export type PrecheckOutcome = (typeof precheckOutcomes)[number];

export const precheckFindingCodes = [
  'seizure',
  'faint',
  'head_injury',
  'self_harm_thoughts',
  'new_implant',
  'skin_not_ok',
  'pregnancy_possible',
  'mood_very_low',
  'mood_agitated',
  'mood_racing',
  'drugs',
  'threshold_medicine',
  'headache',
  'slept_little',
  'alcohol',
  'fever',
  'unwell',
  'new_medicine',
] as const;
export type PrecheckFindingCode = (typeof precheckFindingCodes)[number];

/** A stored lockout that a pre-check opened is named after its worst finding. */
export type PrecheckLockoutCode = `precheck_${PrecheckFindingCode}`;
export const precheckLockoutCodes: readonly PrecheckLockoutCode[] = precheckFindingCodes.map(
  (code): PrecheckLockoutCode => `precheck_${code}`,
);

/** Every code that a stored lockout may carry. */
export type StoredLockoutCode = LockoutCode | PrecheckLockoutCode;

export const permitReasonCodes = [
  'permit_expired',
  'permit_revoked',
  'permit_used',
  'wrong_device',
  'counter_used',
  'live_permit',
  'outside_hours',
  'unknown_fact',
] as const;
export type PermitReasonCode = (typeof permitReasonCodes)[number];

/** What a permit's end came from; of two equal instants the first in this order is named. */
export const permitExpiryCauses = ['issue', 'precheck', 'hours', 'prescription'] as const;
export type PermitExpiryCause = (typeof permitExpiryCauses)[number];

/** Facts about one past session as clearance sees it. */
export const sessionFactStates = ['closed', 'running', 'reserved', 'void'] as const;
export type SessionFactState = (typeof sessionFactStates)[number];

/** Words of the events that move a running session. */
export const sessionEventWords = ['contact_lost', 'contact_back', 'pause', 'resume', 'stop', 'tick'] as const;
export type SessionEventWord = (typeof sessionEventWords)[number];
export const sessionStates = ['ramp_up', 'hold', 'ramp_down', 'paused', 'ended'] as const;
export type SessionState = (typeof sessionStates)[number];
export const endReasons = ['complete', 'stopped', 'lost_contact', 'pause_limit', 'too_short_to_resume'] as const;
export type EndReason = (typeof endReasons)[number];

export const completenessWords = ['complete', 'partial', 'not_delivered'] as const;
export type Completeness = (typeof completenessWords)[number];

/** States of one planned session of a course. */
export const plannedSessionStates = [
  'complete',
  'partial',
  'not_delivered',
  'missed',
  'excused',
  'cancelled',
  'future',
] as const;
export type PlannedSessionState = (typeof plannedSessionStates)[number];

export const adherenceFlags = ['missed_three', 'adherence_low', 'recall_needed'] as const;
export type AdherenceFlag = (typeof adherenceFlags)[number];

/** Sensations asked after each session; phosphenes and dizziness are asked for tACS only. */
export const effectKinds = [
  'headache',
  'neck_pain',
  'scalp_pain',
  'tingling',
  'itching',
  'burning',
  'skin_redness',
  'sleepiness',
  'trouble_concentrating',
  'mood_change',
  'phosphenes',
  'dizziness',
  'other',
] as const;
export type EffectKind = (typeof effectKinds)[number];

/** How strong an effect was, from none to severe (severity, not seriousness: ICH E2A keeps them apart). */
export const effectGrades = ['none', 'mild', 'moderate', 'severe'] as const;
export type EffectGrade = (typeof effectGrades)[number];

export const scaleNames = ['PHQ-9', 'PHQ-8', 'PHQ-2', 'GAD-7', 'pain-NRS', 'PGIC'] as const;
export type ScaleName = (typeof scaleNames)[number];

/** Levels of a worklist item, most urgent first. */
export const worklistLevels = ['safety', 'review', 'look', 'device', 'flag', 'due'] as const;
export type WorklistLevel = (typeof worklistLevels)[number];
