// Chance for the simulated stimulator: repeatable, so that a gap can be filled in later just as it would have been measured.
// It must not be used for anything that has to be hard to guess.

/** A number from a text, FNV-1a, 32 bit (Fowler, Noll and Vo; constants from their page, from memory). */
export function seedOf(text: string): number {
  let hash = 0x811c9dc5;
  for (let index = 0; index < text.length; index += 1) {
    hash = Math.imul(hash ^ text.charCodeAt(index), 0x01000193);
  }
  return hash >>> 0;
}

/** From 0 to 1 (1 excluded): the step-th number of a seed, by the mixing of mulberry32 (T. Ettinger, public domain). */
export function chanceAt(seed: number, step: number): number {
  let mixed = (seed + Math.imul(step + 1, 0x6d2b79f5)) >>> 0;
  mixed = Math.imul(mixed ^ (mixed >>> 15), mixed | 1);
  mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61);
  return ((mixed ^ (mixed >>> 14)) >>> 0) / 2 ** 32;
}

/** From −1 to 1, wandering slowly: chance at each period's start, joined smoothly. */
export function driftAt(seed: number, seconds: number, periodSeconds: number): number {
  const place = Math.max(0, seconds) / periodSeconds;
  const step = Math.floor(place);
  const share = place - step;
  const ease = share * share * (3 - 2 * share);
  const from = chanceAt(seed, step) * 2 - 1;
  const to = chanceAt(seed, step + 1) * 2 - 1;
  return from + (to - from) * ease;
}
