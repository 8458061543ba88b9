// The planned session that a start would be for. A prescription names days as well as hours: on a day that it does not name,
// no window is open, and that is told as being outside the hours until the next window opens.

import { reasonCodes } from '@/shared/values/codes';
import { parseInstant } from '@/shared/values/zone';
import type { ClearanceAnswer } from '../clearance';
import type { ClearanceFacts } from './facts';
import { reason, type Reason } from './reason';

export type PlannedFact = {
  readonly windowFrom: string;
  readonly windowTo: string;
  /** Null = still to be done. */
  readonly closedWhy: string | null;
};

/** The first one that can still be done, its window open now or later. */
export function nextPlanned<T extends PlannedFact>(planned: readonly T[], now: string): T | undefined {
  const instant = parseInstant(now) ?? Number.POSITIVE_INFINITY;
  return planned.find(({ closedWhy, windowTo }) => closedWhy === null && (parseInstant(windowTo) ?? instant) > instant);
}

/** The one whose window is open now. */
export function plannedNow<T extends PlannedFact>(planned: readonly T[], now: string): T | undefined {
  const next = nextPlanned(planned, now);
  const opensAt = parseInstant(next?.windowFrom);
  return opensAt !== undefined && opensAt <= (parseInstant(now) ?? Number.NEGATIVE_INFINITY) ? next : undefined;
}

function sorted(reasons: readonly Reason[]): ClearanceAnswer {
  const order = ({ code }: Reason) => reasonCodes.indexOf(code);
  const [first, ...rest] = [...reasons].sort((a, b) => order(a) - order(b));
  return first === undefined ? { allowed: true, reasons: [] } : { allowed: false, reasons: [first, ...rest] };
}

/** The answer with what the plan adds: outside every window, or nothing left to do. Never takes a reason away. */
export function withPlan(answer: ClearanceAnswer, planned: readonly PlannedFact[], now: string): ClearanceAnswer {
  if (plannedNow(planned, now) !== undefined) return answer;
  const { reasons } = answer;
  const next = nextPlanned(planned, now);
  if (next === undefined) {
    // Without a signed prescription there is no plan, and that is said already.
    const isSaid = reasons.some(({ code }) => code === 'course_complete' || code === 'prescription_unsigned');
    return isSaid ? answer : sorted([...reasons, reason('course_complete', { layer: 'prescription' })]);
  }
  const others = reasons.filter(({ code }) => code !== 'outside_hours');
  return sorted([...others, reason('outside_hours', { layer: 'prescription', until: next.windowFrom })]);
}

/** What the person takes out of the way in the course of starting: the pre-check with its helper, and the device at hand. */
export function isStartStep({ code, fact, resolvedBy }: Reason): boolean {
  switch (code) {
    case 'precheck_missing':
    case 'precheck_expired':
    case 'precheck_other_person':
    case 'helper_absent':
    case 'battery_low':
      return true;
    case 'precheck_hold':
      // Over by time: a fresh pre-check is all that is needed.
      return resolvedBy === 'participant';
    default:
      return isNotAskedYet({ code, fact });
  }
}

/** The battery is asked only when the device is at hand; until then it is not a reason but a step to come. */
export function isNotAskedYet({ code, fact }: Pick<Reason, 'code' | 'fact'>): boolean {
  return code === 'unknown_fact' && fact === 'device.battery_pct';
}

/** The device that the phone has found is the person's own, or it is as if there were none. */
export function withDeviceAtHand(facts: ClearanceFacts, isOwn: boolean): ClearanceFacts {
  return isOwn ? facts : { ...facts, device: { isAssigned: false } };
}
