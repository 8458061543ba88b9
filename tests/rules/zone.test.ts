// Local calendars over years of real zones: London, New York, Lord Howe (half an hour of summer time), Kathmandu
// (+5:45), Apia (lost 30 December 2011), Casablanca (summer time but in Ramadan).

import fc from 'fast-check';
import {
  addDays,
  dayExists,
  endOfDay,
  instantOf,
  isDate,
  isoOf,
  isTime,
  isZone,
  localMoment,
  nextMidnight,
  parseInstant,
  startOfDay,
  weekdayOf,
} from '@/shared/values/zone';

const zones = [
  'Europe/London',
  'America/New_York',
  'Australia/Lord_Howe',
  'Asia/Kathmandu',
  'Pacific/Apia',
  'Africa/Casablanca',
];
const minute = 60_000;
const someMinute = fc
  .integer({ min: Date.parse('2010-01-01T00:00:00Z') / minute, max: Date.parse('2036-01-01T00:00:00Z') / minute })
  .map((minutes) => minutes * minute);
const runs = { numRuns: 400 };

const day = 24 * 60 * minute;

/** The instant within the next day at which the distance to UTC changes, to the minute. */
function nextChange(start: number, platform: Intl.DateTimeFormat): number | undefined {
  const offsetAt = (instant: number) =>
    platform.formatToParts(instant).find(({ type }) => type === 'timeZoneName')?.value;
  const before = offsetAt(start);
  if (offsetAt(start + day) === before) return undefined;
  let [low, high] = [start, start + day];
  while (high - low > minute) {
    const middle = low + Math.floor((high - low) / minute / 2) * minute;
    if (offsetAt(middle) === before) low = middle;
    else high = middle;
  }
  return high;
}

describe.each(zones)('%s', (zone) => {
  it('shows the wall clock that the platform shows, around every change of the clocks too', () => {
    const platform = new Intl.DateTimeFormat('sv-SE', { timeZone: zone, dateStyle: 'short', timeStyle: 'medium' });
    const shows = (instant: number) => {
      const { date, time } = localMoment(instant, zone);
      return `${date} ${time}` === platform.format(instant);
    };
    fc.assert(
      fc.property(someMinute, (instant) => shows(instant) && shows(instant - 1)),
      runs,
    );
    const named = new Intl.DateTimeFormat('en', { timeZone: zone, timeZoneName: 'longOffset' });
    for (let start = Date.parse('2026-01-01T00:00:00Z'); start < Date.parse('2027-01-01T00:00:00Z'); start += day) {
      const change = nextChange(start, named);
      if (change === undefined) continue;
      expect([isoOf(change), shows(change), shows(change - 1)]).toEqual([isoOf(change), true, true]);
    }
  });

  it('finds every instant again by its local time, as the first or as the last of its kind', () => {
    fc.assert(
      fc.property(someMinute, (instant) => {
        const { date, time } = localMoment(instant, zone);
        const first = instantOf(date, time, zone, 'first');
        const last = instantOf(date, time, zone, 'last');
        return first <= last && (instant === first || instant === last);
      }),
      runs,
    );
  });

  it('begins a new local day at the next midnight, and not before', () => {
    fc.assert(
      fc.property(someMinute, (instant) => {
        const midnight = nextMidnight(instant, zone);
        const today = localMoment(instant, zone).date;
        const hours = (midnight - instant) / 3_600_000;
        return (
          midnight > instant &&
          hours <= 25 &&
          localMoment(midnight, zone).date > today &&
          localMoment(midnight - 1, zone).date === today
        );
      }),
      runs,
    );
  });

  it('reads a local time that is left out as the first instant after the jump', () => {
    fc.assert(
      fc.property(someMinute, (wall) => {
        const iso = new Date(wall).toISOString();
        const [date, time] = [iso.slice(0, 10), iso.slice(11, 16)];
        const instant = instantOf(date, time, zone);
        const shown = localMoment(instant, zone);
        if (shown.date === date && shown.time === `${time}:00`) return true;
        const before = localMoment(instant - 1, zone);
        return `${before.date} ${before.time}` < `${date} ${time}` && `${shown.date} ${shown.time}` > `${date} ${time}`;
      }),
      runs,
    );
  });

  it('covers the years with days, one after the other, without a hole', () => {
    for (let count = 0; count < 400; count += 1) {
      const date = addDays('2011-12-20', count);
      expect(endOfDay(date, zone)).toBe(startOfDay(addDays(date, 1), zone));
      expect([date, dayExists(date, zone)]).toEqual([date, zone !== 'Pacific/Apia' || date !== '2011-12-30']);
    }
  });
});

describe('instantOf', () => {
  const of = (...args: Parameters<typeof instantOf>) => isoOf(instantOf(...args));

  it('takes the first or the last of a time that occurs twice', () => {
    expect(of('2026-10-25', '02:30', 'Europe/Berlin', 'first')).toBe('2026-10-25T00:30:00Z');
    expect(of('2026-10-25', '02:30', 'Europe/Berlin', 'last')).toBe('2026-10-25T01:30:00Z');
    expect(of('2026-04-05', '01:45', 'Australia/Lord_Howe', 'first')).toBe('2026-04-04T14:45:00Z');
    expect(of('2026-04-05', '01:45', 'Australia/Lord_Howe', 'last')).toBe('2026-04-04T15:15:00Z');
  });

  it('opens after the jump what the jump leaves out', () => {
    expect(of('2026-03-29', '02:30', 'Europe/Berlin')).toBe('2026-03-29T01:00:00Z');
    expect(of('2026-10-04', '02:15', 'Australia/Lord_Howe')).toBe('2026-10-03T15:30:00Z');
    expect(of('2011-12-30', '10:00', 'Pacific/Apia')).toBe('2011-12-30T10:00:00Z');
  });

  it('knows seconds, and nothing of a day, a time or a zone that is none', () => {
    expect(of('2026-05-12', '18:00:30', 'Europe/Berlin')).toBe('2026-05-12T16:00:30Z');
    expect(instantOf('2026-02-29', '10:00', 'Europe/Berlin')).toBeNaN();
    expect(instantOf('2026-02-28', '24:00', 'Europe/Berlin')).toBeNaN();
    expect(instantOf('2026-02-28', '10:00', 'Europe/Atlantis')).toBeNaN();
    expect(dayExists('2026-02-28', 'Europe/Atlantis')).toBe(false);
    expect(localMoment(0, 'Europe/Atlantis')).toEqual({ date: '', time: '', weekday: Number.NaN });
  });
});

describe('instants, dates and times as text', () => {
  it.each([
    ['2026-05-12T16:00:00Z', '2026-05-12T16:00:00Z'],
    ['2026-05-12T16:00Z', '2026-05-12T16:00:00Z'],
    ['2026-05-12T16:00:00.250Z', '2026-05-12T16:00:00.250Z'],
  ])('reads %s', (text, iso) => {
    expect(isoOf(parseInstant(text) ?? Number.NaN)).toBe(iso);
  });

  it.each([
    '2026-05-12T16:00:00',
    '2026-05-12T16:00:00+02:00',
    '2026-05-12',
    '2026-02-30T00:00:00Z',
    '2026-05-12T25:00:00Z',
    '',
    null,
    undefined,
  ])('does not read %s', (text) => {
    expect(parseInstant(text)).toBeUndefined();
  });

  it('tells days, times and zones from what is none', () => {
    expect([isDate('2028-02-29'), isDate('2026-02-29'), isDate('12 May')]).toEqual([true, false, false]);
    expect([isTime('23:59'), isTime('23:59:59'), isTime('24:00'), isTime('7:00')]).toEqual([true, true, false, false]);
    expect([isZone('UTC'), isZone('+02:00'), isZone('Mars'), isZone('')]).toEqual([true, false, false, false]);
  });

  it('counts days over month, year and leap day, Monday first', () => {
    expect(addDays('2028-02-28', 1)).toBe('2028-02-29');
    expect(addDays('2026-12-31', 1)).toBe('2027-01-01');
    expect(addDays('never', 1)).toBe('');
    expect(['2026-05-11', '2026-05-12', '2026-05-17'].map(weekdayOf)).toEqual([1, 2, 7]);
  });
});
