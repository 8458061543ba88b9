// What the diary, the next day's questions, the session itself and a scale lead to: lockouts, pages, advice.

import { z } from 'zod';
import {
  effectKinds,
  redFlags,
  type EffectGrade,
  type EffectKind,
  type LockoutCode,
  type RedFlag,
} from '@/shared/values/codes';
import type { Sample } from './delivered';

const strength = z.number().int().min(0).max(10);
export const skinChoices = ['ok', 'pink_fading', 'red', 'broken_or_blistered'] as const;

export const diaryAnswersSchema = z.strictObject({
  /** "Nothing felt" is chosen, never assumed. */
  nothingFelt: z.boolean(),
  effects: z
    .array(z.strictObject({ kind: z.enum(effectKinds), strength: strength.min(1), stillThere: z.boolean() }))
    .max(effectKinds.length),
  headacheAfter: strength,
  skin: z.enum(skinChoices),
  redFlags: z.array(z.enum(redFlags)).max(redFlags.length),
  freeText: z.string().trim().max(2000).optional(),
  /** The person says that they want to send a photo of the skin. */
  photoOffered: z.boolean().optional(),
});
export type DiaryAnswers = z.infer<typeof diaryAnswersSchema>;
export const nextDayAnswersSchema = z.strictObject({
  rednessStillThere: z.boolean(),
  headacheNextDay: strength,
  redFlags: z.array(z.enum(redFlags)).max(redFlags.length).optional(),
  freeText: z.string().trim().max(2000).optional(),
});
export type NextDayAnswers = z.infer<typeof nextDayAnswersSchema>;

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

export declare function gradeOf(strength: number): EffectGrade;
export declare function worstGradeOf(answers: Pick<DiaryAnswers, 'effects'>): EffectGrade;
export declare function diaryFactsOf(answers: DiaryAnswers): NonNullable<LockoutFacts['diary']>;
export declare function nextDayFactsOf(
  answers: NextDayAnswers,
  after: DiaryAnswers | undefined,
): NonNullable<LockoutFacts['diary']>;
export declare function lockoutsAfterDiary(facts: LockoutFacts): LockoutAnswer;
