// What the run page says and draws, from the stimulator's state: one sentence, one line under it, where the curve is filled, its notches.
// Codes and numbers only; the words are in `session:run`.

import type { DeviceSession } from '@/components/runtime/device/stimulator';
import { runCurve } from '@/shared/rules/session';
import { mostStopRampSeconds } from '@/shared/rules/session/run';
import { minutesOf } from '@/shared/values/units';

export type RunSentence =
  | { key: 'minutes' | 'seconds'; count: number }
  | { key: 'paused' | 'pausedContact' | 'fading' | 'stopping' | 'over' | 'overEarly' };

export interface RunPicture {
  sentence: RunSentence;
  line: 'rampUp' | 'hold' | 'rampDown' | 'fading' | 'paused' | 'pausedContact' | 'over';
  currentMilliamp: number;
  /** Of a pause: what is left before it ends the session. */
  pauseSecondsLeft: number | null;
  filledSeconds: number;
  notches: { atSeconds: number; lengthSeconds: number }[];
  pausedSeconds: number;
  totalMinutes: number;
  fadeSeconds: number;
  mayPause: boolean;
  mayGoOn: boolean;
  isOver: boolean;
  isStopping: boolean;
}

/** Where on the time with current it stood still, and for how long. */
export function notchesOf(session: DeviceSession): { atSeconds: number; lengthSeconds: number }[] {
  const points = runCurve(session.dose, session.events, session.seconds);
  const notches: { atSeconds: number; lengthSeconds: number }[] = [];
  let on = 0;
  for (const [place, point] of points.entries()) {
    const before = points[place - 1];
    if (!before) continue;
    const seconds = point.seconds - before.seconds;
    if (before.milliamp > 0 || point.milliamp > 0) on += seconds;
    else if (seconds > 0) notches.push({ atSeconds: on, lengthSeconds: seconds });
  }
  return notches;
}

function sentenceOf(session: DeviceSession): RunSentence {
  const { snapshot, stopWhy, endedWhy } = session;
  if (snapshot.state === 'ended') return { key: endedWhy === 'complete' ? 'over' : 'overEarly' };
  if (stopWhy !== null) return { key: 'stopping' };
  if (snapshot.pausedBy !== null) {
    if (snapshot.state !== 'paused') return { key: 'fading' };
    return { key: snapshot.pausedBy === 'contact' ? 'pausedContact' : 'paused' };
  }
  const left = snapshot.secondsLeft ?? 0;
  return left < 60 ? { key: 'seconds', count: Math.ceil(left) } : { key: 'minutes', count: Math.ceil(minutesOf(left)) };
}

function lineOf(session: DeviceSession): RunPicture['line'] {
  const { state, pausedBy } = session.snapshot;
  if (state === 'ended') return 'over';
  if (state === 'paused') return pausedBy === 'contact' ? 'pausedContact' : 'paused';
  if (state === 'ramp_up') return 'rampUp';
  if (state === 'hold') return 'hold';
  return pausedBy !== null || session.stopWhy !== null ? 'fading' : 'rampDown';
}

export function runPictureOf(session: DeviceSession): RunPicture {
  const { snapshot, dose, stopWhy } = session;
  const isOver = snapshot.state === 'ended';
  const isStopping = !isOver && stopWhy !== null;
  const notches = notchesOf(session);
  const isLastRamp = snapshot.state === 'ramp_down' && snapshot.pausedBy === null;
  return {
    sentence: sentenceOf(session),
    line: lineOf(session),
    currentMilliamp: snapshot.currentMilliamp,
    pauseSecondsLeft: snapshot.pauseSecondsLeft,
    filledSeconds: snapshot.onSeconds,
    notches,
    pausedSeconds: Math.round(snapshot.pauseSeconds),
    totalMinutes: minutesOf(dose.rampUpSeconds + dose.holdSeconds + dose.rampDownSeconds),
    fadeSeconds: Math.min(dose.rampDownSeconds, mostStopRampSeconds),
    mayPause: !isOver && !isStopping && !isLastRamp && snapshot.pausedBy !== 'person',
    mayGoOn: snapshot.state === 'paused' && snapshot.pausedBy === 'person',
    isOver,
    isStopping,
  };
}
