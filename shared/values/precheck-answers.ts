// The answers of a pre-check as sent: shape only. What an answer means is shared/rules/precheck/findings.ts.

import { z } from 'zod';

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
