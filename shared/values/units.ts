// Amounts in whole µA, µC and ms for the database, in mA, C, min and s for people, and the comparison that both
// sides use. No limits here: those are in shared/rules.

/** Limits are inclusive; a sum such as 1.2 + 1.2 + 1.2 must not exceed 3.6 by the last bit (own choice, 1e-9). */
export const relativeTolerance = 1e-9;

function slack(limit: number): number {
  return Math.abs(limit) * relativeTolerance;
}

/** value ≤ limit, up to the tolerance. NaN is never at most anything. */
export function atMost(value: number, limit: number): boolean {
  return value <= limit + slack(limit);
}

/** value ≥ limit, up to the tolerance. */
export function atLeast(value: number, limit: number): boolean {
  return value >= limit - slack(limit);
}

/** value > limit by more than the tolerance. */
export function isAbove(value: number, limit: number): boolean {
  return value > limit + slack(limit);
}

/** value < limit by more than the tolerance. */
export function isBelow(value: number, limit: number): boolean {
  return value < limit - slack(limit);
}

/** Whole parts, rounded up (what counts is never understated), but 2.46 C is 2460000 µC and not 2460001. */
function wholeUp(value: number, factor: number): number {
  const scaled = value * factor;
  const nearest = Math.round(scaled);
  return Math.abs(scaled - nearest) <= Math.max(1, Math.abs(scaled)) * relativeTolerance ? nearest : Math.ceil(scaled);
}

export function microampOf(milliamp: number): number {
  return wholeUp(milliamp, 1000);
}
export function milliampOf(microamp: number): number {
  return microamp / 1000;
}
export function microcoulombOf(coulomb: number): number {
  return wholeUp(coulomb, 1_000_000);
}
export function coulombOf(microcoulomb: number): number {
  return microcoulomb / 1_000_000;
}
export function millisecondsOf(seconds: number): number {
  return wholeUp(seconds, 1000);
}
export function secondsOf(milliseconds: number): number {
  return milliseconds / 1000;
}
export function minutesOf(seconds: number): number {
  return seconds / 60;
}

/** mA/cm² in A/m²: 1 mA/cm² = 10 A/m². */
export function ampPerSquareMetreOf(milliampPerSquareCentimetre: number): number {
  return milliampPerSquareCentimetre * 10;
}

export const hourMilliseconds = 3_600_000;
export const dayMilliseconds = 24 * hourMilliseconds;
export const minuteMilliseconds = 60_000;
