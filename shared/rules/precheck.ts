// The pre-check as a whole: which questions are still open, the worst outcome, and what is stored and told because
// of it. An emergency answer acts at once, however much is open.

import { precheckOutcomes, type PrecheckLockoutCode, type PrecheckOutcome } from '@/shared/values/codes';
import { precheckAnswersSchema, type PrecheckAnswers } from '@/shared/values/precheck-answers';
import { isoOf, parseInstant } from '@/shared/values/zone';
import { holdUntilTomorrow } from './hold';
import { precheckFindings, type PrecheckContext, type PrecheckFinding } from './precheck/findings';
import { precheckQuestions } from './precheck/questions';

export {
  moodChoices,
  precheckAnswersSchema,
  type PrecheckAnswers,
  type PrecheckField,
} from '@/shared/values/precheck-answers';
export type { PrecheckContext, PrecheckFinding } from './precheck/findings';
export { precheckQuestions, type PrecheckQuestion } from './precheck/questions';

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

/** The worst of the findings; `go_on` without any. */
function worstOf(findings: readonly PrecheckFinding[]): PrecheckOutcome {
  return findings.reduce<PrecheckOutcome>(
    (worst, { outcome }) => (precheckOutcomes.indexOf(outcome) > precheckOutcomes.indexOf(worst) ? outcome : worst),
    'go_on',
  );
}

/** Ids of the questions that are asked and not answered. The helper is asked too, but blocks by clearance. */
function openQuestions(answers: PrecheckAnswers, context: PrecheckContext): string[] {
  return precheckQuestions({ ...context, assistedOrMinor: false })
    .filter(({ isOptional }) => isOptional !== true)
    .filter(({ field }) => (field === 'ready' ? answers.ready !== true : answers[field] === undefined))
    .map(({ id }) => id);
}

function lockoutsOf(
  findings: readonly PrecheckFinding[],
  complete: boolean,
  context: PrecheckContext,
  answeredAt: string,
): PrecheckJudgement['lockouts'] {
  const first = (outcome: PrecheckOutcome) => findings.find((finding) => finding.outcome === outcome);
  const emergency = first('emergency');
  const lockouts: PrecheckJudgement['lockouts'][number][] = [];
  if (emergency !== undefined) lockouts.push({ level: 'safety', code: `precheck_${emergency.code}` });
  if (!complete) return lockouts;
  const toReview = first('hold_review');
  if (toReview !== undefined) lockouts.push({ level: 'review', code: `precheck_${toReview.code}` });
  const toWait = first('hold_tomorrow');
  if (toWait !== undefined) {
    const answered = parseInstant(answeredAt);
    const until = answered === undefined ? undefined : isoOf(holdUntilTomorrow(answered, context.zone));
    // A hold whose end cannot be told stays shut: clearance refuses on the missing fact.
    lockouts.push({ level: 'hold', code: `precheck_${toWait.code}`, ...(until === undefined ? {} : { until }) });
  }
  return lockouts;
}

/** `answeredAt` is the server's clock when the answers came, ISO UTC. */
export function judgePrecheck(
  answers: PrecheckAnswers,
  context: PrecheckContext,
  answeredAt: string,
): PrecheckJudgement {
  const findings = precheckFindings(answers, context);
  const open = openQuestions(answers, context);
  const complete = open.length === 0;
  const isEmergency = findings.some(({ outcome }) => outcome === 'emergency');
  return {
    complete,
    open,
    outcome: complete ? worstOf(findings) : null,
    findings,
    lockouts: lockoutsOf(findings, complete, context, answeredAt),
    emergencyAdvice: isEmergency,
    pageStaff: isEmergency,
    worklist: findings.some(
      ({ code, outcome }) => code === 'new_medicine' || outcome === 'hold_review' || outcome === 'emergency',
    ),
  };
}

/**
 * Outcome and findings of one answer alone, for showing at once. A value that is no answer to the question has none.
 * The worst of all answers decides; this only explains.
 */
export function consequenceOf(
  questionId: string,
  value: unknown,
  context: PrecheckContext,
): { readonly outcome: PrecheckOutcome; readonly findings: readonly PrecheckFinding[] } {
  const question = precheckQuestions({}).find(({ id }) => id === questionId);
  const answers = question && precheckAnswersSchema.safeParse({ [question.field]: value });
  const findings = answers?.success === true ? precheckFindings(answers.data, context) : [];
  return { outcome: worstOf(findings), findings };
}
