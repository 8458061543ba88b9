// How often the proofs are tried: a little in `npm test`, in full with RAMPWELL_FULL=1, each by the id of its goal.
// Must not: hide the seed. RAMPWELL_SEED repeats a run; without it chance picks one, and fast-check prints it when it fails.

/** Tries of each goal: in `npm test`, and in full. */
const tries = {
  T6: { small: 300, full: 100_000 },
  T7: { small: 200, full: 2_000 },
  F16: { small: 400, full: 105_192 },
  F17: { small: 300, full: 10_000 },
  S16: { small: 100, full: 1_000 },
  F23: { small: 200, full: 10_000 },
} as const;
export type TriedGoal = keyof typeof tries;

const isFull = process.env.RAMPWELL_FULL === '1';

/** For mutation testing, where each change is tried: a change that matters shows in few tries. */
const isFew = process.env.RAMPWELL_FEW === '1';
const few = 25;

export function runs(goal: TriedGoal): number {
  if (isFull) return tries[goal].full;
  return isFew ? few : tries[goal].small;
}

const given = Number(process.env.RAMPWELL_SEED);

/** For `fc.assert`: how often, and from which seed where one was given. */
export function tried(goal: TriedGoal): { numRuns: number; seed?: number } {
  const numRuns = runs(goal);
  return process.env.RAMPWELL_SEED === undefined || !Number.isSafeInteger(given)
    ? { numRuns }
    : { numRuns, seed: given };
}

/** A full run of a goal takes minutes. */
export const patience = isFull ? 3_600_000 : 120_000;
