// What the diary, the next day's questions, the session itself and a scale lead to: lockouts, pages, advice. A part
// of the facts that is absent was not asked, and nothing follows from it; that it must be asked is clearance's.

import {
  effectGrades,
  lockoutCodes,
  type EffectGrade,
  type EffectKind,
  type LockoutCode,
  type RedFlag,
} from '@/shared/values/codes';
import type { DiaryAnswers, NextDayAnswers } from '@/shared/values/diary-answers';
import { isBelow } from '@/shared/values/units';
import { overCurrent, type Sample } from './delivered';

export {
  diaryAnswersSchema,
  nextDayAnswersSchema,
  skinChoices,
  type DiaryAnswers,
  type NextDayAnswers,
} from '@/shared/values/diary-answers';
export { effectKinds, redFlags } from '@/shared/values/codes';

export type LockoutFacts = {
  /** Absent parts were not asked; nothing follows from them. */
  readonly diary?: {
    readonly redFlags?: readonly RedFlag[];
    readonly effects?: readonly { readonly kind?: EffectKind | (string & {}); readonly grade?: EffectGrade }[];
    /** 0 to 10, the worse of after and next day. */
    readonly headache?: number;
    readonly rednessNextDay?: boolean;
  };
  readonly during?: {
    readonly flags?: readonly RedFlag[];
    readonly painAtPad?: number;
    readonly permittedMilliamp?: number;
    readonly samples?: readonly Sample[];
  };
  /** Earlier sessions, old to new, without the one just written. */
  readonly headacheBefore?: readonly number[];
  readonly worstGradeBefore?: readonly EffectGrade[];
  /** End reasons, old to new, the last session included. */
  readonly endReasons?: readonly string[];
  readonly planned?: readonly ('done' | 'missed' | (string & {}))[];
  readonly last14Days?: { readonly planned?: number; readonly done?: number };
  readonly scale?: {
    readonly name?: string;
    readonly baseline?: number;
    readonly scores?: readonly number[];
    readonly worseBy?: number;
    readonly selfHarmItem?: number;
  };
  readonly isPhotoAsked?: boolean;
  readonly isPhotoSent?: boolean;
};
export type LockoutEffect = {
  readonly code: LockoutCode;
  readonly level: 'safety' | 'review' | 'device' | 'flag';
  readonly liftBy: 'clinician' | 'coordinator' | 'none';
};
export type LockoutAnswer = {
  readonly effects: readonly LockoutEffect[];
  readonly pageStaff: boolean;
  readonly emergencyAdvice: boolean;
  readonly deviceAction: 'none' | 'ramp_down';
  readonly deviceQuarantined: boolean;
  readonly mayStart: boolean;
};

/** Own choices, as the safety rules say them. */
const highHeadache = 7;
const risingHeadache = 3;
const highPain = 7;
const moderateOf = { sessions: 5, moderate: 3 } as const;
const lostContactRunning = 2;
const missedRunning = 3;
const leastPlanned = 5;
const leastAdherence = 0.8;

/** A strength of 0 to 10 as a grade: 1–3 mild, 4–6 moderate, 7–10 severe (own choice, as for pain ratings). */
export function gradeOf(strength: number): EffectGrade {
  if (!(strength > 0)) return 'none';
  if (strength < 4) return 'mild';
  return strength < 7 ? 'moderate' : 'severe';
}

function worse(a: EffectGrade, b: EffectGrade): EffectGrade {
  return effectGrades.indexOf(b) > effectGrades.indexOf(a) ? b : a;
}

/** The worst grade of a diary, for `worstGradeBefore` of the next one. */
export function worstGradeOf(answers: Pick<DiaryAnswers, 'effects'>): EffectGrade {
  return answers.effects.map(({ strength }) => gradeOf(strength)).reduce(worse, 'none');
}

/** The diary's answers as facts. Broken or blistered skin is a red flag however it was said. */
export function diaryFactsOf(answers: DiaryAnswers): NonNullable<LockoutFacts['diary']> {
  const isBroken = answers.skin === 'broken_or_blistered';
  return {
    redFlags: isBroken ? [...answers.redFlags, 'burn_or_blister'] : answers.redFlags,
    effects: answers.effects.map(({ kind, strength }) => ({ kind, grade: gradeOf(strength) })),
    headache: answers.headacheAfter,
    rednessNextDay: false,
  };
}

/** The next day's answers as facts: the headache of that session is the worse of the two. */
export function nextDayFactsOf(
  answers: NextDayAnswers,
  after: DiaryAnswers | undefined,
): NonNullable<LockoutFacts['diary']> {
  return {
    redFlags: answers.redFlags ?? [],
    effects: [],
    headache: Math.max(answers.headacheNextDay, after?.headacheAfter ?? 0),
    rednessNextDay: answers.rednessStillThere,
  };
}

function isRising(headaches: readonly number[]): boolean {
  const [first, second, third] = headaches.slice(-3);
  if (first === undefined || second === undefined || third === undefined) return false;
  return first < second && second < third && third >= risingHeadache;
}

function diaryCodes(facts: LockoutFacts): LockoutCode[] {
  const { headache, effects = [], redFlags = [], rednessNextDay } = facts.diary ?? {};
  const codes: LockoutCode[] = [...redFlags];
  const worst = effects.map(({ grade }) => grade ?? 'none').reduce<EffectGrade>(worse, 'none');
  const grades = [...(facts.worstGradeBefore ?? []), worst].slice(-moderateOf.sessions);
  if (worst === 'severe') codes.push('severe_effect');
  if (headache !== undefined && headache >= highHeadache) codes.push('headache_high');
  if (headache !== undefined && isRising([...(facts.headacheBefore ?? []), headache])) codes.push('headache_rising');
  if (rednessNextDay === true) codes.push('skin_next_day');
  if (facts.isPhotoAsked === true && facts.isPhotoSent !== true) codes.push('photo_missing');
  // Severe counts as at least moderate: a worse report must never take a flag away.
  const atLeastModerate = grades.filter((grade) => grade === 'moderate' || grade === 'severe').length;
  if (facts.diary !== undefined && atLeastModerate >= moderateOf.moderate) codes.push('moderate_3_of_5');
  return codes;
}

function duringCodes({ during = {} }: LockoutFacts): LockoutCode[] {
  const { flags = [], painAtPad, permittedMilliamp, samples = [] } = during;
  const codes: LockoutCode[] = [...flags];
  if (painAtPad !== undefined && painAtPad >= highPain) codes.push('pain_high');
  if (permittedMilliamp !== undefined && overCurrent(samples, permittedMilliamp) !== null) codes.push('over_current');
  return codes;
}

/** The last so many are all this word. */
function endsWith(words: readonly string[] | undefined, word: string, times: number): boolean {
  const last = (words ?? []).slice(-times);
  return last.length === times && last.every((each) => each === word);
}

function courseCodes({ endReasons, planned, last14Days }: LockoutFacts): LockoutCode[] {
  const codes: LockoutCode[] = [];
  if (endsWith(endReasons, 'lost_contact', lostContactRunning)) codes.push('lost_contact_twice');
  if (endsWith(planned, 'missed', missedRunning)) codes.push('missed_three');
  const { planned: due, done } = last14Days ?? {};
  if (due !== undefined && done !== undefined && due >= leastPlanned && isBelow(done / due, leastAdherence)) {
    codes.push('adherence_low');
  }
  return codes;
}

/** Higher is worse. A self-harm item acts whatever the sum. */
function scaleCodes({ scale }: LockoutFacts): LockoutCode[] {
  const codes: LockoutCode[] = [];
  const { baseline, worseBy, scores = [], selfHarmItem } = scale ?? {};
  const lastTwo = scores.slice(-2);
  const bound = baseline === undefined || worseBy === undefined ? Number.POSITIVE_INFINITY : baseline + worseBy;
  if (lastTwo.length === 2 && lastTwo.every((score) => score >= bound)) codes.push('scores_worse_twice');
  if (selfHarmItem !== undefined && selfHarmItem > 0) codes.push('self_harm_item');
  return codes;
}

/** The level of each code. Safety: a clinician, never by time. */
export const levelOf: Readonly<Record<LockoutCode, LockoutEffect['level']>> = {
  seizure: 'safety',
  faint: 'safety',
  burn_or_blister: 'safety',
  neuro_deficit: 'safety',
  chest_pain: 'safety',
  worst_headache: 'safety',
  self_harm_thoughts: 'safety',
  mania_signs: 'safety',
  scores_worse_twice: 'safety',
  self_harm_item: 'safety',
  severe_effect: 'review',
  headache_high: 'review',
  headache_rising: 'review',
  pain_high: 'review',
  skin_next_day: 'review',
  photo_missing: 'review',
  over_current: 'device',
  lost_contact_twice: 'device',
  moderate_3_of_5: 'flag',
  missed_three: 'flag',
  adherence_low: 'flag',
};

const liftByOf = { safety: 'clinician', review: 'clinician', device: 'coordinator', flag: 'none' } as const;

/** Each effect once, in the order of the codes, with what it asks of the device, the staff and the screen. */
export function lockoutsAfterDiary(facts: LockoutFacts): LockoutAnswer {
  const during = duringCodes(facts);
  const found = new Set([...diaryCodes(facts), ...during, ...courseCodes(facts), ...scaleCodes(facts)]);
  const effects = lockoutCodes
    .filter((code) => found.has(code))
    .map((code) => ({ code, level: levelOf[code], liftBy: liftByOf[levelOf[code]] }));
  const isSafety = effects.some(({ level }) => level === 'safety');
  const isOver = found.has('over_current');
  return {
    effects,
    pageStaff: isSafety || isOver,
    emergencyAdvice: isSafety,
    deviceAction: during.length > 0 ? 'ramp_down' : 'none',
    deviceQuarantined: isOver,
    mayStart: effects.every(({ level }) => level === 'flag'),
  };
}
