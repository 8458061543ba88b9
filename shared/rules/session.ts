// The run of one session as planned: ramp up, hold, ramp down, pauses. The phone runs it, the server checks by it.
// Planned current counts here; what was truly delivered comes from samples (delivered.ts).

import type { EndReason, SessionEventWord, SessionState } from '@/shared/values/codes';
import type { TrapezoidFacts } from './dose';

/** Seconds since the start of the ramp up on one monotonic clock, and the word. */
export type SessionEventFact = readonly [seconds: number, word: SessionEventWord];
export type CurvePoint = { readonly seconds: number; readonly milliamp: number };
export type SessionSnapshot = {
  readonly state: SessionState;
  readonly currentMilliamp: number;
  /** Hold still to come; 0 once the last ramp down has begun. */
  readonly remainingHoldSeconds: number;
  readonly chargeCoulomb: number;
  readonly onSeconds: number;
  readonly pauses: number;
  readonly pauseSeconds: number;
  readonly endReason: EndReason | null;
  readonly endedAtSeconds: number | null;
  /** Time until the end if nothing more happens: rest of ramp, hold and last ramp; null while paused. */
  readonly secondsLeft: number | null;
  /** Of a pause: who must end it. */
  readonly pausedBy: 'contact' | 'person' | null;
  /** Of a pause: time until it ends the session. */
  readonly pauseSecondsLeft: number | null;
};

export declare function sessionStateAt(
  permit: TrapezoidFacts,
  events: readonly SessionEventFact[],
  tSeconds: number,
): SessionSnapshot;
export declare function currentAt(
  permit: TrapezoidFacts,
  events: readonly SessionEventFact[],
  tSeconds: number,
): number;
/** The corner points of the trapezoid as prescribed. */
export declare function plannedCurve(permit: TrapezoidFacts): CurvePoint[];
/** Current and charge so far of the trapezoid as prescribed. */
export declare function plannedAt(
  permit: TrapezoidFacts,
  tSeconds: number,
): { currentMilliamp: number; chargeCoulomb: number };
/** The corner points of what the events made of it up to `tSeconds`: for drawing the notch of a pause. */
export declare function runCurve(
  permit: TrapezoidFacts,
  events: readonly SessionEventFact[],
  tSeconds: number,
): CurvePoint[];
