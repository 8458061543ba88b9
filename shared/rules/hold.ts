// When "not before tomorrow" ends. Decides nothing else.

import { hourMilliseconds } from '@/shared/values/units';
import { isZone, nextMidnight } from '@/shared/values/zone';

/** Own choice: an answer at 23:30 must not be void half an hour later. */
const leastHoldHours = 8;
/** The longest local day that a change of clocks makes: what holds when the zone is not known. */
const longestDayHours = 25;

/** The later of the next local midnight and 8 h elapsed, in milliseconds. */
export function holdUntilTomorrow(answeredAt: number, zone: string | undefined): number {
  const least = answeredAt + leastHoldHours * hourMilliseconds;
  if (zone === undefined || !isZone(zone)) return answeredAt + longestDayHours * hourMilliseconds;
  return Math.max(least, nextMidnight(answeredAt, zone));
}
