// The questions of the pre-check as data: order, pages, kind of answer, which a protocol may not remove. No words.

import type { Waveform } from '@/shared/values/codes';
import { moodChoices, type PrecheckField } from '@/shared/values/precheck-answers';

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

const sinceLast = ['no', 'today', 'earlier'] as const;

/** Everything that can be asked, in the order of asking. `isFixed`: the starred ones of the safety rules. */
const allQuestions: readonly PrecheckQuestion[] = [
  { id: 'seizure', field: 'seizure', page: 'events', kind: 'since_last', choices: sinceLast, isFixed: true },
  { id: 'faint', field: 'faint', page: 'events', kind: 'since_last', choices: sinceLast, isFixed: true },
  { id: 'head_injury', field: 'headInjury', page: 'events', kind: 'since_last', choices: sinceLast, isFixed: true },
  { id: 'implant_or_metal', field: 'implantOrMetal', page: 'implant', kind: 'yes_no', isFixed: true },
  {
    id: 'skin',
    field: 'skin',
    page: 'skin',
    kind: 'choice',
    choices: ['ok', 'sore', 'broken', 'shaved_raw'],
    isFixed: true,
  },
  { id: 'pregnancy_chance', field: 'pregnancyChance', page: 'pregnancy', kind: 'yes_no', isFixed: true },
  { id: 'mood', field: 'mood', page: 'mood', kind: 'choices', choices: moodChoices, isFixed: true },
  { id: 'headache', field: 'headache', page: 'headache', kind: 'scale', min: 0, max: 10, step: 1, isFixed: false },
  {
    id: 'slept_h',
    field: 'sleptHours',
    page: 'sleep',
    kind: 'number',
    min: 0,
    max: 24,
    step: 0.5,
    unit: 'hours',
    isFixed: false,
  },
  {
    id: 'drinks_last_12h',
    field: 'drinksLast12h',
    page: 'alcohol',
    kind: 'number',
    min: 0,
    max: 50,
    step: 1,
    unit: 'drinks',
    isFixed: false,
  },
  {
    id: 'drinks_12_to_24h',
    field: 'drinks12To24h',
    page: 'alcohol',
    kind: 'number',
    min: 0,
    max: 50,
    step: 1,
    unit: 'drinks',
    isFixed: false,
  },
  { id: 'feels_alcohol', field: 'feelsAlcohol', page: 'alcohol', kind: 'yes_no', isFixed: false },
  { id: 'drugs_24h', field: 'drugs24h', page: 'medicine', kind: 'yes_no', isFixed: false },
  {
    id: 'new_medicine',
    field: 'newMedicine',
    page: 'medicine',
    kind: 'choice',
    choices: ['none', 'other', 'threshold_list'],
    isFixed: false,
  },
  { id: 'unwell', field: 'unwell', page: 'unwell', kind: 'yes_no', isFixed: false },
  {
    id: 'temperature_C',
    field: 'temperatureCelsius',
    page: 'unwell',
    kind: 'number',
    min: 30,
    max: 45,
    step: 0.1,
    unit: 'celsius',
    isOptional: true,
    isFixed: false,
    onlyIf: { field: 'unwell', is: true },
  },
  { id: 'helper_present', field: 'helperPresent', page: 'helper', kind: 'yes_no', isFixed: true },
  { id: 'ready', field: 'ready', page: 'ready', kind: 'yes_no', isFixed: false },
];

/** The questions for this person and protocol. What is not known is asked: the strict way. */
export function precheckQuestions(facts: {
  readonly excludesPregnancy?: boolean;
  readonly waveform?: Waveform;
  readonly assistedOrMinor?: boolean;
}): PrecheckQuestion[] {
  return allQuestions.filter(
    ({ id }) =>
      (id !== 'pregnancy_chance' || facts.excludesPregnancy !== false) &&
      (id !== 'helper_present' || facts.assistedOrMinor !== false),
  );
}
