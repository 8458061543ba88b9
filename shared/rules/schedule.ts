// The planned windows of a course, and what a window becomes when it closes undone.

import { addDays, isDate, isZone, isoOf, localDate, parseInstant, weekdayOf } from '@/shared/values/zone';
import { isHeldThrough, type HoldFacts } from './adherence';
import { hoursOn } from './hours';

export type ScheduleFacts = {
  /** First local day, `2026-05-12`. */
  readonly startsOn: string;
  /** 1 = Monday … 7 = Sunday. */
  readonly days: readonly number[];
  readonly hoursFrom: string;
  readonly hoursTo: string;
  readonly zone: string;
  readonly sessionsTotal: number;
  /** No window opens at or after it. */
  readonly expiresAt?: string;
};
export type PlannedWindow = { readonly number: number; readonly windowFrom: string; readonly windowTo: string };

/** A course that is not through by then is not planned any further (own choice). */
const longestCourseDays = 3 * 366;

/**
 * One window for each named day from the start until the count is reached, as UTC instants. A local day that does not
 * exist has none, and the course goes on after it; a window is cut at the prescription's end. Empty for a schedule
 * that cannot be read.
 */
export function plannedWindows(schedule: ScheduleFacts): PlannedWindow[] {
  const { startsOn, days, zone, sessionsTotal } = schedule;
  if (!isDate(startsOn) || !isZone(zone)) return [];
  const end = schedule.expiresAt === undefined ? Number.POSITIVE_INFINITY : parseInstant(schedule.expiresAt);
  if (end === undefined) return [];
  const windows: PlannedWindow[] = [];
  for (let day = 0; day < longestCourseDays && windows.length < sessionsTotal; day += 1) {
    const date = addDays(startsOn, day);
    if (!days.includes(weekdayOf(date))) continue;
    const open = hoursOn(date, schedule);
    if (open === undefined) continue;
    if (open.opensAt >= end) break;
    windows.push({
      number: windows.length + 1,
      windowFrom: isoOf(open.opensAt),
      windowTo: isoOf(Math.min(open.closesAt, end)),
    });
  }
  return windows;
}

/** The next window after the last planned one: where a missed session may move, if the prescription lets it. */
export function windowAfter(
  schedule: ScheduleFacts,
  lastWindowFrom: string,
): { readonly windowFrom: string; readonly windowTo: string } | null {
  const after = parseInstant(lastWindowFrom);
  if (after === undefined) return null;
  const day = localDate(after, schedule.zone);
  const startsOn = day > schedule.startsOn ? day : schedule.startsOn;
  // The day of the last window may come back as the first: two are enough.
  const next = plannedWindows({ ...schedule, startsOn, sessionsTotal: 2 });
  return next.find(({ windowFrom }) => (parseInstant(windowFrom) ?? 0) > after) ?? null;
}

/** The window of one local day, whatever weekday it is; null if there is none. */
export function windowOn(
  date: string,
  hours: Pick<ScheduleFacts, 'hoursFrom' | 'hoursTo' | 'zone'>,
): Omit<PlannedWindow, 'number'> | null {
  const open = hoursOn(date, hours);
  return open === undefined ? null : { windowFrom: isoOf(open.opensAt), windowTo: isoOf(open.closesAt) };
}

/** Closed at its very end. An unreadable window is never closed: nothing is marked missed by mistake. */
export function windowClosed(window: { readonly windowTo: string }, now: string): boolean {
  const closesAt = parseInstant(window.windowTo);
  const instant = parseInstant(now);
  return closesAt !== undefined && instant !== undefined && closesAt <= instant;
}

/** Held through the whole window = excused: no mail, and in neither side of the adherence fraction. */
export function missedOrExcused(
  window: { readonly windowFrom: string; readonly windowTo: string },
  holds: readonly HoldFacts[],
): 'missed' | 'excused' {
  return isHeldThrough(window, holds) ? 'excused' : 'missed';
}
