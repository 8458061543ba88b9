// When the house's own terms end: instants made from house-limits.ts, so that no action counts days.

import { dayMilliseconds, minuteMilliseconds } from '@/shared/values/units';
import { isoOf, parseInstant } from '@/shared/values/zone';
import { invitationValidDays, watchingNowMinutes } from './house-limits';

function later(now: string, milliseconds: number): string {
  const at = parseInstant(now);
  // A clock that cannot be read gives no term at all: it is over at once.
  return at === undefined ? now : isoOf(at + milliseconds);
}

/** When an invitation that is written now ends. */
export function invitationEnd(now: string): string {
  return later(now, invitationValidDays * dayMilliseconds);
}

/** Until when somebody who says so now counts as watching. */
export function watchingEnd(now: string): string {
  return later(now, watchingNowMinutes * minuteMilliseconds);
}

/** When something that a protocol lets stand for so many days, counted from now, is over. */
export function validUntil(now: string, days: number): string {
  return later(now, days * dayMilliseconds);
}
