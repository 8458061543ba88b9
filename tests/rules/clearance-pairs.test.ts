// Each reason of clearance decides by itself, and none hides another: for every two that can hold of one person at one instant
// both are told. Pairs are made from the one table of cases; those that cannot be are named with what keeps them apart.

import { clearance } from '@/shared/rules/clearance';
import { reasonCodes, type ReasonCode } from '@/shared/values/codes';
import { cases, ended, yesterday, type Change } from '@/tests/support/clearance-cases';
import { clearedAt, clearedFacts, withFacts } from '@/tests/support/clearance-facts';

type Known = Exclude<ReasonCode, 'unknown_fact'>;
const codes = reasonCodes.filter((code) => code !== 'unknown_fact');

/** Cases that stand better beside others than those of the table: each with room for a second reason, itself alone still. */
const roomy: Partial<Record<Known, Change>> = {
  screening_incomplete: { screening: { isComplete: false } },
  training_missing: { training: { isSignedOff: false } },
  device_unassigned: { device: { isAssigned: false } },
};
const firesOf = (code: Known): Change => roomy[code] ?? cases[code].fires;

/** What keeps two reasons from holding at once, whoever the person is. */
const apart: readonly (readonly [because: string, first: readonly Known[], second: readonly Known[]])[] = [
  [
    'an adult signs for themselves, a minor does not',
    ['consent_missing', 'consent_outdated'],
    ['guardian_consent_missing', 'assent_missing'],
  ],
  ['a consent that was never signed has no version', ['consent_missing'], ['consent_outdated']],
  ['a screening that is not complete has no term yet', ['screening_incomplete'], ['screening_expired']],
  ['a training that was never signed off has no term', ['training_missing'], ['training_expired']],
  [
    'without a device there is nothing to recall or to charge',
    ['device_unassigned'],
    ['device_recalled', 'battery_low'],
  ],
  [
    'a pre-check that was not answered has no age, nobody who gave it and no outcome',
    ['precheck_missing'],
    ['precheck_expired', 'precheck_other_person', 'precheck_hold', 'helper_absent'],
  ],
];
const isApart = (a: Known, b: Known) =>
  apart.some(
    ([, first, second]) => (first.includes(a) && second.includes(b)) || (first.includes(b) && second.includes(a)),
  );

function isGroup(value: unknown): value is Record<string, unknown> {
  return typeof value === 'object' && value !== null && !Array.isArray(value);
}

/** Both changes at once: groups field by field, lists one after the other; undefined where both set one fact differently. */
function both(a: Change, b: Change): Change | undefined {
  let clash = false;
  const merge = (first: unknown, second: unknown): unknown => {
    if (first === undefined || second === undefined) return first ?? second;
    if (Array.isArray(first) && Array.isArray(second)) return [...first, ...second];
    if (isGroup(first) && isGroup(second)) {
      const keys = new Set([...Object.keys(first), ...Object.keys(second)]);
      return Object.fromEntries([...keys].map((key) => [key, merge(first[key], second[key])]));
    }
    if (first !== second) clash = true;
    return first;
  };
  const merged = merge(a, b);
  return clash || !isGroup(merged) ? undefined : merged;
}

const under18 = { bornOn: '2009-03-02' };
const today = ended('2026-05-12T08:00:00Z', '2026-05-12T08:21:00Z');
const ahead = '2026-05-12T16:00:01Z';
const open = { state: 'reserved', permitExpiresAt: '2026-05-10T16:00:00Z', chargeCoulomb: 3, minutes: 9 } as const;
/** Last session a week and a second ago, something missed since. */
const longAgo: Change = { sessions: [ended('2026-05-05T15:30:00Z', '2026-05-05T15:59:59Z')], missedSinceLast: 1 };

/** Pairs whose two cases of the table set one fact differently, or push each other over: facts of their own in which both hold. */
const together: readonly (readonly [Known, Known, Change])[] = [
  [
    'guardian_consent_missing',
    'assent_missing',
    { participant: under18, consent: { guardianVersion: 2, assentVersion: 0 }, precheck: { isHelperPresent: true } },
  ],
  [
    'guardian_consent_missing',
    'precheck_missing',
    { participant: under18, consent: { guardianVersion: 2, assentVersion: 3 }, precheck: undefined },
  ],
  [
    'assent_missing',
    'precheck_missing',
    { participant: under18, consent: { guardianVersion: 3, assentVersion: 0 }, precheck: undefined },
  ],
  [
    'guardian_consent_missing',
    'helper_absent',
    { participant: under18, consent: { guardianVersion: 2, assentVersion: 3 } },
  ],
  ['assent_missing', 'helper_absent', { participant: under18, consent: { guardianVersion: 3, assentVersion: 0 } }],
  ['outside_hours', 'day_count_reached', { sessions: [today], prescription: { hoursTo: '18:00', minGapHours: 4 } }],
  ['gap_too_short', 'day_count_reached', { sessions: [today] }],
  ['gap_too_short', 'diary_missing', { sessions: [yesterday('2026-05-11T20:00:01Z', { hasDiary: false })] }],
  [
    'day_count_reached',
    'diary_missing',
    { sessions: [{ ...today, hasDiary: false }], prescription: { minGapHours: 4 } },
  ],
  [
    'minutes_24h',
    'diary_missing',
    { sessions: [yesterday('2026-05-11T16:00:01Z', { minutes: 39.5, hasDiary: false })] },
  ],
  [
    'charge_24h',
    'diary_missing',
    { site: { maxCharge24hCoulomb: 4.91 }, sessions: [yesterday('2026-05-11T16:00:01Z', { hasDiary: false })] },
  ],
  ['charge_7d', 'session_open', { site: { maxCharge7dCoulomb: 4.91 }, sessions: [open] }],
  [
    'session_open',
    'recall_call_due',
    { sessions: [{ ...open, permitExpiresAt: '2026-05-01T16:00:00Z' }], missedSinceLast: 1 },
  ],
  [
    'diary_missing',
    'recall_call_due',
    { sessions: longAgo.sessions?.map((each) => ({ ...each, hasDiary: false })), missedSinceLast: 1 },
  ],
  ['precheck_missing', 'clock_bad', { precheck: undefined, recallCallAt: ahead }],
  ['precheck_expired', 'clock_bad', { precheck: { answeredAt: '2026-05-12T15:30:00Z' }, recallCallAt: ahead }],
  ['gap_too_short', 'recall_call_due', { ...longAgo, prescription: { minGapHours: 200 } }],
  ['day_count_reached', 'recall_call_due', { ...longAgo, prescription: { maxPerDay: 0 } }],
  ['minutes_24h', 'recall_call_due', { ...longAgo, prescription: { dose: { chargeCoulomb: 2.46, minutes: 61 } } }],
  ['week_count_reached', 'recall_call_due', { ...longAgo, prescription: { maxPer7Days: 0 } }],
  ['charge_24h', 'recall_call_due', { ...longAgo, site: { maxCharge24hCoulomb: 2 } }],
  ['charge_7d', 'recall_call_due', { ...longAgo, site: { maxCharge7dCoulomb: 2 } }],
];
const ownFacts = new Map(together.map(([a, b, change]) => [`${a} ${b}`, change]));

function codesOf({ now = clearedAt, ...changes }: Change): ReasonCode[] {
  return clearance(withFacts(clearedFacts, changes), now).reasons.map(({ code }) => code);
}

const pairs = codes.flatMap((a, index) => codes.slice(index + 1).map((b) => [a, b] as const));

const kept = pairs.filter(([a, b]) => isApart(a, b));
const meeting = pairs.filter(([a, b]) => !isApart(a, b));

describe('two reasons at once', () => {
  it('are all of them: 47 reasons, 1081 pairs, 13 of which cannot be', () => {
    expect([codes.length, pairs.length, kept.length, meeting.length]).toEqual([47, 1081, 13, 1068]);
    // Each row of a table is used, and none is for a pair that is said to be impossible.
    expect(together.filter(([a, b]) => !meeting.some((pair) => pair[0] === a && pair[1] === b))).toEqual([]);
  });

  it.each(meeting)('refuses with both %s and %s, in the order of the codes', (a, b) => {
    const change = ownFacts.get(`${a} ${b}`) ?? both(firesOf(a), firesOf(b));
    const found = change === undefined ? [] : codesOf(change);
    expect(found).toEqual(expect.arrayContaining([a, b]));
    expect(found).not.toContain('unknown_fact');
    expect(found.map((code) => reasonCodes.indexOf(code))).toEqual(
      found.map((code) => reasonCodes.indexOf(code)).sort((first, second) => first - second),
    );
  });

  it.each(kept)('never refuses with both %s and %s', (a, b) => {
    for (const change of [
      { ...firesOf(a), ...firesOf(b) },
      { ...firesOf(b), ...firesOf(a) },
      both(firesOf(a), firesOf(b)),
    ]) {
      const found = codesOf(change ?? firesOf(a));
      expect(found.includes(a) && found.includes(b)).toBe(false);
      // Keeping silent about one of them never lets the person start.
      expect(found).not.toEqual([]);
    }
  });
});
