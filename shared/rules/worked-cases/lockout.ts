// Worked cases of kind `lockout`: a diary just sent, what was felt and measured, the recent past, a scale.

import { z } from 'zod';
import { effectGrades, redFlags } from '@/shared/values/codes';
import { lockoutsAfterDiary } from '../lockout';
import { kindOf } from './form';

const number = z.number().optional();
const flags = z.array(z.enum(redFlags)).optional();
const grade = z.enum(effectGrades);

const givenSchema = z.strictObject({
  diary: z
    .strictObject({
      red_flags: flags,
      effects: z.array(z.strictObject({ name: z.string().optional(), grade: grade.optional() })).optional(),
      headache: number,
      redness_next_day: z.boolean().optional(),
    })
    .optional(),
  during: z
    .strictObject({
      flags,
      pain_at_pad: number,
      permitted_mA: number,
      samples: z.array(z.tuple([z.number(), z.number().nullable()])).optional(),
    })
    .optional(),
  headache_before: z.array(z.number()).optional(),
  worst_grade_before: z.array(grade).optional(),
  end_reasons: z.array(z.string()).optional(),
  planned: z.array(z.string()).optional(),
  last_14_days: z.strictObject({ planned: number, done: number }).optional(),
  photo_asked: z.boolean().optional(),
  photo_sent: z.boolean().optional(),
  scale: z
    .strictObject({
      name: z.string().optional(),
      baseline: number,
      scores: z.array(z.number()).optional(),
      worse_by: number,
      self_harm_item: number,
    })
    .optional(),
});

export const lockoutKind = kindOf(givenSchema, ({ diary, during, scale, ...given }) => {
  const answer = lockoutsAfterDiary({
    diary: diary && {
      redFlags: diary.red_flags,
      effects: diary.effects?.map((effect) => ({ kind: effect.name, grade: effect.grade })),
      headache: diary.headache,
      rednessNextDay: diary.redness_next_day,
    },
    during: during && {
      flags: during.flags,
      painAtPad: during.pain_at_pad,
      permittedMilliamp: during.permitted_mA,
      samples: during.samples,
    },
    headacheBefore: given.headache_before,
    worstGradeBefore: given.worst_grade_before,
    endReasons: given.end_reasons,
    planned: given.planned,
    last14Days: given.last_14_days,
    isPhotoAsked: given.photo_asked,
    isPhotoSent: given.photo_sent,
    scale: scale && {
      name: scale.name,
      baseline: scale.baseline,
      scores: scale.scores,
      worseBy: scale.worse_by,
      selfHarmItem: scale.self_harm_item,
    },
  });
  return {
    effects: answer.effects.map(({ code, level, liftBy }) => ({ code, level, lift_by: liftBy })),
    page_staff: answer.pageStaff,
    emergency_advice: answer.emergencyAdvice,
    device_action: answer.deviceAction,
    device_quarantined: answer.deviceQuarantined,
    may_start: answer.mayStart,
  };
});
