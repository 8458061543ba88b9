// What was truly delivered, integrated from the device's samples. The client never tells it.

import type { Completeness } from '@/shared/values/codes';
import { atLeast, isAbove } from '@/shared/values/units';

/** Seconds on the device's clock, mA (envelope for AC; null = no value), number (absent: the time is the number). */
export type Sample = readonly [seconds: number, milliamp: number | null, sequence?: number];
export type DeliveredPlan = {
  readonly intensityMilliamp: number;
  readonly chargeCoulomb?: number;
  /** With it a late first sample is a gap. */
  readonly startSeconds?: number;
  /** With `isFinal: false` the time from the last sample to here is a gap. */
  readonly plannedEndSeconds?: number;
  readonly isFinal?: boolean;
  /** Longest step between samples that is still joined, 2 s if absent; null = no gap rule (corner points). */
  readonly maxGapSeconds?: number | null;
};
export type SampleGap = { readonly fromSeconds: number; readonly toSeconds: number };
export type Delivered = {
  /** Measured; null = no sample with a value: unknown, never 0. */
  readonly chargeCoulomb: number | null;
  /** With every gap at the planned current. Limits use this one. */
  readonly upperChargeCoulomb: number | null;
  readonly onSeconds: number | null;
  readonly upperOnSeconds: number | null;
  readonly gapSeconds: number | null;
  /** Measured over planned charge; null if either is unknown or nothing was planned. */
  readonly fraction: number | null;
  readonly gaps: readonly SampleGap[];
  /** Numbers of samples that came twice with different content. */
  readonly conflicts: readonly number[];
};

/** Device streams come at 1 Hz or faster; a longer step is a gap (own choice). */
export const longestStepSeconds = 2;
/** Below this a current counts as off: noise of a device at rest (own choice). */
const onMilliamp = 0.01;

type Point = { readonly seconds: number; readonly milliamp: number; readonly sequence: number };

/** Of one number that came with two contents the larger magnitude counts, of equals the earlier time. */
function larger(a: Point, b: Point): Point {
  const difference = Math.abs(b.milliamp) - Math.abs(a.milliamp);
  if (difference !== 0) return difference > 0 ? b : a;
  return b.seconds < a.seconds ? b : a;
}

/** Samples with a value, one a number, by time: the same whatever the order of arrival. */
function orderedSamples(samples: readonly Sample[]): { points: Point[]; conflicts: number[] } {
  const kept = new Map<number, Point>();
  const conflicts = new Set<number>();
  for (const [seconds, milliamp, sequence = seconds] of samples) {
    if (milliamp === null || !Number.isFinite(milliamp) || !Number.isFinite(seconds)) continue;
    const point = { seconds, milliamp, sequence };
    const known = kept.get(sequence);
    if (known !== undefined && (known.seconds !== seconds || known.milliamp !== milliamp)) conflicts.add(sequence);
    kept.set(sequence, known === undefined ? point : larger(known, point));
  }
  const points = [...kept.values()].sort((a, b) => a.seconds - b.seconds || a.sequence - b.sequence);
  return { points, conflicts: [...conflicts].sort((a, b) => a - b) };
}

/** The time before the first sample and after the last one that nothing covers. */
function endGaps(points: readonly Point[], plan: DeliveredPlan, longestStep: number): SampleGap[] {
  const first = points[0];
  const last = points.at(-1);
  if (first === undefined || last === undefined) return [];
  const gaps: SampleGap[] = [];
  const { startSeconds: start, plannedEndSeconds: end } = plan;
  if (start !== undefined && isAbove(first.seconds - start, longestStep)) {
    gaps.push({ fromSeconds: start, toSeconds: first.seconds });
  }
  // Without a final record the device may have gone on to the planned end, however short the rest.
  if (plan.isFinal === false && end !== undefined && end > last.seconds) {
    gaps.push({ fromSeconds: last.seconds, toSeconds: end });
  }
  return gaps;
}

const nothingKnown: Delivered = {
  chargeCoulomb: null,
  upperChargeCoulomb: null,
  onSeconds: null,
  upperOnSeconds: null,
  gapSeconds: null,
  fraction: null,
  gaps: [],
  conflicts: [],
};

/**
 * Measured charge by the trapezoid rule over magnitudes, and the upper figure with each gap, at the head, inside and
 * at the tail, at the planned current. One sample has no duration; no sample with a value is unknown, never 0.
 */
export function deliveredFrom(samples: readonly Sample[], plan: DeliveredPlan): Delivered {
  const { points, conflicts } = orderedSamples(samples);
  if (points.length === 0) return nothingKnown;
  const longestStep =
    plan.maxGapSeconds === null ? Number.POSITIVE_INFINITY : (plan.maxGapSeconds ?? longestStepSeconds);
  const gaps = endGaps(points, plan, longestStep);
  let charge = 0;
  let onSeconds = 0;
  for (const [index, point] of points.entries()) {
    const before = points[index - 1];
    if (before === undefined) continue;
    const step = point.seconds - before.seconds;
    if (isAbove(step, longestStep)) {
      gaps.push({ fromSeconds: before.seconds, toSeconds: point.seconds });
      continue;
    }
    const [from, to] = [Math.abs(before.milliamp), Math.abs(point.milliamp)];
    charge += ((from + to) / 2) * step;
    if (from >= onMilliamp || to >= onMilliamp) onSeconds += step;
  }
  gaps.sort((a, b) => a.fromSeconds - b.fromSeconds);
  const gapSeconds = gaps.reduce((sum, { fromSeconds, toSeconds }) => sum + toSeconds - fromSeconds, 0);
  const chargeCoulomb = charge / 1000;
  return {
    chargeCoulomb,
    upperChargeCoulomb: chargeCoulomb + (gapSeconds * Math.abs(plan.intensityMilliamp)) / 1000,
    onSeconds,
    upperOnSeconds: onSeconds + gapSeconds,
    gapSeconds,
    fraction: fractionOf(chargeCoulomb, plan.chargeCoulomb),
    gaps,
    conflicts,
  };
}

/** Delivered over planned; null if either is unknown or nothing was planned. */
export function fractionOf(delivered: number | null, planned: number | undefined): number | null {
  return delivered === null || planned === undefined || !(planned > 0) ? null : delivered / planned;
}

/** Own choices; a protocol may set others. `leastSeconds`: less is not delivered, whatever part it was. */
export const completenessBounds = { complete: 0.9, partial: 0.1, leastSeconds: 120 } as const;

/** By charge; for alternating current the caller gives the fraction of hold time. null = not known. */
export function completenessOf(
  delivered: { readonly fraction: number | null; readonly onSeconds: number | null },
  bounds: { readonly complete: number; readonly partial: number; readonly leastSeconds: number } = completenessBounds,
): Completeness | null {
  const { fraction, onSeconds } = delivered;
  if (fraction === null || onSeconds === null) return null;
  if (atLeast(fraction, bounds.complete)) return 'complete';
  return atLeast(fraction, bounds.partial) && atLeast(onSeconds, bounds.leastSeconds) ? 'partial' : 'not_delivered';
}

/** Above the permit by more than this, for at least this long (own choices). */
const overMilliamp = 0.1;
const overSeconds = 1;

/**
 * The first run of neighbouring samples that are all above the permit by more than 0.1 mA, from first to last at
 * least 1 s. A gap between two such samples does not break the run; one lone sample is none.
 */
export function overCurrent(
  samples: readonly Sample[],
  permittedMilliamp: number,
): { readonly fromSeconds: number; readonly toSeconds: number; readonly largestMilliamp: number } | null {
  let from: Point | undefined;
  let largestMilliamp = 0;
  let found: { fromSeconds: number; toSeconds: number; largestMilliamp: number } | null = null;
  for (const point of orderedSamples(samples).points) {
    const current = Math.abs(point.milliamp);
    if (!isAbove(current, permittedMilliamp + overMilliamp)) {
      if (found !== null) return found;
      from = undefined;
      largestMilliamp = 0;
      continue;
    }
    from ??= point;
    largestMilliamp = Math.max(largestMilliamp, current);
    if (atLeast(point.seconds - from.seconds, overSeconds)) {
      found = { fromSeconds: from.seconds, toSeconds: point.seconds, largestMilliamp };
    }
  }
  return found;
}
