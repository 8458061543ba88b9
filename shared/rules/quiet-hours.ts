// When a notice to a person may be sent: not in the night of their own zone. Pages to staff never wait.

import { addDays, instantOf, isoOf, localMoment, parseInstant } from '@/shared/values/zone';
import { hourMilliseconds } from '@/shared/values/units';
import { nudgeLifeHours, quietHours } from './house-limits';

/** Now, or the end of the quiet hours; in an unknown zone at once, since when the night is cannot be told. */
export function afterQuietHours(now: string, zone: string): string {
  const instant = parseInstant(now) ?? Number.NaN;
  const { date, time } = localMoment(instant, zone);
  const isLate = time >= quietHours.from;
  if (date === '' || (!isLate && time >= quietHours.to)) return now;
  return isoOf(instantOf(isLate ? addDays(date, 1) : date, quietHours.to, zone));
}

/** After this a nudge is stale. */
export function nudgeDropAt(dueAt: string): string {
  return isoOf((parseInstant(dueAt) ?? Number.NaN) + nudgeLifeHours * hourMilliseconds);
}
