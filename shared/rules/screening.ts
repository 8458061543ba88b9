// Screening list, training skills and capability items as data, and their judgement.

import { z } from 'zod';

export type ScreeningClass = 'absolute' | 'relative' | 'ask';
export type ScreeningItem = { readonly id: string; readonly class: ScreeningClass; readonly source: string };
export const screeningAnswersSchema = z.record(
  z.string().max(60),
  z.strictObject({ answer: z.enum(['yes', 'no', 'not_known']), reason: z.string().trim().min(1).max(2000).optional() }),
);
export type ScreeningAnswers = z.infer<typeof screeningAnswersSchema>;
export type ScreeningJudgement = {
  readonly complete: boolean;
  readonly outcome: 'clear' | 'excluded' | 'incomplete';
  /** Not answered, or "not known". */
  readonly open: readonly string[];
  /** Relative and yes, without a clinician's reason for going on. */
  readonly needsReason: readonly string[];
  /** Absolute and yes. */
  readonly excludedBy: readonly string[];
  /** Ids that are no item of the list. */
  readonly unknown: readonly string[];
};
export type TrainingJudgement = {
  readonly complete: boolean;
  readonly open: readonly string[];
  readonly unknown: readonly string[];
};

export declare const screeningItems: readonly ScreeningItem[];
export declare const trainingSkills: readonly string[];
export declare const capabilityItems: readonly string[];
export declare function judgeScreening(answers: ScreeningAnswers): ScreeningJudgement;
export declare function judgeTraining(given: {
  readonly skills: Readonly<Record<string, boolean>>;
  readonly capability: Readonly<Record<string, boolean>>;
  /** A named helper who has what the person lacks (R5). */
  readonly hasHelper: boolean;
}): TrainingJudgement;
