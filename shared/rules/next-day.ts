// When the next day's questions about a session are asked. What the answers lead to is lockout.ts.

import { addDays, localDate, parseInstant } from '@/shared/values/zone';
import { nextDayAskedDays } from './house-limits';

/** From the next local day on, for a few days; an unknown end is never asked about. */
export function isNextDayDue(endedAt: string | null, now: string, zone: string): boolean {
  const ended = parseInstant(endedAt);
  const instant = parseInstant(now);
  if (ended === undefined || instant === undefined) return false;
  const endDay = localDate(ended, zone);
  const today = localDate(instant, zone);
  return today > endDay && today <= addDays(endDay, nextDayAskedDays);
}
