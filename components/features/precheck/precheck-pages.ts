// The pre-check's pages from its questions and the answers so far: which questions stand on a page, whether it is answered, what one
// touch can answer whole. It explains by the rules and decides nothing.

import {
  consequenceOf,
  precheckQuestions,
  type PrecheckAnswers,
  type PrecheckFinding,
  type PrecheckQuestion,
} from '@/shared/rules/precheck';
import { precheckOutcomes, type PrecheckOutcome, type Waveform } from '@/shared/values/codes';

export interface PrecheckFacts {
  excludesPregnancy: boolean;
  helperAsked: boolean;
  waveform: Waveform | undefined;
  zone: string;
}
export interface PrecheckPage {
  name: string;
  questions: PrecheckQuestion[];
}

/** Questions that stand on one page, in the order of asking; those that an answer calls up come and go with it. */
export function pagesOf(facts: PrecheckFacts, answers: PrecheckAnswers): PrecheckPage[] {
  const pages: PrecheckPage[] = [];
  for (const question of precheckQuestions({ ...facts, assistedOrMinor: facts.helperAsked })) {
    const { onlyIf } = question;
    if (onlyIf && answers[onlyIf.field] !== onlyIf.is) continue;
    const page = pages.find(({ name }) => name === question.page);
    if (page) page.questions.push(question);
    else pages.push({ name: question.page, questions: [question] });
  }
  return pages;
}

export function isAnswered(page: PrecheckPage, answers: PrecheckAnswers): boolean {
  return page.questions.every((question) => question.isOptional === true || answers[question.field] !== undefined);
}

/** A page on which one touch says it all. */
export function isOneTouch(page: PrecheckPage): boolean {
  const [only, ...others] = page.questions;
  return others.length === 0 && only !== undefined && ['since_last', 'yes_no', 'choice'].includes(only.kind);
}

/** What "none of this" means on a page of several questions, so that it takes one touch and not three. */
export const noneOf: Readonly<Record<string, PrecheckAnswers>> = {
  events: { seizure: 'no', faint: 'no', headInjury: 'no' },
  alcohol: { drinksLast12h: 0, drinks12To24h: 0, feelsAlcohol: false },
  medicine: { drugs24h: false, newMedicine: 'none' },
};

export interface Consequence {
  outcome: PrecheckOutcome | 'perhaps_tomorrow';
  findings: readonly PrecheckFinding[];
}

/** What the answers of one page lead to by themselves. The server knows more of the person: where that matters it says "perhaps". */
export function consequenceOfPage(page: PrecheckPage, answers: PrecheckAnswers, facts: PrecheckFacts): Consequence {
  const judge = (hasSeizureHistory: boolean) => {
    const context = {
      waveform: facts.waveform,
      excludesPregnancy: facts.excludesPregnancy,
      zone: facts.zone,
      hasSeizureHistory,
    };
    const all = page.questions.map((question) => consequenceOf(question.id, answers[question.field], context));
    const outcome = precheckOutcomes.reduce<PrecheckOutcome>(
      (worst, one) => (all.some((each) => each.outcome === one) ? one : worst),
      'go_on',
    );
    return { outcome, findings: all.flatMap(({ findings }) => findings) };
  };
  const [strict, mild] = [judge(true), judge(false)];
  return strict.outcome === mild.outcome ? strict : { outcome: 'perhaps_tomorrow', findings: strict.findings };
}

/** Answers to questions that are still asked; an answer whose question has gone is not sent. */
export function answersAsked(pages: readonly PrecheckPage[], answers: PrecheckAnswers): PrecheckAnswers {
  const fields = new Set<string>(pages.flatMap((page) => page.questions.map((question) => question.field)));
  return Object.fromEntries(Object.entries(answers).filter(([field]) => fields.has(field)));
}
