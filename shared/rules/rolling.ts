// Rolling sums: what counts in the last 24 h or 7 days, and when enough of it is older. Half open: what ended
// exactly 24 h (168 h) ago is out. A reserved dose counts whole, with an end that may lie in the future.

import { hourMilliseconds, isAbove } from '@/shared/values/units';

export const dayWindow = 24 * hourMilliseconds;
export const weekWindow = 168 * hourMilliseconds;

export type Counted = { readonly endedAt: number; readonly amount: number };

export function rollingSum(counted: readonly Counted[], now: number, window: number): number {
  return counted.reduce((sum, { endedAt, amount }) => (endedAt > now - window ? sum + amount : sum), 0);
}

/**
 * Whether the planned amount still fits under the limit; if not, when it will because enough is older. No `at`: never
 * by time, the planned amount alone is above the limit.
 */
export function fitsUnder(
  counted: readonly Counted[],
  planned: number,
  limit: number,
  now: number,
  window: number,
): { readonly fits: true } | { readonly fits: false; readonly sum: number; readonly at?: number } {
  const sum = rollingSum(counted, now, window);
  if (!isAbove(sum + planned, limit)) return { fits: true };
  const inside = counted.filter(({ endedAt }) => endedAt > now - window).sort((a, b) => a.endedAt - b.endedAt);
  // Summed afresh each time: taking amounts off a running sum leaves a bit behind that could refuse a lawful dose.
  for (const [index, { endedAt }] of inside.entries()) {
    const rest = inside.slice(index + 1).reduce((total, { amount }) => total + amount, 0);
    if (!isAbove(rest + planned, limit)) return { fits: false, sum, at: endedAt + window };
  }
  return { fits: false, sum };
}
