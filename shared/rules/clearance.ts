// "May a session start now?" Pure: facts and the server's clock in, every reason out, in a fixed order. The server
// decides with it inside the transaction that acts; a client may call it only to explain.

import { reasonCodes, type ReasonCode } from '@/shared/values/codes';
import { localDate, parseInstant } from '@/shared/values/zone';
import { allKnown, contextOf, type ClearanceContext } from './clearance/context';
import { charge24hReasons, charge7dReasons, minutesReasons } from './clearance/dose';
import { clockReasons, deviceReasons, permitReasons, sessionReasons, supplyReasons } from './clearance/equipment';
import type { ClearanceFacts } from './clearance/facts';
import {
  accountReasons,
  consentReasons,
  moodCheckReasons,
  screeningReasons,
  supervisionReasons,
  trainingReasons,
} from './clearance/person';
import { precheckReasons } from './clearance/precheck';
import { courseReasons, lockoutReasons, prescriptionReasons } from './clearance/prescription';
import { reason, type Reason } from './clearance/reason';
import { dayCountReasons, gapReasons, hoursReasons, recallReasons, weekCountReasons } from './clearance/time';
import { Known } from './known';
import { dayWindow, rollingSum, weekWindow } from './rolling';

export type { ClearanceFacts } from './clearance/facts';
export type { Reason } from './clearance/reason';

export type ClearanceAnswer =
  | { readonly allowed: true; readonly reasons: readonly [] }
  | { readonly allowed: false; readonly reasons: readonly Reason[] };

const families: readonly ((context: ClearanceContext) => Reason[])[] = [
  accountReasons,
  consentReasons,
  screeningReasons,
  trainingReasons,
  supervisionReasons,
  moodCheckReasons,
  prescriptionReasons,
  lockoutReasons,
  hoursReasons,
  gapReasons,
  dayCountReasons,
  minutesReasons,
  weekCountReasons,
  charge24hReasons,
  charge7dReasons,
  courseReasons,
  sessionReasons,
  recallReasons,
  deviceReasons,
  supplyReasons,
  precheckReasons,
  permitReasons,
  clockReasons,
];

/** Allowed, or every reason why not, ordered as `reasonCodes`. `now` is the server's clock, ISO UTC. */
export function clearance(facts: ClearanceFacts, now: string): ClearanceAnswer {
  const known = new Known();
  const instant = parseInstant(now);
  if (instant === undefined) return { allowed: false, reasons: [reason('unknown_fact', { fact: 'now' })] };
  const context = contextOf(facts, known, instant);
  const found = families.flatMap((family) => family(context));
  const missing = known.missing.map((fact) => reason('unknown_fact', { fact }));
  const order = (code: ReasonCode) => reasonCodes.indexOf(code);
  const reasons = [...found, ...missing].sort((a, b) => order(a.code) - order(b.code));
  return reasons.length === 0 ? { allowed: true, reasons: [] } : { allowed: false, reasons };
}

/** The latest `until` of the reasons, ISO UTC; null if none has one. Ask again then: more may have come up. */
export function earliestStart(reasons: readonly Reason[]): string | null {
  return reasons.reduce<string | null>(
    (latest, { until }) =>
      until !== undefined && (parseInstant(until) ?? 0) > (parseInstant(latest) ?? 0) ? until : latest,
    null,
  );
}

/** Codes that the person takes out of the way in the course of starting: the pre-check of this very session. */
export const startStepCodes: readonly ReasonCode[] = ['precheck_missing', 'precheck_expired', 'precheck_other_person'];

/** True when time alone and a fresh pre-check clear all of them. */
export function passesByTime(reasons: readonly Reason[]): boolean {
  return reasons.every(({ code, until }) => until !== undefined || startStepCodes.includes(code));
}

export type PlannedCounts = {
  readonly sessionsToday?: number;
  readonly sessionsLast7Days?: number;
  readonly sessionsDone?: number;
  readonly sessionsTotal?: number;
  readonly charge24hCoulomb?: number;
  readonly charge7dCoulomb?: number;
  readonly minutes24h?: number;
};

/** What counts so far, reserved and running doses whole: for showing beside the limits. Unknown stays undefined. */
export function plannedCounts(facts: ClearanceFacts, now: string): PlannedCounts {
  const instant = parseInstant(now);
  if (instant === undefined) return {};
  const { sessions, zone, today } = contextOf(facts, new Known(), instant);
  const started = zone === undefined ? undefined : allKnown(sessions, 'startedAt');
  const charges = allKnown(sessions, 'endedAt', 'chargeCoulomb');
  const charge = charges?.map(({ endedAt, chargeCoulomb }) => ({ endedAt, amount: chargeCoulomb }));
  const minutes = allKnown(sessions, 'endedAt', 'minutes')?.map((each) => ({
    endedAt: each.endedAt,
    amount: each.minutes,
  }));
  const ended = allKnown(sessions, 'endedAt')?.map(({ endedAt }) => ({ endedAt, amount: 1 }));
  return {
    sessionsToday:
      zone === undefined ? undefined : started?.filter((each) => localDate(each.startedAt, zone) === today).length,
    sessionsLast7Days: ended && rollingSum(ended, instant, weekWindow),
    sessionsDone: facts.prescription?.sessionsDone,
    sessionsTotal: facts.prescription?.sessionsTotal,
    charge24hCoulomb: charge && rollingSum(charge, instant, dayWindow),
    charge7dCoulomb: charge && rollingSum(charge, instant, weekWindow),
    minutes24h: minutes && rollingSum(minutes, instant, dayWindow),
  };
}
