// The pre-check: its questions as data, the outcome of each answer, and what follows from all of them.

import { z } from 'zod';
import type { PrecheckFindingCode, PrecheckLockoutCode, PrecheckOutcome, Waveform } from '@/shared/values/codes';

const sinceLast = z.enum(['no', 'today', 'earlier']);
export const moodChoices = ['very_low', 'agitated', 'racing', 'self_harm_thoughts'] as const;
/** Answers as sent. Every field may be absent: then that question is still open. */
export const precheckAnswersSchema = z.strictObject({
  seizure: sinceLast.optional(),
  faint: sinceLast.optional(),
  headInjury: sinceLast.optional(),
  implantOrMetal: z.boolean().optional(),
  skin: z.enum(['ok', 'sore', 'broken', 'shaved_raw']).optional(),
  pregnancyChance: z.boolean().optional(),
  /** Empty = none of them. */
  mood: z.array(z.enum(moodChoices)).max(moodChoices.length).optional(),
  headache: z.number().int().min(0).max(10).optional(),
  sleptHours: z.number().min(0).max(24).optional(),
  drinksLast12h: z.number().int().min(0).max(50).optional(),
  drinks12To24h: z.number().int().min(0).max(50).optional(),
  feelsAlcohol: z.boolean().optional(),
  drugs24h: z.boolean().optional(),
  newMedicine: z.enum(['none', 'other', 'threshold_list']).optional(),
  unwell: z.boolean().optional(),
  temperatureCelsius: z.number().min(30).max(45).optional(),
  helperPresent: z.boolean().optional(),
  ready: z.boolean().optional(),
});
export type PrecheckAnswers = z.infer<typeof precheckAnswersSchema>;
export type PrecheckField = keyof PrecheckAnswers;

export type PrecheckQuestion = {
  /** Stable, snake_case; `open` names it. */
  readonly id: string;
  readonly field: PrecheckField;
  /** Questions of one page stand together; the progress counts pages. */
  readonly page: string;
  readonly kind: 'since_last' | 'yes_no' | 'choice' | 'choices' | 'scale' | 'number';
  readonly choices?: readonly string[];
  readonly min?: number;
  readonly max?: number;
  readonly step?: number;
  readonly unit?: 'hours' | 'drinks' | 'celsius';
  readonly isOptional?: true;
  /** A protocol may not remove it. */
  readonly isFixed: boolean;
  /** Asked only once this other answer is given so. */
  readonly onlyIf?: { readonly field: PrecheckField; readonly is: boolean };
};
export type PrecheckContext = {
  /** Unknown is read the strict way in all four. */
  readonly waveform?: Waveform;
  readonly hasSeizureHistory?: boolean;
  readonly excludesPregnancy?: boolean;
  readonly zone?: string;
};
export type PrecheckFinding = { readonly code: PrecheckFindingCode; readonly outcome: PrecheckOutcome };
export type PrecheckJudgement = {
  readonly complete: boolean;
  readonly open: readonly string[];
  readonly outcome: PrecheckOutcome | null;
  readonly findings: readonly PrecheckFinding[];
  /** To be stored, one a level. */
  readonly lockouts: readonly {
    readonly level: 'safety' | 'review' | 'hold';
    readonly code: PrecheckLockoutCode;
    readonly until?: string;
  }[];
  readonly emergencyAdvice: boolean;
  readonly pageStaff: boolean;
  readonly worklist: boolean;
};

export declare function precheckQuestions(facts: {
  excludesPregnancy?: boolean;
  waveform?: Waveform;
  assistedOrMinor?: boolean;
}): PrecheckQuestion[];
export declare function judgePrecheck(
  answers: PrecheckAnswers,
  context: PrecheckContext,
  answeredAt: string,
): PrecheckJudgement;
/** Outcome and findings of one answer alone, for showing at once. */
export declare function consequenceOf(
  questionId: string,
  value: unknown,
  context: PrecheckContext,
): { outcome: PrecheckOutcome; findings: readonly PrecheckFinding[] };
