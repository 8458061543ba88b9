// Adherence from counts alone, for reports over many people: out of how many, and how sure. Per person, from the windows, it is adherence.ts'.

import { wilson, type Interval } from './wilson';

/** What is excused, cancelled or still to come stands in neither side of the fraction. */
export function countedOf(counts: {
  readonly complete: number;
  readonly partial: number;
  readonly notDelivered: number;
  readonly missed: number;
}): { planned: number; interval: Interval | null } {
  const planned = counts.complete + counts.partial + counts.notDelivered + counts.missed;
  return { planned, interval: wilson(counts.complete, planned) };
}
