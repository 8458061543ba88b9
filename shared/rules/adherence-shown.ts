// Adherence as screens and answers show it: done, out of how many, with its interval. The counting is adherence.ts'.

import { adherence, type AdherenceFacts } from './adherence';
import type { Interval } from './wilson';

export type AdherenceShown = {
  readonly complete: number;
  readonly planned: number;
  readonly interval: Interval | null;
  readonly missedRunning: number;
};

export function adherenceShown(facts: AdherenceFacts, now: string): AdherenceShown {
  const { counts, planned, interval, missedRunning } = adherence(facts, now);
  return { complete: counts.complete, planned, interval, missedRunning };
}
