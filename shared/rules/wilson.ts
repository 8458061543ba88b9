// Wilson score interval of a share (Wilson 1927), without continuity correction.

export type Interval = { readonly low: number; readonly high: number };

/** z of 95 %. */
export const z95 = 1.959963984540054;

/** null when nothing was tried. 0 of n has exactly 0 as its lower end, n of n exactly 1 as its upper. */
export function wilson(successes: number, trials: number, z: number = z95): Interval | null {
  if (!(trials > 0) || !(successes >= 0) || successes > trials) return null;
  const share = successes / trials;
  const weight = 1 + (z * z) / trials;
  const centre = (share + (z * z) / (2 * trials)) / weight;
  const half = (z * Math.sqrt((share * (1 - share)) / trials + (z * z) / (4 * trials * trials))) / weight;
  return { low: successes === 0 ? 0 : centre - half, high: successes === trials ? 1 : centre + half };
}
