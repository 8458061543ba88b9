// Schedules that cannot be lived, montages that name no place, and the windows that a signed schedule plans.

import fc from 'fast-check';
import {
  montageFindings,
  moveTo,
  scheduleFindings,
  windowsToPlan,
  type PrescribedSchedule,
  type ScheduleContext,
} from '@/shared/rules/prescription-schedule';
import { isPosition, positions } from '@/shared/values/positions';

/** A Tuesday, 10:00 in London. */
const now = '2026-05-12T09:00:00.000Z';
const zone = 'Europe/London';

const weekdays: PrescribedSchedule = {
  startsOn: '2026-05-13',
  days: [1, 2, 3, 4, 5],
  hoursFrom: '07:00',
  hoursTo: '22:00',
  sessionsTotal: 20,
  minGapHours: 20,
  maxPerDay: 1,
  maxPer7Days: 5,
  expiresOn: '2026-06-30',
};
const context: ScheduleContext = { zone, sessionMinutes: 21, takenDays: [], mayHaveBegun: false };

function codesOf(change: Partial<PrescribedSchedule>, changed: Partial<ScheduleContext> = {}): string[] {
  return scheduleFindings({ ...weekdays, ...change }, { ...context, ...changed }, now).map(
    ({ path, code }) => `${path} ${code}`,
  );
}

describe('a schedule', () => {
  it('stands when nothing in it contradicts anything', () => {
    expect(codesOf({})).toEqual([]);
  });

  it('needs hours that are not empty', () => {
    expect(codesOf({ hoursFrom: '08:00', hoursTo: '08:00' })).toEqual(['schedule.hoursTo hours_empty']);
  });

  it('needs hours in which one session fits, up to the minute', () => {
    expect(codesOf({ hoursFrom: '08:00', hoursTo: '08:21' })).toEqual([]);
    expect(codesOf({ hoursFrom: '08:00', hoursTo: '08:20' })).toEqual(['schedule.hoursTo hours_too_short']);
  });

  it('may run over midnight', () => {
    expect(codesOf({ hoursFrom: '21:00', hoursTo: '01:00' })).toEqual([]);
  });

  it('names each weekday once', () => {
    expect(codesOf({ days: [1, 2, 2], expiresOn: '2026-12-30' })).toEqual(['schedule.days days_twice']);
  });

  it('starts today at the earliest, by the calendar of the participant', () => {
    expect(codesOf({ startsOn: '2026-05-12' })).toEqual([]);
    expect(codesOf({ startsOn: '2026-05-11' })).toEqual(['schedule.startsOn starts_in_past']);
    expect(codesOf({ startsOn: '2026-05-12' }, { zone: 'Pacific/Kiritimati' })).toEqual([]);
    const evening = '2026-05-12T12:00:00.000Z';
    const far = scheduleFindings(
      { ...weekdays, startsOn: '2026-05-12' },
      { ...context, zone: 'Pacific/Kiritimati' },
      evening,
    );
    expect(far.map(({ code }) => code)).toEqual(['starts_in_past']);
  });

  it('may have begun while it waited for its signature', () => {
    expect(codesOf({ startsOn: '2026-05-11' }, { mayHaveBegun: true })).toEqual([]);
  });

  it('expires on its first day or later, and within a year', () => {
    expect(codesOf({ sessionsTotal: 1, expiresOn: '2026-05-13' })).toEqual([]);
    expect(codesOf({ expiresOn: '2026-05-12' })).toEqual(['schedule.expiresOn expires_before_start']);
    expect(codesOf({ expiresOn: '2027-05-13' })).toEqual([]);
    expect(codesOf({ expiresOn: '2027-05-14' })).toEqual(['schedule.expiresOn expires_too_late']);
  });

  it('has as many windows before its expiry as sessions', () => {
    // 13 May to 9 June: 20 weekdays.
    expect(codesOf({ expiresOn: '2026-06-09' })).toEqual([]);
    const [short] = scheduleFindings({ ...weekdays, expiresOn: '2026-06-08' }, context, now);
    expect(short).toEqual({ path: 'schedule.expiresOn', code: 'too_few_windows', facts: { windows: 19, needed: 20 } });
  });

  it('counts sessions of earlier versions, and has at least one left', () => {
    const takenDays = ['2026-05-04', '2026-05-05', '2026-05-06'];
    expect(codesOf({ sessionsTotal: 4 }, { takenDays })).toEqual([]);
    expect(codesOf({ sessionsTotal: 3 }, { takenDays })).toEqual(['schedule.sessionsTotal count_already_done']);
  });

  it('has no longer gap than its days leave', () => {
    expect(codesOf({ minGapHours: 24 })).toEqual([]);
    expect(codesOf({ minGapHours: 24.5 })).toEqual(['schedule.minGapHours gap_longer_than_days']);
    expect(codesOf({ days: [1, 3, 5], minGapHours: 48, expiresOn: '2026-07-31' })).toEqual([]);
    expect(codesOf({ days: [7, 1], minGapHours: 25, expiresOn: '2026-12-30' })).toEqual([
      'schedule.minGapHours gap_longer_than_days',
    ]);
    expect(codesOf({ days: [3], minGapHours: 168, sessionsTotal: 5 })).toEqual([]);
  });

  it('has no more sessions a day than its hours and gap have room for', () => {
    expect(codesOf({ maxPerDay: 2, minGapHours: 6 })).toEqual([]);
    expect(codesOf({ maxPerDay: 2, minGapHours: 20 })).toEqual(['schedule.maxPerDay per_day_too_many']);
  });

  it('allows as many sessions in seven days as it names days', () => {
    expect(codesOf({ maxPer7Days: 4 })).toEqual(['schedule.maxPer7Days per_week_too_few']);
  });

  it('is refused where the zone is not known', () => {
    expect(codesOf({}, { zone: 'Nowhere/Atall' })).toEqual(['schedule.startsOn unknown_zone']);
  });

  it('plans exactly what it lacks whenever it is not refused', () => {
    const schedules = fc.record({
      days: fc.uniqueArray(fc.integer({ min: 1, max: 7 }), { minLength: 1 }),
      sessionsTotal: fc.integer({ min: 1, max: 15 }),
      startsIn: fc.integer({ min: 12, max: 28 }),
      hoursFrom: fc.constantFrom('00:00', '01:30', '07:00', '21:00'),
      hoursTo: fc.constantFrom('02:00', '09:00', '22:00', '23:59'),
      takenDays: fc.uniqueArray(fc.constantFrom('2026-05-04', '2026-05-05', '2026-05-13', '2026-05-14')),
    });
    fc.assert(
      fc.property(schedules, ({ days, sessionsTotal, startsIn, hoursFrom, hoursTo, takenDays }) => {
        const schedule = {
          ...weekdays,
          days,
          sessionsTotal,
          hoursFrom,
          hoursTo,
          startsOn: `2026-05-${startsIn}`,
          maxPer7Days: 7,
          expiresOn: '2026-10-31',
        };
        const findings = scheduleFindings(schedule, { ...context, takenDays }, now);
        if (findings.length > 0) return;
        expect(windowsToPlan(schedule, { zone, takenDays }, now)).toHaveLength(sessionsTotal - takenDays.length);
      }),
      { numRuns: 30 },
    );
  });
});

describe('the windows to plan', () => {
  const begun = { ...weekdays, startsOn: '2026-05-04', sessionsTotal: 10 };

  it('leave out a day that has a session already, also today', () => {
    const takenDays = ['2026-05-04', '2026-05-05', '2026-05-12'];
    const windows = windowsToPlan(begun, { zone, takenDays }, now);
    expect(windows).toHaveLength(7);
    expect(windows[0]?.windowFrom).toBe('2026-05-13T06:00:00Z');
  });

  it('begin with the window that is open now', () => {
    const [first] = windowsToPlan(begun, { zone, takenDays: [] }, now);
    expect(first).toMatchObject({ windowFrom: '2026-05-12T06:00:00Z', windowTo: '2026-05-12T21:00:00Z' });
  });

  it('leave out a window that ends this instant', () => {
    const [first] = windowsToPlan(begun, { zone, takenDays: [] }, '2026-05-12T21:00:00.000Z');
    expect(first?.windowFrom).toBe('2026-05-13T06:00:00Z');
  });

  it('count the rest of last night where the hours run over midnight', () => {
    const night = { ...begun, hoursFrom: '21:00', hoursTo: '01:00' };
    const [first] = windowsToPlan(night, { zone, takenDays: [] }, '2026-05-12T23:30:00.000Z');
    expect(first?.windowFrom).toBe('2026-05-12T20:00:00Z');
  });
});

describe('a montage', () => {
  const anode = { position: 'F3', polarity: 'anode' };
  const cathode = { position: 'Fp2', polarity: 'cathode' };
  const codes = (electrodes: { position: string; polarity: string }[], intensityMilliamp = 2) =>
    montageFindings({ intensityMilliamp, electrodes }).map(({ path, code }) => `${path} ${code}`);

  it('stands with an anode and a cathode on two places of the 10-10 system', () => {
    expect(codes([anode, cathode])).toEqual([]);
  });

  it('is refused on a place that the 10-10 system does not have', () => {
    expect(codes([{ ...anode, position: 'F11' }, cathode])).toEqual(['dose.electrodes.0.position position_unknown']);
    expect(codes([anode, { ...cathode, position: 'FP2' }])).toEqual(['dose.electrodes.1.position position_unknown']);
  });

  it('is refused with both electrodes on one place', () => {
    expect(codes([anode, { ...cathode, position: 'F3' }])).toEqual(['dose.electrodes.1.position position_twice']);
  });

  it('is refused with one polarity alone', () => {
    expect(codes([anode, { ...cathode, polarity: 'anode' }])).toEqual(['dose.electrodes.1.polarity polarity_missing']);
  });

  it('is refused without current', () => {
    expect(codes([anode, cathode], 0)).toEqual(['dose.intensityMilliamp nothing_to_deliver']);
    expect(codes([anode, cathode], Number.NaN)).toEqual(['dose.intensityMilliamp nothing_to_deliver']);
  });

  it('has 61 places to choose from, none twice', () => {
    expect(new Set(positions).size).toBe(61);
    expect(isPosition('Cz')).toBe(true);
    expect(isPosition('cz')).toBe(false);
  });
});

describe('a session that is moved', () => {
  const facts = { zone, takenDays: ['2026-05-14'], sessionMinutes: 21 };

  it('gets the hours of the prescription on its new day, named weekday or not', () => {
    expect(moveTo('2026-05-16', weekdays, facts, now)).toEqual({
      allowed: true,
      windowFrom: '2026-05-16T06:00:00Z',
      windowTo: '2026-05-16T21:00:00Z',
    });
  });

  it('stays where it is when the new day has a session', () => {
    expect(moveTo('2026-05-14', weekdays, facts, now)).toEqual({ allowed: false, code: 'day_taken' });
  });

  it('stays inside the prescription, its last day included', () => {
    expect(moveTo('2026-06-30', weekdays, facts, now).allowed).toBe(true);
    expect(moveTo('2026-07-01', weekdays, facts, now)).toEqual({ allowed: false, code: 'outside_prescription' });
    expect(moveTo('2026-05-12', weekdays, facts, now)).toEqual({ allowed: false, code: 'outside_prescription' });
  });

  it('moves to today only while a session still fits', () => {
    const today = { ...weekdays, startsOn: '2026-05-12' };
    expect(moveTo('2026-05-12', today, facts, '2026-05-12T20:39:00.000Z').allowed).toBe(true);
    expect(moveTo('2026-05-12', today, facts, '2026-05-12T20:39:01.000Z').allowed).toBe(false);
  });

  it('is not moved past the end of the last day by hours that cross midnight', () => {
    const night = { ...weekdays, hoursFrom: '21:00', hoursTo: '01:00' };
    expect(moveTo('2026-06-30', night, facts, now)).toMatchObject({ windowTo: '2026-06-30T23:00:00Z' });
  });
});
