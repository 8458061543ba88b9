// When a notice to a person may arrive: not in the quiet hours of where the person lives (guidance R70). Pages to staff never ask.

import { isoOf, parseInstant } from '@/shared/values/zone';
import { openHoursAt } from './hours';
import { quietHours } from './house-limits';

/** Now, or the end of the quiet hours that it falls into. An unreadable clock or zone delays nothing. */
export function afterQuietHours(now: string, zone: string): string {
  const at = parseInstant(now);
  if (at === undefined) return now;
  const quiet = openHoursAt(at, { hoursFrom: quietHours.from, hoursTo: quietHours.to, zone });
  return quiet === undefined ? now : isoOf(quiet.closesAt);
}
