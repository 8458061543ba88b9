// A stimulator without a radio: the dose is set on it by staff, a one-time code (RFC 4226) starts it, and its own record is read out by staff.
// A weaker control than a permit: it must not be taken for one. Keeps nothing itself: the stimulator keeps the state that comes back.

import { ceilings } from '@/shared/rules/ceilings';
import { enterCode, freshEntry, type CodeEntry } from '@/shared/rules/code-entry';
import { chargeOf, minutesOn } from '@/shared/rules/dose/arithmetic';
import type { TrapezoidFacts } from '@/shared/rules/dose';
import { secretBytes } from '@/shared/rules/hotp';
import { isAbove } from '@/shared/values/units';
import type { WhatBegins } from './device-state';
import type { PlacedElectrode } from './pads';
import type { DeviceEntry, EndedWhy, StartRefusal } from './stimulator';

/** What staff set when they hand it out. */
export interface StandAloneSetUp {
  serial: string;
  /** Shared with the server; whoever has it can make codes. */
  secret: Uint8Array;
  /** The first counter whose code it takes. */
  nextCounter: number;
  dose: TrapezoidFacts;
  electrodes: readonly PlacedElectrode[];
}

/** One session of its record, as staff read it from the stimulator. */
export interface StandAloneRun {
  readonly counter: number;
  /** Null while it runs, or where it never came to an end. */
  readonly reason: EndedWhy | null;
  readonly onSeconds: number | null;
  readonly chargeCoulomb: number | null;
}

export interface StandAloneState {
  serial: string;
  secret: Uint8Array;
  entry: CodeEntry;
  dose: TrapezoidFacts;
  electrodes: PlacedElectrode[];
  runs: StandAloneRun[];
}

/** Why it does not start by a code. */
export type CodeRefusal =
  | 'not_set_up'
  | 'code_wrong'
  | 'code_wait'
  | 'code_locked'
  | Extract<
      StartRefusal,
      | 'permit_other_placement'
      | 'contact_not_good'
      | 'session_running'
      | 'battery_empty'
      | 'faulty'
      | 'record_unwritable'
    >;
export type CodeStart =
  | { readonly started: true; readonly counter: number }
  | { readonly started: false; readonly why: CodeRefusal; readonly waitSeconds?: number };

/** Null for what no stimulator may be set to: a short secret, a dose above a ceiling or without any current. */
export function standAloneOf(setUp: StandAloneSetUp): StandAloneState | null {
  const { serial, secret, nextCounter, dose, electrodes } = setUp;
  const isTooMuch =
    isAbove(dose.intensityMilliamp, ceilings.currentMilliamp.value) ||
    isAbove(minutesOn(dose), ceilings.minutes.value) ||
    isAbove(chargeOf(dose), ceilings.chargeCoulomb.value);
  if (secret.length < secretBytes || isTooMuch || !(dose.intensityMilliamp > 0)) return null;
  return { serial, secret, entry: freshEntry(nextCounter), dose, electrodes: [...electrodes], runs: [] };
}

/** The code, and what begins by it. The state that comes back is to be kept whatever the answer. */
export function tryCode(
  state: StandAloneState,
  typed: string,
  uptimeSeconds: number,
): { state: StandAloneState; begins: WhatBegins; counter: number } | { state: StandAloneState; refused: CodeStart } {
  const answer = enterCode(state.secret, typed, state.entry, uptimeSeconds);
  const kept = { ...state, entry: answer.entry };
  if (!answer.accepted) {
    return { state: kept, refused: { started: false, why: answer.why, waitSeconds: Math.ceil(answer.waitSeconds) } };
  }
  // It knows of no permit and no session: its counter is all that it can be named by.
  const name = `${state.serial}:${answer.counter}`;
  const run: StandAloneRun = { counter: answer.counter, reason: null, onSeconds: null, chargeCoulomb: null };
  return {
    state: { ...kept, runs: [...state.runs, run] },
    begins: { sessionId: name, permitId: name, dose: state.dose },
    counter: answer.counter,
  };
}

/** The last run with its end, once the stimulator has written it. */
export function withEnd(state: StandAloneState, entries: readonly DeviceEntry[]): StandAloneState {
  const ended = entries.find((entry) => entry.kind === 'ended');
  const last = state.runs.at(-1);
  if (ended?.kind !== 'ended' || last === undefined) return state;
  const { reason, onSeconds, chargeCoulomb } = ended;
  return { ...state, runs: [...state.runs.slice(0, -1), { ...last, reason, onSeconds, chargeCoulomb }] };
}
