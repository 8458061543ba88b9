// What was truly delivered, integrated from the device's samples. The client never tells it.

import type { Completeness } from '@/shared/values/codes';

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

export declare function deliveredFrom(samples: readonly Sample[], plan: DeliveredPlan): Delivered;
export declare function completenessOf(
  delivered: { readonly fraction: number | null; readonly onSeconds: number | null },
  bounds?: { readonly complete: number; readonly partial: number; readonly leastSeconds: number },
): Completeness | null;
export declare function overCurrent(
  samples: readonly Sample[],
  permittedMilliamp: number,
): { readonly fromSeconds: number; readonly toSeconds: number; readonly largestMilliamp: number } | null;
