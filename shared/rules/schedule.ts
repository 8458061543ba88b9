// The planned windows of a course, and what a window becomes when it closes undone.

import type { HoldFacts } from './adherence';

export type ScheduleFacts = {
  /** First local day, `2026-05-12`. */
  readonly startsOn: string;
  /** 1 = Monday … 7 = Sunday. */
  readonly days: readonly number[];
  readonly hoursFrom: string;
  readonly hoursTo: string;
  readonly zone: string;
  readonly sessionsTotal: number;
  /** No window opens at or after it. */
  readonly expiresAt?: string;
};
export type PlannedWindow = { readonly number: number; readonly windowFrom: string; readonly windowTo: string };

export declare function plannedWindows(schedule: ScheduleFacts): PlannedWindow[];
export declare function windowClosed(window: { readonly windowTo: string }, now: string): boolean;
export declare function missedOrExcused(
  window: { readonly windowFrom: string; readonly windowTo: string },
  holds: readonly HoldFacts[],
): 'missed' | 'excused';
