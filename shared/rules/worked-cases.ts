// Worked cases in their published form: snake_case facts in, the rule's outcome out in the same form. Whoever wants
// to check the engine against cases of their own comes in here. Names what it does not know; decides nothing itself.

import { clearanceKind } from './worked-cases/clearance';
import { adherenceKind, deliveredKind, scaleKind, sessionKind } from './worked-cases/course';
import { doseKind } from './worked-cases/dose';
import type { WorkedAnswer, WorkedKind } from './worked-cases/form';
import { hotpNumbers } from './worked-cases/hotp';
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

interface Kind {
  readonly answer: WorkedKind;
  /** Every field that its outcome may have. */
  readonly fields: readonly string[];
}
function kind(answer: WorkedKind, fields: string): Kind {
  return { answer, fields: fields.split(' ') };
}

const scaleScores = 'total band positive prorated missing self_harm effect algorithm error';
const scaleChanges = 'points percent important_by_points important_by_percent worse_bound_reached';
const tacsDensities = 'chargeDensityPerHalfCycle_C_m2 peakCurrentDensity_A_m2 rmsCurrentDensity_A_m2';

/** Kinds of `rules.json`, and `scale` for the cases of `scales.json`. */
const ruleKinds = new Map<string, Kind>([
  ['dose', kind(doseKind, 'verdict over computed')],
  ['clearance', kind(clearanceKind, 'allowed reasons')],
  ['lockout', kind(lockoutKind, 'effects page_staff emergency_advice device_action device_quarantined may_start')],
  ['permit', kind(permitKind, 'valid reasons facts permit_id new_permit expires_at expires_by state charge_C minutes')],
  ['delivered', kind(deliveredKind, 'charge_C fraction')],
  ['precheck', kind(precheckKind, 'complete open outcome findings lockouts emergency_advice page_staff worklist')],
  [
    'session',
    kind(sessionKind, 'state current_mA remaining_hold_s charge_C on_s pauses pause_s end_reason ended_at_s'),
  ],
  ['adherence', kind(adherenceKind, 'counts planned fraction interval missed_running flags')],
  ['scale', kind(scaleKind, `${scaleScores} ${scaleChanges}`)],
]);

const splitFields = 'sum_mA currentDensity_A_m2 largest share refused code';

/** Kinds of `dose.json`, and the published values of RFCs. `delivered` stands in both files, here with a device's samples. */
const numberKinds = new Map<string, Kind>([
  ['tdcs', kind(tdcsNumbers, 'charge_C chargeDensity_C_m2 currentDensity_A_m2 duration_s')],
  ['split', kind(splitNumbers, splitFields)],
  ['split-refuse', kind(splitNumbers, splitFields)],
  ['tacs', kind(tacsNumbers, `peakToPeak_mA rms_mA chargePerHalfCycle_C netCharge_C cyclesInHold ${tacsDensities}`)],
  [
    'trns',
    kind(
      trnsNumbers,
      'rms_mA peak_mA crestFactor meanAbs_mA_ifGaussian netCharge_C rmsCurrentDensity_A_m2 peakCurrentDensity_A_m2',
    ),
  ],
  ['delivered', kind(deliveredNumbers, 'conflict measured_C gap_s upper_C')],
  ['fraction', kind(fractionNumbers, 'fraction')],
  ['rolling', kind(rollingNumbers, 'last24h_C last7d_C')],
  ['curve', kind(curveNumbers, 'current_mA charge_C')],
  ['hotp', kind(hotpNumbers, 'code')],
]);

const kindsOf = { rules: ruleKinds, numbers: numberKinds } as const;

/** What a kind may answer with; empty for a kind that is not known. */
export function answerFieldsOf(form: keyof typeof kindsOf, name: string): readonly string[] {
  return kindsOf[form].get(name)?.fields ?? [];
}

function answerOf(form: keyof typeof kindsOf, name: string, given: unknown, now: string | undefined): WorkedAnswer {
  const found = kindsOf[form].get(name);
  if (found !== undefined) return found.answer(given, now);
  return { known: false, problems: [`kind: ${name} is not known`] };
}

/** `given` after its patch over the baseline (`mergePatch`). */
export function answerRuleCase(name: string, given: unknown, now?: string): WorkedAnswer {
  return answerOf('rules', name, given, now);
}

export function answerNumberCase(name: string, input: unknown): WorkedAnswer {
  return answerOf('numbers', name, input, undefined);
}

/** Every kind that is known, for the sentence that names an unknown one. */
export const kindNames = { rules: [...ruleKinds.keys()], numbers: [...numberKinds.keys()] } as const;
