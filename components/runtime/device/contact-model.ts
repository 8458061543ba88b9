// How the contact of one electrode comes to be in the simulated stimulator: it settles while the sponge soaks in, dries slowly,
// wanders, and is sometimes weak until the pad is wetted and pressed. Its numbers are own choices, made to look like a usual set-up.

import { chanceAt, driftAt } from './chance';
import type { ContactGrade } from './stimulator';

/** One pad on the head. Seconds are the stimulator's own time since it was switched on. */
export interface PlacedPad {
  position: string;
  seed: number;
  placedAtSeconds: number;
  /** When the wearer wetted and pressed it; null = not yet. */
  attendedAtSeconds: number | null;
  isLifted: boolean;
}

/** Common practice, and the project's rule: below 10 kΩ good, up to 20 kΩ weak, above or open none. */
const goodBelowKiloohm = 10;
const weakUpToKiloohm = 20;

export function gradeOf(kiloohm: number | null): ContactGrade {
  if (kiloohm === null || !(kiloohm <= weakUpToKiloohm)) return 'none';
  return kiloohm < goodBelowKiloohm ? 'good' : 'weak';
}

/** One pad in three does not sit well at first. */
const weakShare = 1 / 3;
export function startsWeak(pad: PlacedPad): boolean {
  return chanceAt(pad.seed, 1) < weakShare;
}

/** kΩ at one moment; null = open circuit. */
export function kiloohmAt(pad: PlacedPad, seconds: number): number | null {
  if (pad.isLifted) return null;
  const worn = Math.max(0, seconds - pad.placedAtSeconds);
  const settled = 4.4 + 1.8 * chanceAt(pad.seed, 0);
  const soaking = 7 * Math.exp(-worn / 4);
  const drying = 1.6 * (1 - Math.exp(-worn / 1800));
  const wander = 0.5 * driftAt(pad.seed, seconds, 40) + 0.15 * (chanceAt(pad.seed + 7, Math.floor(seconds)) * 2 - 1);
  const attended = pad.attendedAtSeconds;
  const loose = startsWeak(pad) ? 8 * (attended === null ? 1 : Math.exp(-Math.max(0, seconds - attended) / 1.5)) : 0;
  // One decimal, as such meters show it.
  return Math.round((settled + soaking + drying + wander + loose) * 10) / 10;
}
