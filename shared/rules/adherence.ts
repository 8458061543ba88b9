// How much of what was planned was done, with its denominator, and the flags that sort the worklist.

import type { AdherenceFlag, PlannedSessionState } from '@/shared/values/codes';

export type PlannedSessionFacts = {
  readonly windowFrom: string;
  readonly windowTo: string;
  readonly state: PlannedSessionState;
  readonly endedAt?: string;
};
/** No `until`: still open. */
export type HoldFacts = { readonly from: string; readonly until?: string };
export type AdherenceFacts = {
  /** Old to new. */
  readonly sessions: readonly PlannedSessionFacts[];
  readonly holds: readonly HoldFacts[];
  readonly recallCallAt?: string;
};
export type AdherenceAnswer = {
  readonly counts: Readonly<Record<PlannedSessionState, number>>;
  readonly planned: number;
  readonly fraction: number | null;
  readonly interval: { readonly low: number; readonly high: number } | null;
  readonly missedRunning: number;
  readonly flags: readonly AdherenceFlag[];
};

export declare function adherence(facts: AdherenceFacts, now: string): AdherenceAnswer;
