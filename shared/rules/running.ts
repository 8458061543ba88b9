// Whether a session that runs may go on after what has happened since it began. Safety rules §4 void a permit at once; what already runs
// goes down only if the reason is safety, and goes on to its planned end otherwise. Answers with the reason; acts on nothing.

import { atLeast, atMost } from '@/shared/values/units';
import type { VoidCause } from '@/shared/values/void-causes';
import { chargeOf, minutesOn } from './dose/arithmetic';
import { voidsPermit, type DeviceState } from './device-state';

/** What a dose allows, as far as a run can exceed it. */
export type RunDose = {
  readonly waveform: string;
  readonly intensityMilliamp: number;
  readonly rampUpSeconds: number;
  readonly holdSeconds: number;
  readonly rampDownSeconds: number;
  readonly electrodes: readonly {
    readonly position: string;
    readonly polarity: string;
    readonly areaSquareCentimetre: number;
    readonly share: number;
  }[];
};

export type RunningFacts = {
  /** Why the permit was void before anything ran on it; null when it was not. */
  readonly voidedBy: string | null;
  /** The dose of the permit. */
  readonly running: RunDose;
  /** The dose of the version in force now; null = none is. */
  readonly inForce: RunDose | null;
  readonly isPaused: boolean;
  /** Any open lockout, holds among them. */
  readonly isLocked: boolean;
  /** Null = not known. */
  readonly device: DeviceState | null;
};

function isSamePlacement(a: RunDose, b: RunDose): boolean {
  const places = ({ electrodes }: RunDose) =>
    electrodes
      .map(({ position, polarity, areaSquareCentimetre, share }) =>
        [position, polarity, areaSquareCentimetre, share].join(),
      )
      .sort()
      .join(';');
  return a.waveform === b.waveform && places(a) === places(b);
}

/** Nothing of what runs is more, or steeper, than the version in force allows. */
function allowsWhatRuns(inForce: RunDose, running: RunDose): boolean {
  return (
    isSamePlacement(inForce, running) &&
    atLeast(inForce.intensityMilliamp, running.intensityMilliamp) &&
    atLeast(chargeOf(inForce), chargeOf(running)) &&
    atLeast(minutesOn(inForce), minutesOn(running)) &&
    atMost(inForce.rampUpSeconds, running.rampUpSeconds) &&
    atMost(inForce.rampDownSeconds, running.rampDownSeconds)
  );
}

/**
 * Why the run must go down; null when it may go on (own choices).
 * - void before it began: it never had a right to run.
 * - lockout, pause: somebody found a reason not to stimulate; that it is harmless cannot be known, and unknown means no.
 * - withdrawn, or nothing in force: nobody consents to, or stands for, the rest.
 * - device: recalled, quarantined, lost, taken back, or not known.
 * - amended: only if the new version allows less than what runs, since then somebody found it too much. A version that changes
 *   the plan, or allows as much, is for the next session: this one goes on to its end.
 */
export function rampDownCause(facts: RunningFacts): VoidCause | 'void' | null {
  const { voidedBy, running, inForce, isPaused, isLocked, device } = facts;
  if (voidedBy !== null) return 'void';
  if (isLocked) return 'lockout';
  if (isPaused) return 'paused';
  if (inForce === null) return 'withdrawn';
  if (device === null || voidsPermit(device)) return 'device';
  return allowsWhatRuns(inForce, running) ? null : 'amended';
}
