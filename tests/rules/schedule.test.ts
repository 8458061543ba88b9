// Planned windows: one for each named day that exists, whatever the clocks do, and what a closed window becomes.

import fc from 'fast-check';
import { missedOrExcused, plannedWindows, windowAfter, windowClosed, windowOn } from '@/shared/rules/schedule';
import { localMoment, parseInstant, weekdayOf } from '@/shared/values/zone';

const schedule = {
  startsOn: '2026-05-12',
  days: [1, 2, 3, 4, 5],
  hoursFrom: '07:00',
  hoursTo: '22:00',
  zone: 'Europe/Berlin',
  sessionsTotal: 5,
};
const fromOf = (changes: object) => plannedWindows({ ...schedule, ...changes }).map(({ windowFrom }) => windowFrom);

describe('plannedWindows', () => {
  it('plans the named days from the start until the count is reached', () => {
    expect(plannedWindows(schedule)).toEqual([
      { number: 1, windowFrom: '2026-05-12T05:00:00Z', windowTo: '2026-05-12T20:00:00Z' },
      { number: 2, windowFrom: '2026-05-13T05:00:00Z', windowTo: '2026-05-13T20:00:00Z' },
      { number: 3, windowFrom: '2026-05-14T05:00:00Z', windowTo: '2026-05-14T20:00:00Z' },
      { number: 4, windowFrom: '2026-05-15T05:00:00Z', windowTo: '2026-05-15T20:00:00Z' },
      { number: 5, windowFrom: '2026-05-18T05:00:00Z', windowTo: '2026-05-18T20:00:00Z' },
    ]);
  });

  it('crosses midnight where the hours do', () => {
    const [first] = plannedWindows({ ...schedule, hoursFrom: '20:00', hoursTo: '01:00' });
    expect(first).toMatchObject({ windowFrom: '2026-05-12T18:00:00Z', windowTo: '2026-05-12T23:00:00Z' });
  });

  it('opens at the first and closes at the last of a time that occurs twice', () => {
    const autumn = {
      ...schedule,
      startsOn: '2026-10-25',
      days: [7],
      hoursFrom: '02:15',
      hoursTo: '02:45',
      sessionsTotal: 1,
    };
    expect(plannedWindows(autumn)[0]).toMatchObject({
      windowFrom: '2026-10-25T00:15:00Z',
      windowTo: '2026-10-25T01:45:00Z',
    });
  });

  it('plans nothing in an hour that the spring leaves out', () => {
    const spring = { startsOn: '2026-03-22', days: [7], hoursFrom: '02:00', hoursTo: '02:45', sessionsTotal: 3 };
    expect(fromOf(spring)).toEqual(['2026-03-22T01:00:00Z', '2026-04-05T00:00:00Z', '2026-04-12T00:00:00Z']);
  });

  it('plans nothing on a local day that did not exist', () => {
    const apia = { startsOn: '2011-12-29', days: [1, 2, 3, 4, 5, 6, 7], zone: 'Pacific/Apia', sessionsTotal: 2 };
    // 07:00 on the 29th (−10 h), then 07:00 on the 31st (+14 h).
    expect(fromOf(apia)).toEqual(['2011-12-29T17:00:00Z', '2011-12-30T17:00:00Z']);
  });

  it('stops at the prescription’s end and cuts the last window there', () => {
    const windows = plannedWindows({ ...schedule, expiresAt: '2026-05-13T10:00:00Z' });
    expect(windows.map(({ windowTo }) => windowTo)).toEqual(['2026-05-12T20:00:00Z', '2026-05-13T10:00:00Z']);
    expect(fromOf({ expiresAt: '2026-05-13T05:00:00Z' })).toEqual(['2026-05-12T05:00:00Z']);
  });

  it('plans nothing by a schedule that cannot be read', () => {
    expect(fromOf({ zone: 'Nowhere/Land' })).toEqual([]);
    expect(fromOf({ startsOn: 'soon' })).toEqual([]);
    expect(fromOf({ hoursTo: '07:00' })).toEqual([]);
    expect(fromOf({ days: [] })).toEqual([]);
    expect(fromOf({ expiresAt: 'later' })).toEqual([]);
    expect(fromOf({ sessionsTotal: 0 })).toEqual([]);
  });

  it('plans each named day once in every zone, in order, inside its hours, over changes of the clocks', () => {
    const zones = [
      'Europe/London',
      'America/New_York',
      'Australia/Lord_Howe',
      'Asia/Kathmandu',
      'Pacific/Apia',
      'Africa/Casablanca',
    ];
    const some = fc.record({
      zone: fc.constantFrom(...zones),
      day: fc.integer({ min: 14_975, max: 24_000 }),
      days: fc.subarray([1, 2, 3, 4, 5, 6, 7], { minLength: 1 }),
      hoursFrom: fc.integer({ min: 3, max: 12 }).map((hour) => `${String(hour).padStart(2, '0')}:30`),
      hoursTo: fc.integer({ min: 13, max: 23 }).map((hour) => `${hour}:00`),
    });
    fc.assert(
      fc.property(some, ({ day, ...rest }) => {
        const startsOn = new Date(day * 86_400_000).toISOString().slice(0, 10);
        const windows = plannedWindows({ ...rest, startsOn, sessionsTotal: 12 });
        const opened = windows.map(({ windowFrom }) => localMoment(parseInstant(windowFrom) ?? Number.NaN, rest.zone));
        expect(windows).toHaveLength(12);
        expect(new Set(opened.map(({ date }) => date)).size).toBe(12);
        windows.forEach(({ windowFrom, windowTo }, index) => {
          const previous = windows[index - 1];
          if (previous !== undefined) expect(previous.windowTo <= windowFrom).toBe(true);
          expect(windowFrom < windowTo).toBe(true);
        });
        opened.forEach(({ date, time }) => {
          expect(rest.days).toContain(weekdayOf(date));
          expect(time).toBe(`${rest.hoursFrom}:00`);
        });
      }),
      { numRuns: 60 },
    );
  });
});

describe('windowAfter and windowOn', () => {
  it('moves a missed session to the next named day after the last window', () => {
    expect(windowAfter(schedule, '2026-05-18T05:00:00Z')).toMatchObject({ windowFrom: '2026-05-19T05:00:00Z' });
    expect(windowAfter(schedule, '2026-05-15T05:00:00Z')).toMatchObject({ windowFrom: '2026-05-18T05:00:00Z' });
    expect(windowAfter(schedule, '2026-05-01T05:00:00Z')).toMatchObject({ windowFrom: '2026-05-12T05:00:00Z' });
    expect(windowAfter({ ...schedule, expiresAt: '2026-05-18T20:00:00Z' }, '2026-05-18T05:00:00Z')).toBeNull();
    expect(windowAfter(schedule, 'then')).toBeNull();
  });

  it('gives the window of one day, named or not', () => {
    expect(windowOn('2026-05-16', schedule)).toEqual({
      windowFrom: '2026-05-16T05:00:00Z',
      windowTo: '2026-05-16T20:00:00Z',
    });
    expect(windowOn('2011-12-30', { ...schedule, zone: 'Pacific/Apia' })).toBeNull();
  });
});

describe('a window that closes', () => {
  const window = { windowFrom: '2026-05-12T05:00:00Z', windowTo: '2026-05-12T20:00:00Z' };

  it('is closed at its very end', () => {
    expect(windowClosed(window, '2026-05-12T19:59:59Z')).toBe(false);
    expect(windowClosed(window, '2026-05-12T20:00:00Z')).toBe(true);
    expect(windowClosed(window, 'now')).toBe(false);
    expect(windowClosed({ windowTo: 'then' }, '2026-05-12T20:00:00Z')).toBe(false);
  });

  it('is excused only if holds cover all of it', () => {
    const from = window.windowFrom;
    expect(missedOrExcused(window, [])).toBe('missed');
    expect(missedOrExcused(window, [{ from }])).toBe('excused');
    expect(missedOrExcused(window, [{ from, until: window.windowTo }])).toBe('excused');
    expect(missedOrExcused(window, [{ from, until: '2026-05-12T19:59:59Z' }])).toBe('missed');
    expect(missedOrExcused(window, [{ from: '2026-05-12T05:00:01Z' }])).toBe('missed');
    expect(missedOrExcused(window, [{ from: 'early' }])).toBe('missed');
    expect(missedOrExcused({ ...window, windowTo: 'then' }, [{ from }])).toBe('missed');
  });

  it('is excused by two holds that meet, and not by two with a gap between', () => {
    const first = { from: '2026-05-12T00:00:00Z', until: '2026-05-12T12:00:00Z' };
    expect(missedOrExcused(window, [{ from: '2026-05-12T12:00:00Z' }, first])).toBe('excused');
    expect(missedOrExcused(window, [first, { from: '2026-05-12T12:00:01Z' }])).toBe('missed');
  });
});
