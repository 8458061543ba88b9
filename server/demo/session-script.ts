// What a stimulator would have recorded of one session, as the events that a phone sends. Made with the same rules that device and server
// use; the small differences of a real measurement follow from the sample's number, so that the demo is the same each time.

import { randomUUID } from 'node:crypto';
import { sessionStateAt, type SessionEventFact } from '@/shared/rules/session';
import type { SessionEvent } from '@/shared/contracts/permit';

export interface ScriptedDose {
  intensityMilliamp: number;
  rampUpSeconds: number;
  holdSeconds: number;
  rampDownSeconds: number;
  electrodes: readonly { position: string }[];
}

export interface Script {
  dose: ScriptedDose;
  counter: number;
  device: { id: string; serial: string; firmware: string };
  /** Words of the run besides the plan: a pause, lost contact, Stop. */
  words: readonly SessionEventFact[];
  sensations: readonly { atSeconds: number; sensation: string; strength: number }[];
  /** Makes contact and measurement differ from one person and day to another. */
  grain: number;
}

const samplesPerEvent = 300;
const batteryPercent = 86;
/** kΩ of a well-placed damp sponge, and how much it differs (common practice: good is under 10 kΩ). */
const usualKiloohm = 5.2;
const kiloohmSpread = 2.4;
/** mA: what a measurement differs from the set current. */
const measureSpread = 0.006;
/** Long after any session has ended. */
const longAfterSeconds = 7200;

/** A number from 0 to 1 that looks unordered and is always the same for the same place (sine hash). */
function ripple(place: number): number {
  const value = Math.sin(place * 12.9898 + 4.1414) * 43758.5453;
  return value - Math.floor(value);
}

/** Shape of an event without its place in the row, given to it last. */
type Unnumbered = SessionEvent extends infer Event ? (Event extends SessionEvent ? Omit<Event, 'id' | 'sequence'> : never) : never;

const sampleWords = ['pause', 'resume', 'contact_lost', 'contact_back'] as const;

export function scriptSession({ dose, counter, device, words, sensations, grain }: Script): SessionEvent[] {
  const end = sessionStateAt(dose, words, longAfterSeconds);
  const endSeconds = end.endedAtSeconds ?? 0;
  const contactOf = (index: number, at: number) => Number((usualKiloohm + kiloohmSpread * ripple(grain + index * 7 + at)).toFixed(2));
  const rows: Unnumbered[] = [
    { kind: 'identified', atSeconds: 0, deviceId: device.id, serial: device.serial, firmware: device.firmware, batteryPercent },
    ...dose.electrodes.map(({ position }, index): Unnumbered => ({ kind: 'contact', atSeconds: 0, position, kiloohm: contactOf(index, 0), grade: 'good' })),
    { kind: 'started', atSeconds: 0, counter },
  ];
  for (let from = 0; from <= endSeconds; from += samplesPerEvent) {
    const samples: [number, number][] = [];
    for (let at = from; at < from + samplesPerEvent && at <= endSeconds; at += 1) samples.push([at, measured(at)]);
    const last = samples.at(-1)?.[0] ?? from;
    if (last + 1 > endSeconds && endSeconds > last) samples.push([endSeconds, 0]);
    rows.push({ kind: 'samples', atSeconds: Math.min(endSeconds, last), samples, impedance: dose.electrodes.map(({ position }, index) => [position, contactOf(index, from)]) });
  }
  for (const [atSeconds, word] of words) {
    const plain = sampleWords.find((one) => one === word);
    if (plain) rows.push({ kind: plain, atSeconds });
    if (word === 'stop') rows.push({ kind: 'stop', atSeconds, why: 'button' });
  }
  for (const felt of sensations.filter(({ atSeconds }) => atSeconds < endSeconds)) rows.push({ kind: 'sensation', ...felt });
  rows.push({ kind: 'ended', atSeconds: endSeconds, reason: end.endReason ?? 'complete', onSeconds: end.onSeconds, chargeCoulomb: end.chargeCoulomb, lastSequence: rows.length });
  return rows.map((row, sequence): SessionEvent => ({ ...row, id: randomUUID(), sequence }));

  function measured(at: number): number {
    const set = sessionStateAt(dose, words, at).currentMilliamp;
    if (set === 0) return 0;
    return Number(Math.max(0, set + measureSpread * (2 * ripple(grain * 31 + at) - 1)).toFixed(4));
  }
}
