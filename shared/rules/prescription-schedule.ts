// Whether a prescription's schedule can be lived: hours, days, gaps, counts and expiry that contradict each other are refused
// by name, nothing is mended. And the windows that a signed schedule plans. What dose is allowed is shared/rules/dose.ts.

import { isPosition } from '@/shared/values/positions';
import { isAbove, minuteMilliseconds } from '@/shared/values/units';
import { addDays, endOfDay, isDate, isoOf, localDate, parseInstant } from '@/shared/values/zone';
import { longestPrescriptionDays } from './house-limits';
import { areHours, hoursOn } from './hours';
import { plannedWindows, type PlannedWindow } from './schedule';

export type PrescribedSchedule = {
  readonly startsOn: string;
  readonly days: readonly number[];
  readonly hoursFrom: string;
  readonly hoursTo: string;
  readonly sessionsTotal: number;
  readonly minGapHours: number;
  readonly maxPerDay: number;
  readonly maxPer7Days: number;
  readonly expiresOn: string;
};

export type ScheduleContext = {
  readonly zone: string;
  /** Minutes with current on, of one session. */
  readonly sessionMinutes: number;
  /** Local days of this course that have a session already, done or under way; they count towards the total. */
  readonly takenDays: readonly string[];
  /** A draft may not start in the past; one that waited for its signature may have begun, if enough windows are left. */
  readonly mayHaveBegun: boolean;
};

export type ScheduleFinding = {
  readonly path: string;
  readonly code:
    | 'unknown_zone'
    | 'hours_empty'
    | 'hours_too_short'
    | 'days_twice'
    | 'starts_in_past'
    | 'expires_before_start'
    | 'expires_too_late'
    | 'gap_longer_than_days'
    | 'per_day_too_many'
    | 'per_week_too_few'
    | 'count_already_done'
    | 'too_few_windows'
    | 'position_unknown'
    | 'position_twice'
    | 'polarity_missing'
    | 'nothing_to_deliver';
  readonly facts?: Readonly<Record<string, string | number>>;
};

const hoursOfDay = 24;
const daysOfWeek = 7;

/** Minutes between the two wall-clock times, over midnight if the second is earlier. */
function windowMinutes({ hoursFrom, hoursTo }: PrescribedSchedule): number {
  const minutesOf = (time: string) => Number(time.slice(0, 2)) * 60 + Number(time.slice(3, 5));
  const length = minutesOf(hoursTo) - minutesOf(hoursFrom);
  return length > 0 ? length : length + hoursOfDay * 60;
}

/** The fewest days from one named weekday to the next; a week if only one is named. */
function leastDaysBetween(days: readonly number[]): number {
  const sorted = [...new Set(days)].sort((a, b) => a - b);
  return sorted.reduce((least, day, at) => {
    const next = sorted[at + 1] ?? (sorted[0] ?? day) + daysOfWeek;
    return Math.min(least, next - day);
  }, daysOfWeek);
}

function hourFindings(schedule: PrescribedSchedule, context: ScheduleContext): ScheduleFinding[] {
  if (schedule.hoursFrom === schedule.hoursTo) return [{ path: 'schedule.hoursTo', code: 'hours_empty' }];
  const least = context.sessionMinutes;
  const length = windowMinutes(schedule);
  if (isAbove(least, length))
    return [{ path: 'schedule.hoursTo', code: 'hours_too_short', facts: { minutes: length, least } }];
  const most = schedule.maxPerDay;
  const needed = most * least + (most - 1) * schedule.minGapHours * 60;
  if (most > 1 && isAbove(needed, length)) {
    return [
      {
        path: 'schedule.maxPerDay',
        code: 'per_day_too_many',
        facts: { gapHours: schedule.minGapHours, hours: length / 60 },
      },
    ];
  }
  return [];
}

function dayFindings(schedule: PrescribedSchedule): ScheduleFinding[] {
  const findings: ScheduleFinding[] = [];
  const count = new Set(schedule.days).size;
  if (count < schedule.days.length) findings.push({ path: 'schedule.days', code: 'days_twice' });
  const most = leastDaysBetween(schedule.days) * hoursOfDay;
  if (isAbove(schedule.minGapHours, most))
    findings.push({ path: 'schedule.minGapHours', code: 'gap_longer_than_days', facts: { hours: most } });
  if (schedule.maxPer7Days < count)
    findings.push({ path: 'schedule.maxPer7Days', code: 'per_week_too_few', facts: { days: count } });
  return findings;
}

function dateFindings(schedule: PrescribedSchedule, context: ScheduleContext, today: string): ScheduleFinding[] {
  const findings: ScheduleFinding[] = [];
  const latest = addDays(today, longestPrescriptionDays);
  if (!context.mayHaveBegun && schedule.startsOn < today)
    findings.push({ path: 'schedule.startsOn', code: 'starts_in_past', facts: { today } });
  if (schedule.expiresOn < schedule.startsOn)
    findings.push({ path: 'schedule.expiresOn', code: 'expires_before_start' });
  else if (schedule.expiresOn > latest)
    findings.push({ path: 'schedule.expiresOn', code: 'expires_too_late', facts: { latest } });
  return findings;
}

/** Sessions that are still to be planned. */
function remainingOf(schedule: PrescribedSchedule, takenDays: readonly string[]): number {
  return schedule.sessionsTotal - takenDays.length;
}

/**
 * The windows that a schedule still plans from `now` on: as many as the course lacks, none on a day that has a session
 * already, none that is over, none that opens after the expiry.
 */
export function windowsToPlan(
  schedule: PrescribedSchedule,
  context: Pick<ScheduleContext, 'zone' | 'takenDays'>,
  now: string,
): PlannedWindow[] {
  const at = parseInstant(now);
  const { zone, takenDays } = context;
  if (at === undefined || !areHours({ ...schedule, zone })) return [];
  const remaining = remainingOf(schedule, takenDays);
  const today = localDate(at, zone);
  // The window of yesterday evening may still be open after midnight.
  const yesterday = addDays(today, -1);
  const startsOn = schedule.startsOn > yesterday ? schedule.startsOn : yesterday;
  const { days, hoursFrom, hoursTo } = schedule;
  const expiresAt = isoOf(endOfDay(schedule.expiresOn, zone));
  // Enough for those that fall on taken days, and for the two of yesterday and today that may be over.
  const sessionsTotal = Math.max(remaining, 0) + takenDays.length + 2;
  return plannedWindows({ startsOn, days, hoursFrom, hoursTo, zone, sessionsTotal, expiresAt })
    .filter(({ windowFrom, windowTo }) => {
      const [from, to] = [parseInstant(windowFrom), parseInstant(windowTo)];
      return from !== undefined && to !== undefined && to > at && !takenDays.includes(localDate(from, zone));
    })
    .slice(0, Math.max(remaining, 0));
}

/** Every contradiction of a schedule, by field. Empty = it can be lived. */
export function scheduleFindings(
  schedule: PrescribedSchedule,
  context: ScheduleContext,
  now: string,
): ScheduleFinding[] {
  const at = parseInstant(now);
  const today = at === undefined ? '' : localDate(at, context.zone);
  if (at === undefined || !isDate(today)) return [{ path: 'schedule.startsOn', code: 'unknown_zone' }];
  const findings = [
    ...hourFindings(schedule, context),
    ...dayFindings(schedule),
    ...dateFindings(schedule, context, today),
  ];
  const remaining = remainingOf(schedule, context.takenDays);
  if (remaining < 1) {
    return [
      ...findings,
      { path: 'schedule.sessionsTotal', code: 'count_already_done', facts: { done: context.takenDays.length } },
    ];
  }
  // Counting windows of a schedule that is wrong already would only repeat it.
  if (findings.length > 0) return findings;
  const windows = windowsToPlan(schedule, context, now).length;
  return windows < remaining
    ? [{ path: 'schedule.expiresOn', code: 'too_few_windows', facts: { windows, needed: remaining } }]
    : [];
}

/** What the limits do not judge: current there at all, each electrode on a known place, none twice, both polarities. */
export function montageFindings(dose: {
  readonly intensityMilliamp: number;
  readonly electrodes: readonly { readonly position: string; readonly polarity: string }[];
}): ScheduleFinding[] {
  const findings: ScheduleFinding[] = [];
  const { electrodes, intensityMilliamp } = dose;
  if (!(intensityMilliamp > 0)) findings.push({ path: 'dose.intensityMilliamp', code: 'nothing_to_deliver' });
  electrodes.forEach(({ position }, at) => {
    const path = `dose.electrodes.${at}.position`;
    const isTwice = electrodes.slice(0, at).some((other) => other.position === position);
    if (!isPosition(position)) findings.push({ path, code: 'position_unknown', facts: { position } });
    else if (isTwice) findings.push({ path, code: 'position_twice', facts: { position } });
  });
  const polarities = new Set(electrodes.map(({ polarity }) => polarity));
  if (polarities.size < 2)
    findings.push({ path: `dose.electrodes.${Math.max(electrodes.length - 1, 0)}.polarity`, code: 'polarity_missing' });
  return findings;
}

export type MoveAnswer =
  | { readonly allowed: true; readonly windowFrom: string; readonly windowTo: string }
  | { readonly allowed: false; readonly code: 'day_taken' | 'outside_prescription' };

/**
 * The window of a session that is moved to another day, in the prescription's hours. Refused on a day that has a session
 * already, outside the prescription's days from start to expiry, and when too little of the window is left for a session.
 */
export function moveTo(
  day: string,
  schedule: Pick<PrescribedSchedule, 'startsOn' | 'expiresOn' | 'hoursFrom' | 'hoursTo'>,
  context: Pick<ScheduleContext, 'zone' | 'takenDays' | 'sessionMinutes'>,
  now: string,
): MoveAnswer {
  const at = parseInstant(now);
  const hours = hoursOn(day, { hoursFrom: schedule.hoursFrom, hoursTo: schedule.hoursTo, zone: context.zone });
  const isInside = day >= schedule.startsOn && day <= schedule.expiresOn;
  if (at === undefined || hours === undefined || !isInside) return { allowed: false, code: 'outside_prescription' };
  const closesAt = Math.min(hours.closesAt, endOfDay(schedule.expiresOn, context.zone));
  const left = closesAt - Math.max(hours.opensAt, at);
  if (left < context.sessionMinutes * minuteMilliseconds) return { allowed: false, code: 'outside_prescription' };
  if (context.takenDays.includes(day)) return { allowed: false, code: 'day_taken' };
  return { allowed: true, windowFrom: isoOf(hours.opensAt), windowTo: isoOf(closesAt) };
}
