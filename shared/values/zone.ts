// Arithmetic of local calendars in IANA zones on the platform's own Intl. Instants are milliseconds since 1970 UTC
// inside, ISO 8601 strings outside. No clock is read here, and no fixed offset is ever assumed.

import { dayMilliseconds, minuteMilliseconds } from './units';

const isoForm = /^\d{4}-\d{2}-\d{2}T\d{2}:\d{2}(:\d{2}(\.\d{1,9})?)?Z$/;
const dateForm = /^(\d{4})-(\d{2})-(\d{2})$/;
const timeForm = /^([01]\d|2[0-3]):([0-5]\d)(?::([0-5]\d))?$/;

/** No zone was ever further than 15 h 13 min from UTC (Manila before 1845 aside); a day and a bit covers all. */
const searchMilliseconds = 26 * 60 * minuteMilliseconds;

/** UTC instant of an ISO 8601 string that ends in Z; undefined for anything else, and for days that do not exist. */
export function parseInstant(iso: string | null | undefined): number | undefined {
  if (typeof iso !== 'string' || !isoForm.test(iso)) return undefined;
  const milliseconds = Date.parse(iso);
  if (!Number.isFinite(milliseconds)) return undefined;
  // Engines differ on 30 February: some roll over to March.
  return new Date(milliseconds).toISOString().slice(0, 10) === iso.slice(0, 10) ? milliseconds : undefined;
}

/** `2026-05-12T16:00:00Z`; with milliseconds only where there are some. */
export function isoOf(milliseconds: number): string {
  return new Date(milliseconds).toISOString().replace('.000Z', 'Z');
}

const formatters = new Map<string, Intl.DateTimeFormat | null>();

function formatterOf(zone: string): Intl.DateTimeFormat | null {
  const known = formatters.get(zone);
  if (known !== undefined) return known;
  let made: Intl.DateTimeFormat | null = null;
  try {
    // An offset such as +02:00 is no zone: it knows no daylight saving time.
    if (/^[A-Za-z]/.test(zone)) {
      made = new Intl.DateTimeFormat('en-US', {
        timeZone: zone,
        calendar: 'gregory',
        numberingSystem: 'latn',
        hourCycle: 'h23',
        year: 'numeric',
        month: '2-digit',
        day: '2-digit',
        hour: '2-digit',
        minute: '2-digit',
        second: '2-digit',
      });
    }
  } catch {
    made = null;
  }
  formatters.set(zone, made);
  return made;
}

/** True for an IANA name that this runtime knows. */
export function isZone(zone: string): boolean {
  return formatterOf(zone) !== null;
}

/** What Intl says, some ten microseconds a time. */
function formattedWallClock(milliseconds: number, formatter: Intl.DateTimeFormat): number {
  const part = new Map(formatter.formatToParts(milliseconds).map(({ type, value }) => [type, Number(value)]));
  const of = (type: Intl.DateTimeFormatPartTypes) => part.get(type) ?? Number.NaN;
  const fraction = ((milliseconds % 1000) + 1000) % 1000;
  return Date.UTC(of('year'), of('month') - 1, of('day'), of('hour'), of('minute'), of('second')) + fraction;
}

/** Since Liberia gave up −0:44:30 in 1972 every zone has changed its offset at a whole quarter of an hour UTC. */
const slotMilliseconds = 15 * minuteMilliseconds;
const slotsSince = Date.UTC(1973, 0, 1);
const offsets = new Map<string, number>();
const mostOffsets = 20_000;

/** The zone's wall clock at an instant, written as if it were UTC, in milliseconds. */
function wallClock(milliseconds: number, zone: string): number {
  const formatter = formatterOf(zone);
  if (formatter === null || !Number.isFinite(milliseconds)) return Number.NaN;
  if (milliseconds < slotsSince) return formattedWallClock(milliseconds, formatter);
  const slot = Math.floor(milliseconds / slotMilliseconds);
  const key = `${zone} ${slot}`;
  let offset = offsets.get(key);
  if (offset === undefined) {
    // A clearance asks for the same few quarters of an hour again and again.
    const start = slot * slotMilliseconds;
    offset = formattedWallClock(start, formatter) - start;
    if (offsets.size >= mostOffsets) offsets.clear();
    offsets.set(key, offset);
  }
  return milliseconds + offset;
}

/** `2026-05-12` and `18:30:00` of an instant in a zone; weekday 1 = Monday … 7 = Sunday. */
export type LocalMoment = { readonly date: string; readonly time: string; readonly weekday: number };

/** Empty strings for an unknown zone. */
export function localMoment(milliseconds: number, zone: string): LocalMoment {
  const wall = wallClock(milliseconds, zone);
  if (!Number.isFinite(wall)) return { date: '', time: '', weekday: Number.NaN };
  const iso = new Date(wall).toISOString();
  const date = iso.slice(0, 10);
  return { date, time: iso.slice(11, 19), weekday: weekdayOf(date) };
}

/** Local date alone. */
export function localDate(milliseconds: number, zone: string): string {
  return localMoment(milliseconds, zone).date;
}

/** True for `2026-05-12`, false for `2026-02-30`. */
export function isDate(date: string): boolean {
  return dateForm.test(date) && parseInstant(`${date}T00:00:00Z`) !== undefined;
}

/** True for `07:00` and `07:00:00`. */
export function isTime(time: string): boolean {
  return timeForm.test(time);
}

/** The first instant at which the wall clock shows `wanted` or more, given that it never shows `wanted` itself. */
function afterTheJump(wanted: number, zone: string): number {
  let before = wanted - searchMilliseconds;
  let after = wanted + searchMilliseconds;
  while (after - before > 1) {
    const middle = Math.floor((before + after) / 2);
    if (wallClock(middle, zone) < wanted) before = middle;
    else after = middle;
  }
  return after;
}

/**
 * Instant of a local time. A time that occurs twice is the `first` or the `last` of the two; a time that a jump
 * leaves out is the first instant after the jump. NaN for an unknown zone, day or time.
 */
export function instantOf(date: string, time: string, zone: string, which: 'first' | 'last' = 'first'): number {
  if (!isDate(date) || !isTime(time) || !isZone(zone)) return Number.NaN;
  const wanted = Date.parse(`${date}T${time.length === 5 ? `${time}:00` : time}Z`);
  // Three places to ask for the offset: before, at and after any change that could concern this time.
  const hits = [wanted - searchMilliseconds, wanted, wanted + searchMilliseconds]
    .map((near) => wanted - (wallClock(near, zone) - near))
    .filter((candidate) => wallClock(candidate, zone) === wanted);
  if (hits.length === 0) return afterTheJump(wanted, zone);
  return which === 'first' ? Math.min(...hits) : Math.max(...hits);
}

/** False for a local day that a zone left out (Apia, 30 December 2011). */
export function dayExists(date: string, zone: string): boolean {
  const start = startOfDay(date, zone);
  return Number.isFinite(start) && localDate(start, zone) === date;
}

/** First instant of a local day. */
export function startOfDay(date: string, zone: string): number {
  return instantOf(date, '00:00', zone, 'first');
}

/** First instant of the next local day after an instant. */
export function nextMidnight(milliseconds: number, zone: string): number {
  return startOfDay(addDays(localDate(milliseconds, zone), 1), zone);
}

/** Calendar arithmetic, no zone in it; empty for what is no date. */
export function addDays(date: string, days: number): string {
  if (!isDate(date)) return '';
  return new Date(Date.parse(`${date}T00:00:00Z`) + days * dayMilliseconds).toISOString().slice(0, 10);
}

/** 1 = Monday … 7 = Sunday (ISO 8601). */
export function weekdayOf(date: string): number {
  const sundayFirst = new Date(Date.parse(`${date}T00:00:00Z`)).getUTCDay();
  return sundayFirst === 0 ? 7 : sundayFirst;
}

/** A date typed as an end means the end of that local day: over at this instant. */
export function endOfDay(date: string, zone: string): number {
  return startOfDay(addDays(date, 1), zone);
}
