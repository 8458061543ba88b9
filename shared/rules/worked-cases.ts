// Worked cases in their published form: snake_case facts in, the rule's outcome out in the same form. Whoever wants
// to check the engine against cases of their own comes in here. Names what it does not know; decides nothing itself.

import { clearanceKind } from './worked-cases/clearance';
import { adherenceKind, deliveredKind, scaleKind, sessionKind } from './worked-cases/course';
import { doseKind } from './worked-cases/dose';
import type { WorkedAnswer, WorkedKind } from './worked-cases/form';
import { lockoutKind } from './worked-cases/lockout';
import {
  curveNumbers,
  deliveredNumbers,
  fractionNumbers,
  rollingNumbers,
  splitNumbers,
  tacsNumbers,
  tdcsNumbers,
  trnsNumbers,
} from './worked-cases/numbers';
import { permitKind } from './worked-cases/permit';
import { precheckKind } from './worked-cases/precheck';

export { mergePatch, type WorkedAnswer } from './worked-cases/form';

/** Kinds of `rules.json`, and `scale` for the cases of `scales.json`. */
const ruleKinds = new Map<string, WorkedKind>([
  ['dose', doseKind],
  ['clearance', clearanceKind],
  ['lockout', lockoutKind],
  ['permit', permitKind],
  ['delivered', deliveredKind],
  ['precheck', precheckKind],
  ['session', sessionKind],
  ['adherence', adherenceKind],
  ['scale', scaleKind],
]);

/** Kinds of `dose.json`. `delivered` stands in both files, here with a device's samples. */
const numberKinds = new Map<string, WorkedKind>([
  ['tdcs', tdcsNumbers],
  ['split', splitNumbers],
  ['split-refuse', splitNumbers],
  ['tacs', tacsNumbers],
  ['trns', trnsNumbers],
  ['delivered', deliveredNumbers],
  ['fraction', fractionNumbers],
  ['rolling', rollingNumbers],
  ['curve', curveNumbers],
]);

/** `given` after its patch over the baseline (`mergePatch`). */
export function answerRuleCase(kind: string, given: unknown, now?: string): WorkedAnswer {
  const answer = ruleKinds.get(kind);
  return answer === undefined ? { known: false, problems: [`kind: ${kind} is not known`] } : answer(given, now);
}

export function answerNumberCase(kind: string, input: unknown): WorkedAnswer {
  const answer = numberKinds.get(kind);
  return answer === undefined ? { known: false, problems: [`kind: ${kind} is not known`] } : answer(input, undefined);
}
