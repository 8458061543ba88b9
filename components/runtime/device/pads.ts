// The pads on the head as the simulated stimulator has them: put on, wetted and pressed, come loose, measured. How contact behaves is the
// model's business; whether it is good enough is asked elsewhere.

import type { Polarity } from '@/shared/values/codes';
import { seedOf } from './chance';
import { gradeOf, kiloohmAt, type PlacedPad } from './contact-model';
import type { KeptState } from './device-state';
import type { ElectrodeContact } from './stimulator';

export interface PlacedElectrode {
  readonly position: string;
  readonly polarity: Polarity;
}

export function placePads(state: KeptState, electrodes: readonly PlacedElectrode[], uptimeSeconds: number): void {
  const set = `${state.pairing?.serial ?? ''}:${state.highestCounter}`;
  const before = new Map(state.pads.map((pad) => [pad.position, pad]));
  state.electrodes = electrodes.map(({ position, polarity }) => ({ position, polarity }));
  state.pads = electrodes.map(({ position }): PlacedPad => {
    const seed = seedOf(`${set}:${position}`);
    const there = before.get(position);
    // The same pad as a moment ago: it has gone on soaking.
    if (there?.seed === seed && !there.isLifted) return there;
    return { position, seed, placedAtSeconds: uptimeSeconds, attendedAtSeconds: null, isLifted: false };
  });
}

export function attendPad(state: KeptState, position: string, uptimeSeconds: number): void {
  const pad = state.pads.find((one) => one.position === position);
  if (!pad) return;
  pad.attendedAtSeconds ??= uptimeSeconds;
  pad.isLifted = false;
}

export function liftPad(state: KeptState, position: string): void {
  const pad = state.pads.find((one) => one.position === position);
  if (pad) pad.isLifted = true;
}

export function contactsOf(state: KeptState, uptimeSeconds: number): ElectrodeContact[] {
  return state.electrodes.flatMap(({ position, polarity }) => {
    const pad = state.pads.find((one) => one.position === position);
    if (!pad) return [];
    const kiloohm = kiloohmAt(pad, uptimeSeconds);
    return [{ position, polarity, kiloohm, grade: gradeOf(kiloohm) }];
  });
}

/** Exactly the places and polarities that a permit names. */
export function arePlacedSo(state: KeptState, montage: readonly PlacedElectrode[]): boolean {
  return (
    montage.length === state.electrodes.length &&
    montage.every(({ position, polarity }) =>
      state.electrodes.some((one) => one.position === position && one.polarity === polarity),
    )
  );
}
