// Worked cases of kind `precheck`: the answers, what is known of person and protocol, when it was answered.

import { z } from 'zod';
import { waveforms } from '@/shared/values/codes';
import { judgePrecheck, moodChoices } from '../precheck';
import { kindOf, present } from './form';

const number = z.number().optional();
const flag = z.boolean().optional();
const since = z.enum(['no', 'today', 'earlier']).optional();

const givenSchema = z.strictObject({
  answered_at: z.string().optional(),
  zone: z.string().optional(),
  prescription: z.strictObject({ waveform: z.enum(waveforms).optional() }).optional(),
  person: z.strictObject({ seizure_history: flag }).optional(),
  protocol: z.strictObject({ excludes_pregnancy: flag }).optional(),
  answers: z
    .strictObject({
      seizure: since,
      faint: since,
      head_injury: since,
      implant_or_metal: flag,
      skin: z.enum(['ok', 'sore', 'broken', 'shaved_raw']).optional(),
      pregnancy_chance: flag,
      mood: z.array(z.enum(moodChoices)).optional(),
      headache: number,
      slept_h: number,
      drinks_last_12h: number,
      drinks_12_to_24h: number,
      feels_alcohol: flag,
      drugs_24h: flag,
      new_medicine: z.enum(['none', 'other', 'threshold_list']).optional(),
      unwell: flag,
      temperature_C: number,
      ready: flag,
    })
    .optional(),
});

export const precheckKind = kindOf(givenSchema, ({ answers = {}, ...given }) => {
  const judged = judgePrecheck(
    {
      seizure: answers.seizure,
      faint: answers.faint,
      headInjury: answers.head_injury,
      implantOrMetal: answers.implant_or_metal,
      skin: answers.skin,
      pregnancyChance: answers.pregnancy_chance,
      mood: answers.mood,
      headache: answers.headache,
      sleptHours: answers.slept_h,
      drinksLast12h: answers.drinks_last_12h,
      drinks12To24h: answers.drinks_12_to_24h,
      feelsAlcohol: answers.feels_alcohol,
      drugs24h: answers.drugs_24h,
      newMedicine: answers.new_medicine,
      unwell: answers.unwell,
      temperatureCelsius: answers.temperature_C,
      ready: answers.ready,
    },
    {
      waveform: given.prescription?.waveform,
      hasSeizureHistory: given.person?.seizure_history,
      excludesPregnancy: given.protocol?.excludes_pregnancy,
      zone: given.zone,
    },
    given.answered_at ?? '',
  );
  return {
    complete: judged.complete,
    open: judged.open,
    outcome: judged.outcome,
    findings: judged.findings.map(({ code, outcome }) => ({ code, outcome })),
    lockouts: judged.lockouts.map(({ level, until }) => present({ level, until })),
    emergency_advice: judged.emergencyAdvice,
    page_staff: judged.pageStaff,
    worklist: judged.worklist,
  };
});
