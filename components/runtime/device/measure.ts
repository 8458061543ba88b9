// One session, tenth by tenth of a second, as the simulated stimulator lives it: contact, current, its own watch over both, the record. The
// same steps fill in the time while no page was open, so nothing differs then. The states come from shared/rules/session.ts.

import { deliveredFrom, overCurrent, type Sample } from '@/shared/rules/delivered';
import { sessionStateAt, type SessionSnapshot } from '@/shared/rules/session';
import { chanceAt } from './chance';
import { gradeOf, kiloohmAt, type PlacedPad } from './contact-model';
import type { KeptSession } from './device-state';
import type { DeviceEntry, DeviceWord, EndedWhy, StopWhy } from './stimulator';

type EntryBody = DeviceEntry extends infer Entry
  ? Entry extends DeviceEntry
    ? Omit<Entry, 'index' | 'atSeconds'>
    : never
  : never;

/** What was newly written of a session, to be kept. */
export interface Written {
  entries: DeviceEntry[];
  samples: Sample[];
}
export interface Surroundings {
  pads: readonly PlacedPad[];
  /** Everything measured so far, for the sum at the end. */
  samples: readonly Sample[];
  /** mA that the output adds by a fault; 0 in a sound stimulator. */
  faultMilliamp(seconds: number): number;
}

/** The regulator comes to its aim from below and stays within 0.4 % of it. Own choice. */
const regulatorShare = 0.004;
/** Contact goes on record at each change, and this often anyway. Own choice. */
const contactEverySeconds = 60;
const tenthsASecond = 10;
/** Samples looked back at for an over-current, which needs 1 s. */
const watchedSamples = 5;

const endedWhyOfStop: Readonly<Record<StopWhy, EndedWhy>> = {
  button: 'stopped',
  red_flag: 'red_flag',
  pain_high: 'pain_high',
  permit_void: 'permit_void',
  over_current: 'over_current',
  clock_implausible: 'device_fault',
};

export function stateOf(session: KeptSession, seconds: number): SessionSnapshot {
  return sessionStateAt(session.dose, session.events, seconds);
}

function rounded(seconds: number): number {
  return Math.round(seconds * 1000) / 1000;
}

function addEntry(session: KeptSession, written: Written, seconds: number, body: EntryBody): void {
  written.entries.push({ ...body, index: session.entryCount, atSeconds: rounded(seconds) });
  session.entryCount += 1;
}

function addSample(session: KeptSession, written: Written, seconds: number, milliamp: number): void {
  const at = rounded(seconds);
  // Two samples of one moment would contradict each other.
  if (at <= session.lastSampleSeconds) return;
  written.samples.push([at, milliamp, session.sampleCount]);
  session.lastSampleSeconds = at;
  session.sampleCount += 1;
}

function measuredMilliamp(session: KeptSession, around: Surroundings, seconds: number): number {
  const uptime = session.startedAtUptime + seconds;
  // Nothing flows through an open circuit, whatever the plan is.
  if (around.pads.some((pad) => kiloohmAt(pad, uptime) === null)) return 0;
  const aim = stateOf(session, seconds).currentMilliamp;
  const below = aim * (1 - regulatorShare * chanceAt(session.seed, Math.floor(seconds)));
  return Math.floor((below + around.faultMilliamp(seconds)) * 1000) / 1000;
}

/** Writes what happened, and one sample of that moment, so that the corner of a ramp is not cut. */
export function happen(
  session: KeptSession,
  around: Surroundings,
  written: Written,
  seconds: number,
  word: DeviceWord,
): void {
  session.events.push([rounded(seconds), word]);
  if (word !== 'stop') addEntry(session, written, seconds, { kind: word });
  addSample(session, written, seconds, measuredMilliamp(session, around, seconds));
}

export function stopAt(
  session: KeptSession,
  around: Surroundings,
  written: Written,
  seconds: number,
  why: StopWhy,
): void {
  if (session.endedWhy !== null || session.stopWhy !== null) return;
  session.stopWhy = why;
  addEntry(session, written, seconds, { kind: 'stop', why });
  happen(session, around, written, seconds, 'stop');
}

function watchContact(session: KeptSession, around: Surroundings, written: Written, now: number): void {
  const uptime = session.startedAtUptime + now;
  const readings = around.pads.map((pad) => ({ position: pad.position, kiloohm: kiloohmAt(pad, uptime) }));
  for (const { position, kiloohm } of readings) {
    const grade = gradeOf(kiloohm);
    if (session.grades[position] === grade && (now === 0 || now % contactEverySeconds !== 0)) continue;
    session.grades[position] = grade;
    addEntry(session, written, now, { kind: 'contact', position, kiloohm, grade });
  }
  const grades = readings.map(({ kiloohm }) => gradeOf(kiloohm));
  if (!session.isContactLost && grades.includes('none')) {
    session.isContactLost = true;
    happen(session, around, written, now, 'contact_lost');
  } else if (session.isContactLost && grades.every((grade) => grade === 'good')) {
    session.isContactLost = false;
    happen(session, around, written, now, 'contact_back');
  }
}

function endIfOver(session: KeptSession, around: Surroundings, written: Written, at: number): boolean {
  const now = stateOf(session, at);
  if (now.state !== 'ended' || now.endReason === null) return false;
  const endedAt = now.endedAtSeconds ?? at;
  addSample(session, written, Math.max(endedAt, session.lastSampleSeconds), 0);
  session.endedAtSeconds = endedAt;
  session.endedWhy = now.endReason === 'stopped' && session.stopWhy ? endedWhyOfStop[session.stopWhy] : now.endReason;
  const counted = deliveredFrom([...around.samples, ...written.samples], {
    intensityMilliamp: session.dose.intensityMilliamp,
    isFinal: true,
  });
  addEntry(session, written, endedAt, {
    kind: 'ended',
    reason: session.endedWhy,
    onSeconds: counted.onSeconds ?? now.onSeconds,
    chargeCoulomb: counted.chargeCoulomb ?? 0,
  });
  return true;
}

/**
 * Lives through every tenth of a second up to `seconds`, or to the session's end: contact is looked at each time, so that the 3 s of a lost one
 * are kept to the tenth; current is measured on the whole seconds.
 */
export function measureUpTo(session: KeptSession, around: Surroundings, written: Written, seconds: number): void {
  while (session.endedWhy === null && (session.measuredTenth + 1) / tenthsASecond <= seconds) {
    session.measuredTenth += 1;
    const now = session.measuredTenth / tenthsASecond;
    if (endIfOver(session, around, written, now)) return;
    watchContact(session, around, written, now);
    if (session.measuredTenth % tenthsASecond === 0) watchCurrent(session, around, written, now);
  }
}

function watchCurrent(session: KeptSession, around: Surroundings, written: Written, second: number): void {
  addSample(session, written, second, measuredMilliamp(session, around, second));
  const watched = [...around.samples.slice(-watchedSamples), ...written.samples].slice(-watchedSamples);
  if (overCurrent(watched, session.dose.intensityMilliamp) !== null)
    stopAt(session, around, written, second, 'over_current');
}
