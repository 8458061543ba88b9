// The allowed hours of a day as instants. An opening that does not exist is the first instant after the jump; one
// that occurs twice opens at the first and closes at the last. `from` later than `to` crosses midnight.

import { addDays, dayExists, instantOf, isTime, isZone, localDate } from '@/shared/values/zone';

/** Half open: open at `opensAt`, closed at `closesAt`. Milliseconds. */
export type OpenHours = { readonly opensAt: number; readonly closesAt: number };
export type HoursFacts = { readonly hoursFrom: string; readonly hoursTo: string; readonly zone: string };

/** False for hours that can never be open: no times, no zone, or nothing between them. */
export function areHours({ hoursFrom, hoursTo, zone }: HoursFacts): boolean {
  return isTime(hoursFrom) && isTime(hoursTo) && isZone(zone) && hoursFrom !== hoursTo;
}

/** The hours that open on a local day; undefined on a day that does not exist, or where a jump leaves nothing. */
export function hoursOn(date: string, hours: HoursFacts): OpenHours | undefined {
  const { hoursFrom, hoursTo, zone } = hours;
  if (!areHours(hours) || !dayExists(date, zone)) return undefined;
  const opensAt = instantOf(date, hoursFrom, zone, 'first');
  const closesAt = instantOf(hoursFrom < hoursTo ? date : addDays(date, 1), hoursTo, zone, 'last');
  return closesAt > opensAt ? { opensAt, closesAt } : undefined;
}

/** The hours that are open at an instant. */
export function openHoursAt(now: number, hours: HoursFacts): OpenHours | undefined {
  if (!areHours(hours)) return undefined;
  const today = localDate(now, hours.zone);
  return [addDays(today, -1), today]
    .map((date) => hoursOn(date, hours))
    .find((open) => open !== undefined && open.opensAt <= now && now < open.closesAt);
}

/** The next opening after an instant. A week covers any day that a zone leaves out. */
export function nextOpening(now: number, hours: HoursFacts): number | undefined {
  if (!areHours(hours)) return undefined;
  const today = localDate(now, hours.zone);
  for (let day = 0; day <= 7; day += 1) {
    const open = hoursOn(addDays(today, day), hours);
    if (open !== undefined && open.opensAt > now) return open.opensAt;
  }
  return undefined;
}
