// The run of one session as planned: ramp up, hold, ramp down, pauses. The phone runs it, the server checks by it.
// Planned current counts here; what was truly delivered comes from samples (delivered.ts). mA, C and s.

import type { EndReason, SessionEventWord, SessionState } from '@/shared/values/codes';
import { chargeOf } from './dose/arithmetic';
import type { TrapezoidFacts } from './dose/facts';
import { mostPauseSeconds, runUntil, type Run } from './session/run';

export type { SessionEventWord } from '@/shared/values/codes';
export { contactGraceSeconds, mostPauses, mostPauseSeconds, mostStopRampSeconds } from './session/run';

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

function stateOf(run: Run): SessionState {
  const { phase } = run;
  return phase === 'last_down' || phase === 'pause_down' || phase === 'end_down' ? 'ramp_down' : phase;
}

function holdToCome(run: Run, seconds: number): number {
  if (run.phase === 'hold') return run.restAt(seconds);
  const isPausing = run.phase === 'pause_down' || run.phase === 'paused';
  const isOver = isPausing && (run.isStopping || run.isPauseOver(seconds));
  return (run.phase === 'ramp_up' || isPausing) && !isOver ? run.holdLeft : 0;
}

function secondsLeft(run: Run, seconds: number): number | null {
  if (run.phase === 'ended') return 0;
  if (run.phase === 'paused' || (run.phase === 'pause_down' && !run.isStopping)) return null;
  const rest = run.restAt(seconds);
  if (run.phase === 'ramp_up') return rest + run.holdLeft + run.down;
  return run.phase === 'hold' ? rest + run.down : rest;
}

/**
 * The session at an instant, from its events up to it: any order, repeats counted once, words after the end without
 * effect. Neither the charge nor the on-time of the permit is ever exceeded.
 */
export function sessionStateAt(
  permit: TrapezoidFacts,
  events: readonly SessionEventFact[],
  tSeconds: number,
): SessionSnapshot {
  const seconds = tSeconds > 0 ? tSeconds : 0;
  const run = runUntil(permit, events, seconds);
  const isPausing = run.phase === 'paused' || (run.phase === 'pause_down' && !run.isStopping);
  const pauseSeconds = run.pauseSecondsAt(seconds);
  return {
    state: stateOf(run),
    currentMilliamp: run.currentAt(seconds),
    remainingHoldSeconds: holdToCome(run, seconds),
    chargeCoulomb: run.chargeMilliampSeconds / 1000,
    onSeconds: run.onSeconds,
    pauses: run.pauses,
    pauseSeconds,
    endReason: run.endReason,
    endedAtSeconds: run.endedAt,
    secondsLeft: secondsLeft(run, seconds),
    pausedBy: isPausing ? run.cause : null,
    pauseSecondsLeft: isPausing ? mostPauseSeconds - pauseSeconds : null,
  };
}

/** Planned current at an instant, in mA. */
export function currentAt(permit: TrapezoidFacts, events: readonly SessionEventFact[], tSeconds: number): number {
  return sessionStateAt(permit, events, tSeconds).currentMilliamp;
}

/** The corner points of the trapezoid as prescribed. */
export function plannedCurve(permit: TrapezoidFacts): CurvePoint[] {
  const { intensityMilliamp, rampUpSeconds, holdSeconds, rampDownSeconds } = permit;
  const holdEnd = rampUpSeconds + holdSeconds;
  return [
    { seconds: 0, milliamp: 0 },
    { seconds: rampUpSeconds, milliamp: intensityMilliamp },
    { seconds: holdEnd, milliamp: intensityMilliamp },
    { seconds: holdEnd + rampDownSeconds, milliamp: 0 },
  ];
}

/** Current and charge so far of the trapezoid as prescribed; ramps of no length are arithmetic only. */
export function plannedAt(
  permit: TrapezoidFacts,
  tSeconds: number,
): { readonly currentMilliamp: number; readonly chargeCoulomb: number } {
  const { intensityMilliamp: intensity, rampUpSeconds: up, holdSeconds: hold, rampDownSeconds: down } = permit;
  const total = up + hold + down;
  if (!(tSeconds >= 0)) return { currentMilliamp: 0, chargeCoulomb: 0 };
  if (tSeconds > total) return { currentMilliamp: 0, chargeCoulomb: chargeOf(permit) };
  if (tSeconds < up) {
    return {
      currentMilliamp: (intensity * tSeconds) / up,
      chargeCoulomb: (intensity * tSeconds ** 2) / (2 * up) / 1000,
    };
  }
  if (tSeconds <= up + hold) {
    return { currentMilliamp: intensity, chargeCoulomb: (intensity * (tSeconds - up / 2)) / 1000 };
  }
  const rest = total - tSeconds;
  return {
    currentMilliamp: (intensity * rest) / down,
    chargeCoulomb: chargeOf(permit) - (intensity * rest ** 2) / (2 * down) / 1000,
  };
}

/** The corner points of what the events made of it up to `tSeconds`: for drawing the notch of a pause. */
export function runCurve(permit: TrapezoidFacts, events: readonly SessionEventFact[], tSeconds: number): CurvePoint[] {
  const { pieces } = runUntil(permit, events, tSeconds > 0 ? tSeconds : 0);
  const points: CurvePoint[] = [];
  const add = (seconds: number, milliamp: number) => {
    const last = points.at(-1);
    if (last === undefined || last.seconds !== seconds || last.milliamp !== milliamp)
      points.push({ seconds, milliamp });
  };
  for (const { from, to, start, end } of pieces) {
    add(from, start);
    add(to, end);
  }
  return points;
}
