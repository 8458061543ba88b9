// The answers of the diary and of the next day's questions as sent: shape only. What follows is shared/rules/lockout.ts.

import { z } from 'zod';
import { effectKinds, redFlags } from './codes';

const strength = z.number().int().min(0).max(10);
export const skinChoices = ['ok', 'pink_fading', 'red', 'broken_or_blistered'] as const;

export const diaryAnswersSchema = z
  .strictObject({
    /** "Nothing felt" is chosen, never assumed: exactly one of it and `effects` says something. */
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
  })
  .refine(({ nothingFelt, effects }) => nothingFelt !== effects.length > 0, {
    path: ['nothingFelt'],
    message: 'nothing_felt_or_effects',
  })
  .refine(({ effects }) => new Set(effects.map(({ kind }) => kind)).size === effects.length, {
    path: ['effects'],
    message: 'effect_twice',
  });
export type DiaryAnswers = z.infer<typeof diaryAnswersSchema>;
export const nextDayAnswersSchema = z.strictObject({
  rednessStillThere: z.boolean(),
  headacheNextDay: strength,
  redFlags: z.array(z.enum(redFlags)).max(redFlags.length).optional(),
  freeText: z.string().trim().max(2000).optional(),
});
export type NextDayAnswers = z.infer<typeof nextDayAnswersSchema>;
