// From which instant an opened supply counts. Only a day is typed, so the day's start counts: the earlier reading, the shorter life.

import { isDate, isoOf, localDate, parseInstant, startOfDay } from '@/shared/values/zone';

/** null when the day has not come where the person lives, or is none. Never later than now. */
export function openedAtOf(openedOn: string, zone: string, now: string): string | null {
  const at = parseInstant(now);
  if (at === undefined || !isDate(openedOn) || openedOn > localDate(at, zone)) return null;
  const opened = startOfDay(openedOn, zone);
  return Number.isFinite(opened) ? isoOf(Math.min(opened, at)) : null;
}
