// Dates, times and numbers as people read them, by Intl, in the zone that the reader lives in. It holds no words.

import { useTranslation } from 'react-i18next';
import { useMemo } from 'react';
import { addDays, isDate, localMoment } from '@/shared/values/zone';
import { useMe } from './me';

export interface Format {
  zone: string;
  /** "Tuesday 3 March" */
  day(instant: string): string;
  /** "3 Mar" */
  shortDay(instant: string): string;
  /** "3 Mar 2026" of a day without a time, `YYYY-MM-DD`. */
  date(day: string): string;
  /** "18:05" */
  time(instant: string): string;
  /** "Tue 3 Mar, 18:05" */
  dayTime(instant: string): string;
  /** today, tomorrow, yesterday, or null for any other day, seen from `now`. */
  nearDay(instant: string, now: string): 'today' | 'tomorrow' | 'yesterday' | null;
  /** "2 days", "3 h", "12 min": how long ago, in the largest unit that fits. */
  since(instant: string, now: string): string;
  /** "1.85", with the language's own signs. */
  number(value: number, digits?: number): string;
  /** "2.0": always so many digits, for a number that moves while it is read. */
  fixed(value: number, digits: number): string;
  /** "94 %" of a fraction. */
  percent(fraction: number): string;
}

const minute = 60_000;
const hour = 60 * minute;
const day = 24 * hour;

/** Formatting in a given language and zone. */
export function formatIn(language: string, zone: string): Format {
  const make = (options: Intl.DateTimeFormatOptions) =>
    new Intl.DateTimeFormat(language === 'en' ? 'en-GB' : language, { timeZone: zone, ...options });
  const longDay = make({ weekday: 'long', day: 'numeric', month: 'long' });
  const shortDay = make({ day: 'numeric', month: 'short' });
  const clock = make({ hour: '2-digit', minute: '2-digit', hourCycle: 'h23' });
  // A day of the calendar has no zone: read and written in the same one, it stays itself.
  const calendar = new Intl.DateTimeFormat(language === 'en' ? 'en-GB' : language, {
    timeZone: 'UTC',
    day: 'numeric',
    month: 'short',
    year: 'numeric',
  });
  const both = make({
    weekday: 'short',
    day: 'numeric',
    month: 'short',
    hour: '2-digit',
    minute: '2-digit',
    hourCycle: 'h23',
  });
  const at = (instant: string) => Date.parse(instant);
  const unit = (value: number, name: 'minute' | 'hour' | 'day') =>
    new Intl.NumberFormat(language, {
      style: 'unit',
      unit: name,
      unitDisplay: name === 'day' ? 'long' : 'short',
    }).format(value);
  return {
    zone,
    // Intl in English puts a comma after the weekday that nobody writes.
    day: (instant) => longDay.format(at(instant)).replace(',', ''),
    shortDay: (instant) => shortDay.format(at(instant)),
    date: (written) => (isDate(written) ? calendar.format(at(`${written}T00:00:00Z`)) : written),
    time: (instant) => clock.format(at(instant)),
    dayTime: (instant) => both.format(at(instant)),
    nearDay: (instant, now) => {
      const that = localMoment(at(instant), zone).date;
      const today = localMoment(at(now), zone).date;
      if (that === today) return 'today';
      if (that === addDays(today, 1)) return 'tomorrow';
      return that === addDays(today, -1) ? 'yesterday' : null;
    },
    since: (instant, now) => {
      const passed = Math.max(0, at(now) - at(instant));
      if (passed < hour) return unit(Math.floor(passed / minute), 'minute');
      if (passed < day) return unit(Math.floor(passed / hour), 'hour');
      return unit(Math.floor(passed / day), 'day');
    },
    number: (value, digits = 2) => new Intl.NumberFormat(language, { maximumFractionDigits: digits }).format(value),
    fixed: (value, digits) =>
      new Intl.NumberFormat(language, { minimumFractionDigits: digits, maximumFractionDigits: digits }).format(value),
    percent: (fraction) =>
      new Intl.NumberFormat(language, { style: 'percent', maximumFractionDigits: 0 }).format(fraction),
  };
}

/** Formatting for the person signed in: the participant's own zone, else the site's; `zone` overrides. */
export function useFormat(zone?: string): Format {
  const { i18n } = useTranslation();
  const me = useMe();
  const used = zone ?? me?.participant?.zone ?? me?.sites[0]?.zone ?? 'UTC';
  return useMemo(() => formatIn(i18n.language, used), [i18n.language, used]);
}
