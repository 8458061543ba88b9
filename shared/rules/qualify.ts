// Worked cases against the engine that the server decides with: passed, failed, or not understood. A case that holds anything
// unknown is an error that names it. Reads no file and prints nothing: the command and the server's page do that alike.

import { isAsExpected } from './qualify/compare';
import type { AskedCase, ReadCase } from './qualify/case-file';
import { answerFieldsOf, answerNumberCase, answerRuleCase, type WorkedAnswer } from './worked-cases';

export { readCaseFile, type CaseFile, type ReadCase } from './qualify/case-file';

export interface CaseResult {
  readonly id: string;
  readonly pass: boolean;
  readonly expected: unknown;
  readonly actual: unknown;
  /** What was not understood; a case with this was not judged and counts as failed. */
  readonly error?: readonly string[];
}

/** What a rule throws is an answer too: it could not be evaluated. */
function answerOf({ form, kind, given, now }: AskedCase): WorkedAnswer {
  try {
    return form === 'rules' ? answerRuleCase(kind, given, now) : answerNumberCase(kind, given);
  } catch (error) {
    return { known: false, problems: [`the rule failed: ${error instanceof Error ? error.message : String(error)}`] };
  }
}

export function runCase(read: ReadCase): CaseResult {
  const { id, expected } = read;
  if ('problems' in read) return { id, pass: false, expected, actual: null, error: read.problems };
  const { form, kind, passRule } = read;
  const answer = answerOf(read);
  if (!answer.known) return { id, pass: false, expected, actual: null, error: answer.problems };
  const known = answerFieldsOf(form, kind);
  const unknown = Object.keys(read.expected).filter((field) => !known.includes(field));
  if (unknown.length > 0) {
    const error = unknown.map((field) => `expected.${field}: not known; ${kind} answers with ${known.join(', ')}`);
    return { id, pass: false, expected, actual: answer.outcome, error };
  }
  return { id, pass: isAsExpected(answer.outcome, read.expected, passRule), expected, actual: answer.outcome };
}

export interface Tally {
  readonly passed: number;
  readonly failed: number;
}

export function tally(results: readonly CaseResult[]): Tally {
  const passed = results.filter(({ pass }) => pass).length;
  return { passed, failed: results.length - passed };
}
