// What each answer of a pre-check means by itself. Numbers are own choices that a site approves; the order of the
// findings is that of the codes.

import type { PrecheckFindingCode, PrecheckOutcome, Waveform } from '@/shared/values/codes';
import type { PrecheckAnswers } from '@/shared/values/precheck-answers';
import { atLeast, isBelow } from '@/shared/values/units';

export type PrecheckContext = {
  /** Unknown is read the strict way in all four. */
  readonly waveform?: Waveform;
  readonly hasSeizureHistory?: boolean;
  readonly excludesPregnancy?: boolean;
  readonly zone?: string;
};
export type PrecheckFinding = { readonly code: PrecheckFindingCode; readonly outcome: PrecheckOutcome };

const cautionHeadache = 4;
const reviewHeadache = 7;
const leastSleepHours = 4;
/** More than this many drinks in the last 12 h. */
const mostDrinks = 2;
const feverCelsius = 38;

/** A new event: today it is an emergency, earlier somebody must look first. */
function event(code: PrecheckFindingCode, since: 'no' | 'today' | 'earlier' | undefined): PrecheckFinding[] {
  if (since === 'today') return [{ code, outcome: 'emergency' }];
  return since === 'earlier' ? [{ code, outcome: 'hold_review' }] : [];
}

function review(code: PrecheckFindingCode, holds: boolean): PrecheckFinding[] {
  return holds ? [{ code, outcome: 'hold_review' }] : [];
}

function headacheFindings({ headache }: PrecheckAnswers): PrecheckFinding[] {
  if (headache === undefined || headache < cautionHeadache) return [];
  return [{ code: 'headache', outcome: headache >= reviewHeadache ? 'hold_review' : 'caution' }];
}

/** Little sleep lowers the seizure threshold: with alternating current, noise or a history it waits a day. */
function sleepFindings({ sleptHours }: PrecheckAnswers, context: PrecheckContext): PrecheckFinding[] {
  if (sleptHours === undefined || !isBelow(sleptHours, leastSleepHours)) return [];
  const isPlain = context.waveform === 'tDCS' && context.hasSeizureHistory === false;
  return [{ code: 'slept_little', outcome: isPlain ? 'caution' : 'hold_tomorrow' }];
}

function alcoholFindings({ drinksLast12h, drinks12To24h, feelsAlcohol }: PrecheckAnswers): PrecheckFinding[] {
  const recent = drinksLast12h ?? 0;
  if (recent > mostDrinks || feelsAlcohol === true) return [{ code: 'alcohol', outcome: 'hold_tomorrow' }];
  return recent > 0 || (drinks12To24h ?? 0) > 0 ? [{ code: 'alcohol', outcome: 'caution' }] : [];
}

function healthFindings({ unwell, temperatureCelsius }: PrecheckAnswers): PrecheckFinding[] {
  if (temperatureCelsius !== undefined && atLeast(temperatureCelsius, feverCelsius)) {
    return [{ code: 'fever', outcome: 'hold_tomorrow' }];
  }
  return unwell === true ? [{ code: 'unwell', outcome: 'caution' }] : [];
}

function medicineFindings({ newMedicine }: PrecheckAnswers): PrecheckFinding[] {
  if (newMedicine === 'threshold_list') return [{ code: 'threshold_medicine', outcome: 'hold_review' }];
  return newMedicine === 'other' ? [{ code: 'new_medicine', outcome: 'caution' }] : [];
}

/** Everything but "go on". Answers may be partial: what is open has no finding. */
export function precheckFindings(answers: PrecheckAnswers, context: PrecheckContext): PrecheckFinding[] {
  const mood = answers.mood ?? [];
  const isPregnancyAsked = context.excludesPregnancy !== false;
  return [
    ...event('seizure', answers.seizure),
    ...event('faint', answers.faint),
    ...event('head_injury', answers.headInjury),
    ...(mood.includes('self_harm_thoughts') ? [{ code: 'self_harm_thoughts', outcome: 'emergency' } as const] : []),
    ...review('new_implant', answers.implantOrMetal === true),
    ...review('skin_not_ok', answers.skin !== undefined && answers.skin !== 'ok'),
    ...review('pregnancy_possible', isPregnancyAsked && answers.pregnancyChance === true),
    ...review('mood_very_low', mood.includes('very_low')),
    ...review('mood_agitated', mood.includes('agitated')),
    ...review('mood_racing', mood.includes('racing')),
    ...review('drugs', answers.drugs24h === true),
    ...headacheFindings(answers),
    ...sleepFindings(answers, context),
    ...alcoholFindings(answers),
    ...healthFindings(answers),
    ...medicineFindings(answers),
  ];
}
