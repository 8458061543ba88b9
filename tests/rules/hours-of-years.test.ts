// Local time over the hours of 2024 to 2035, in zones that change their clocks by an hour, by half an hour, around Ramadan or never. What is
// expected comes from the platform's own calendar, not from ours. A sample in `npm test`, every hour with RAMPWELL_FULL=1.

import { clearance, type ClearanceFacts } from '@/shared/rules/clearance';
import { openHoursAt } from '@/shared/rules/hours';
import { plannedWindows } from '@/shared/rules/schedule';
import { hourMilliseconds, minuteMilliseconds } from '@/shared/values/units';
import { isoOf, nextMidnight, startOfDay } from '@/shared/values/zone';
import { clearedFacts, withFacts } from '@/tests/support/clearance-facts';
import { patience, runs } from '@/tests/support/runs';

const zones = [
  'Europe/London',
  'America/New_York',
  'Australia/Lord_Howe',
  'Asia/Kathmandu',
  'Pacific/Apia',
  'Africa/Casablanca',
];
const first = Date.parse('2024-01-01T00:00:00Z');
const hoursInAll = (Date.parse('2036-01-01T00:00:00Z') - first) / hourMilliseconds;
const tries = Math.min(runs('F16'), hoursInAll);
/** Spread over all the years; with every hour asked, each once. */
const instants = Array.from(
  { length: tries },
  (_, index) => first + Math.floor((index * hoursInAll) / tries) * hourMilliseconds,
);

/** `2026-05-12 18:00` as the platform shows it. */
const platform = (zone: string) => {
  const format = new Intl.DateTimeFormat('sv-SE', { timeZone: zone, dateStyle: 'short', timeStyle: 'short' });
  return (instant: number) => {
    const [date = '', time = ''] = format.format(instant).split(' ');
    return { date, time };
  };
};

const past = clearedFacts.sessions?.[0];
const endedAt = (end: number) => ({ ...past, startedAt: isoOf(end - 21 * minuteMilliseconds), endedAt: isoOf(end) });
const anyHour = { hoursFrom: '00:00', hoursTo: '23:59' };
/** A person in a zone who may start at an instant, whatever the day. */
function personAt(instant: number, zone: string, changes: ClearanceFacts = {}): ClearanceFacts {
  const base = withFacts(clearedFacts, {
    participant: { zone, bornOn: '1984-03-02' },
    consent: { requiredFrom: '2020-01-01T00:00:00Z' },
    screening: { validUntil: '2040-01-01T00:00:00Z' },
    training: { validUntil: '2040-01-01T00:00:00Z' },
    prescription: { ...anyHour, expiresAt: '2040-01-01T00:00:00Z' },
    precheck: { answeredAt: isoOf(instant) },
    supplies: [],
    sessions: [],
  });
  return withFacts(base, changes);
}
const codesAt = (facts: ClearanceFacts, instant: number) =>
  clearance(withFacts(facts, { precheck: { answeredAt: isoOf(instant) } }), isoOf(instant)).reasons;

describe.each(zones)('%s', (zone) => {
  const shows = platform(zone);

  it(
    'is inside the hours exactly while its clock shows them, over midnight too, and through an hour that comes twice',
    () => {
      const wrong: string[] = [];
      for (const [hoursFrom, hoursTo] of [
        ['07:00', '22:00'],
        ['22:00', '02:00'],
        ['01:00', '03:00'],
      ] as const) {
        const isShown = (instant: number) => {
          const { time } = shows(instant);
          return hoursFrom < hoursTo ? time >= hoursFrom && time < hoursTo : time >= hoursFrom || time < hoursTo;
        };
        for (const instant of instants) {
          const isOpen = openHoursAt(instant, { hoursFrom, hoursTo, zone }) !== undefined;
          if (isOpen === isShown(instant)) continue;
          // Between the first and the last of a time that comes twice it stays open: within two hours of a change of the clocks.
          const isNearChange = [-2, 2].some((hours) => {
            const other = instant + hours * hourMilliseconds;
            const shown =
              Date.parse(`${shows(other).date}T${shows(other).time}Z`) -
              Date.parse(`${shows(instant).date}T${shows(instant).time}Z`);
            return shown !== hours * hourMilliseconds;
          });
          if (!(isOpen && isNearChange)) wrong.push(`${isoOf(instant)} ${hoursFrom}-${hoursTo}`);
        }
      }
      expect(wrong).toEqual([]);
    },
    patience,
  );

  it(
    'counts a gap in hours that pass, whatever the clocks do in them',
    () => {
      const wrong: string[] = [];
      for (const instant of instants) {
        const facts = personAt(instant, zone, {
          sessions: [endedAt(instant)],
          prescription: { minGapHours: 20, maxPerDay: 9 },
        });
        const open = instant + 20 * hourMilliseconds;
        const isShut = (at: number) => codesAt(facts, at).some(({ code }) => code === 'gap_too_short');
        if (!isShut(open - 1) || isShut(open)) wrong.push(isoOf(instant));
      }
      expect(wrong).toEqual([]);
    },
    patience,
  );

  it(
    'counts the sessions of a local day, which ends at the midnight that the clock shows',
    () => {
      const wrong: string[] = [];
      for (const instant of instants) {
        const ended = instant - 10 * minuteMilliseconds;
        const facts = personAt(instant, zone, { sessions: [endedAt(ended)], prescription: { minGapHours: 0 } });
        const started = shows(ended - 21 * minuteMilliseconds).date;
        const found = codesAt(facts, instant).find(({ code }) => code === 'day_count_reached');
        if ((found !== undefined) !== (started === shows(instant).date)) wrong.push(`${isoOf(instant)} counted wrong`);
        if (found === undefined) continue;
        const until = Date.parse(found.until ?? '');
        if (shows(until).date === started || shows(until - 1).date !== started)
          wrong.push(`${isoOf(instant)} ${found.until}`);
      }
      expect(wrong).toEqual([]);
    },
    patience,
  );

  it(
    'has days of as many hours as its clock goes through',
    () => {
      const lengths = new Set<number>();
      for (const instant of instants) {
        const { date } = shows(instant);
        const [from, to] = [startOfDay(date, zone), nextMidnight(instant, zone)];
        expect([shows(from).date, shows(from - 1).date < date, shows(to - 1).date, shows(to).date > date]).toEqual([
          date,
          true,
          date,
          true,
        ]);
        lengths.add((to - from) / hourMilliseconds);
      }
      const changing = zone === 'Australia/Lord_Howe' ? [23.5, 24.5] : [23, 25];
      expect([...lengths].filter((hours) => ![24, ...changing].includes(hours))).toEqual([]);
    },
    patience,
  );

  it('plans each session of the twelve years once, none in an hour that its clock leaves out', () => {
    const everyDay = { days: [1, 2, 3, 4, 5, 6, 7], hoursFrom: '02:00', hoursTo: '02:30', zone, sessionsTotal: 366 };
    for (let year = 2024; year <= 2035; year += 1) {
      const windows = plannedWindows({
        ...everyDay,
        startsOn: `${year}-01-01`,
        expiresAt: `${year + 1}-01-01T12:00:00Z`,
      });
      const days = windows.map(({ windowFrom }) => shows(Date.parse(windowFrom)));
      expect(new Set(days.map(({ date }) => date)).size).toBe(windows.length);
      // A window whose own time is left out would begin at another one.
      expect(days.filter(({ time }) => time < '02:00' || time >= '02:30')).toEqual([]);
      expect(windows.length).toBeGreaterThan(362);
    }
  });
});

it(
  'gives nobody an earlier start by travelling: the gap is the same in every zone, and a day counts where the person is',
  () => {
    const wrong: string[] = [];
    for (const [index, instant] of instants.entries()) {
      const [from, to] = [zones[index % zones.length] ?? '', zones[(index + 1 + (index % 5)) % zones.length] ?? ''];
      const sessions = [endedAt(instant - 3 * hourMilliseconds)];
      const at = (zone: string) =>
        codesAt(personAt(instant, zone, { sessions, prescription: { minGapHours: 20, maxPerDay: 1 } }), instant);
      const gapOf = (zone: string) => at(zone).find(({ code }) => code === 'gap_too_short')?.until;
      if (gapOf(from) === undefined || gapOf(from) !== gapOf(to)) wrong.push(`${isoOf(instant)} ${from} ${to}: gap`);
      const started = Date.parse(sessions[0]?.startedAt ?? '');
      const isSameDay = platform(to)(started).date === platform(to)(instant).date;
      if (at(to).some(({ code }) => code === 'day_count_reached') !== isSameDay)
        wrong.push(`${isoOf(instant)} ${to}: day`);
    }
    expect(wrong).toEqual([]);
  },
  patience,
);
