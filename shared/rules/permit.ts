// The life of a permit: when it ends, whether a device may start on it, whether one may be issued, what it releases.

import type { PermitExpiryCause, PermitReasonCode } from '@/shared/values/codes';
import { minuteMilliseconds } from '@/shared/values/units';
import { isTime, isZone, isoOf } from '@/shared/values/zone';
import { openHoursAt } from './hours';
import { Known } from './known';

export type PermitFacts = {
  readonly id?: string;
  readonly deviceId?: string;
  readonly prescriptionVersion?: number;
  readonly counter?: number;
  readonly issuedAt?: string;
  readonly expiresAt?: string;
  /** Idempotency key it was asked with. */
  readonly key?: string;
  readonly isUsed?: boolean;
  readonly chargeCoulomb?: number;
  readonly minutes?: number;
};
export type PermitPresentFacts = {
  readonly prescriptionVersion?: number;
  readonly isPaused?: boolean;
  readonly isLocked?: boolean;
  readonly deviceLastCounter?: number;
  readonly precheckAnsweredAt?: string;
  readonly zone?: string;
  readonly hoursFrom?: string;
  readonly hoursTo?: string;
  readonly prescriptionExpiresAt?: string;
};
export type PermitExpiry =
  | { readonly known: true; readonly expiresAt: string; readonly expiresBy: PermitExpiryCause }
  | { readonly known: false; readonly facts: readonly string[] };
export type PermitAnswer = {
  readonly valid: boolean;
  readonly reasons: readonly PermitReasonCode[];
  /** With `unknown_fact`. */
  readonly facts: readonly string[];
};
export type IssueAnswer = PermitAnswer & {
  readonly isNewPermit: boolean;
  readonly permitId?: string;
  readonly expiresAt?: string;
  readonly expiresBy?: PermitExpiryCause;
};
export type ReleaseEvidence =
  | {
      readonly type: 'record';
      readonly isFinal?: boolean;
      readonly upperChargeCoulomb?: number;
      readonly minutes?: number;
    }
  | { readonly type: 'readout'; readonly showsUse?: boolean }
  | { readonly type: 'statement' };
export type Release = {
  readonly state: 'closed' | 'void' | 'reserved';
  readonly chargeCoulomb?: number;
  readonly minutes?: number;
};

/** A permit not used in this time is over (own choice). */
export const permitLifeMinutes = 30;
/** Longest time from the pre-check's answers to the end of a permit given on them (own choice). */
export const precheckToExpiryMinutes = 45;

type Expiry =
  | { readonly known: true; readonly end: number; readonly cause: PermitExpiryCause; readonly isOver: boolean }
  | { readonly known: false; readonly facts: readonly string[] };

function expiryOf(present: PermitPresentFacts | undefined, now: string): Expiry {
  const known = new Known();
  const instant = known.instant('now', now);
  const current = known.some('current', present);
  const answeredAt = known.instant('current.precheck_answered_at', current?.precheckAnsweredAt);
  const zone = known.text('current.zone', isZone(current?.zone ?? '') ? current?.zone : undefined);
  const hoursFrom = known.text('current.hours_from', isTime(current?.hoursFrom ?? '') ? current?.hoursFrom : undefined);
  const hoursTo = known.text('current.hours_to', isTime(current?.hoursTo ?? '') ? current?.hoursTo : undefined);
  const prescriptionEnd = known.instant('current.prescription_expires_at', current?.prescriptionExpiresAt);
  if (
    instant === undefined ||
    answeredAt === undefined ||
    zone === undefined ||
    hoursFrom === undefined ||
    hoursTo === undefined ||
    prescriptionEnd === undefined
  ) {
    return { known: false, facts: known.missing };
  }
  const ends: readonly (readonly [PermitExpiryCause, number])[] = [
    ['issue', instant + permitLifeMinutes * minuteMilliseconds],
    ['precheck', answeredAt + precheckToExpiryMinutes * minuteMilliseconds],
    ['hours', openHoursAt(instant, { hoursFrom, hoursTo, zone })?.closesAt ?? instant],
    ['prescription', prescriptionEnd],
  ];
  const [cause, end] = ends.reduce((earliest, each) => (each[1] < earliest[1] ? each : earliest));
  return { known: true, end, cause, isOver: end <= instant };
}

/**
 * The earliest of: 30 min after issue, 45 min after the pre-check's answers, the end of the present allowed hours, the
 * prescription's end. Of equals the first in this order is named. Outside the hours it ends at once.
 */
export function permitExpiry(present: PermitPresentFacts | undefined, now: string): PermitExpiry {
  const expiry = expiryOf(present, now);
  return expiry.known ? { known: true, expiresAt: isoOf(expiry.end), expiresBy: expiry.cause } : expiry;
}

function answer(reasons: readonly PermitReasonCode[], known: Known): PermitAnswer {
  const facts = known.missing;
  const all: readonly PermitReasonCode[] = facts.length > 0 ? [...reasons, 'unknown_fact'] : reasons;
  return { valid: all.length === 0, reasons: all, facts };
}

function overReasons(
  permit: PermitFacts | undefined,
  present: PermitPresentFacts | undefined,
  now: string,
  known: Known,
): PermitReasonCode[] {
  const instant = known.instant('now', now);
  const given = known.some('permit', permit);
  const current = known.some('current', present);
  const expiresAt = known.instant('permit.expires_at', given?.expiresAt);
  const issuedVersion = known.amount('permit.prescription_version', given?.prescriptionVersion);
  const version = known.amount('current.prescription_version', current?.prescriptionVersion);
  const isPaused = known.flag('current.paused', current?.isPaused);
  const isLocked = known.flag('current.lockout', current?.isLocked);
  const isChanged = issuedVersion !== undefined && version !== undefined && issuedVersion !== version;
  const reasons: PermitReasonCode[] = [];
  if (expiresAt !== undefined && instant !== undefined && expiresAt <= instant) reasons.push('permit_expired');
  if (isChanged || isPaused === true || isLocked === true) reasons.push('permit_revoked');
  if (given?.isUsed === true) reasons.push('permit_used');
  return reasons;
}

/** Whether a permit still holds, and if not, everything that ended it. */
export function permitState(
  permit: PermitFacts | undefined,
  present: PermitPresentFacts | undefined,
  now: string,
): PermitAnswer {
  const known = new Known();
  return answer(overReasons(permit, present, now, known), known);
}

/** A device asks to start: the permit must hold, be for this device, and its counter must be new to it. */
export function mayStartWithPermit(
  permit: PermitFacts | undefined,
  present: PermitPresentFacts | undefined,
  ask: { readonly deviceId?: string; readonly counter?: number },
  now: string,
): PermitAnswer {
  const known = new Known();
  const reasons = overReasons(permit, present, now, known);
  const device = known.text('permit.device', permit?.deviceId);
  const asking = known.text('ask.device', ask.deviceId);
  const counter = known.amount('permit.counter', permit?.counter);
  const asked = known.amount('ask.counter', ask.counter);
  const last = known.amount('current.device_last_counter', present?.deviceLastCounter);
  if (device !== undefined && asking !== undefined && device !== asking) reasons.push('wrong_device');
  // A counter that is not the permit's own belongs to another permit, and that one is not what is asked for.
  const isOther = asked !== undefined && counter !== undefined && asked !== counter;
  if (isOther || (asked !== undefined && last !== undefined && asked <= last)) reasons.push('counter_used');
  return answer(reasons, known);
}

/**
 * Somebody asks for a permit; clearance is taken as given. The same key always gets its own permit, over or not; a
 * retry never makes a second one. Another key is refused while a permit lives.
 */
export function mayIssue(
  permit: PermitFacts | undefined,
  present: PermitPresentFacts | undefined,
  key: string | undefined,
  now: string,
): IssueAnswer {
  const known = new Known();
  const asked = known.text('ask.key', key);
  const given = permit === undefined ? undefined : known.text('permit.key', permit.key);
  if (known.missing.length > 0) return { ...answer([], known), isNewPermit: false };
  if (permit !== undefined) {
    const state = permitState(permit, present, now);
    if (given === asked) return { ...state, isNewPermit: false, permitId: permit.id };
    if (state.facts.length > 0) return { ...state, isNewPermit: false };
    if (state.valid) return { valid: false, reasons: ['live_permit'], facts: [], isNewPermit: false };
  }
  const expiry = expiryOf(present, now);
  if (!expiry.known) return { valid: false, reasons: ['unknown_fact'], facts: expiry.facts, isNewPermit: false };
  const { cause, end, isOver } = expiry;
  if (isOver) {
    const over: PermitReasonCode = cause === 'hours' ? 'outside_hours' : 'permit_expired';
    return { valid: false, reasons: [over], facts: [], isNewPermit: false };
  }
  return { valid: true, reasons: [], facts: [], isNewPermit: true, expiresAt: isoOf(end), expiresBy: cause };
}

/**
 * What counts for a permit from now on. Only the device's own final record, or a read-out of the device that shows no
 * use, releases anything; a statement by anybody, or silence, leaves the whole dose reserved.
 */
export function releaseOf(permit: PermitFacts, evidence?: ReleaseEvidence): Release {
  const whole: Release = { state: 'reserved', chargeCoulomb: permit.chargeCoulomb, minutes: permit.minutes };
  if (evidence?.type === 'readout' && evidence.showsUse === false)
    return { state: 'void', chargeCoulomb: 0, minutes: 0 };
  if (evidence?.type !== 'record' || evidence.isFinal !== true) return whole;
  const { upperChargeCoulomb: charge, minutes } = evidence;
  const isKnown = (value: number | undefined) => value !== undefined && Number.isFinite(value) && value >= 0;
  // A final record without its sums says nothing about the dose.
  return isKnown(charge) && isKnown(minutes) ? { state: 'closed', chargeCoulomb: charge, minutes } : whole;
}
