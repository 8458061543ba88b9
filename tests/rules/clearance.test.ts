// Each reason of clearance: it fires, it just misses, and its fact is missing. A code without its three cases fails.

import { clearance, earliestStart, passesByTime, plannedCounts } from '@/shared/rules/clearance';
import { resolverOf } from '@/shared/rules/clearance/reason';
import { limitLayers, reasonCodes } from '@/shared/values/codes';
import { cases, ended, often, past, sponge, yesterday, type Change } from '@/tests/support/clearance-cases';
import { clearedAt, clearedFacts, withFacts } from '@/tests/support/clearance-facts';

function ask({ now = clearedAt, ...changes }: Change) {
  return clearance(withFacts(clearedFacts, changes), now);
}
const codesOf = (change: Change) => ask(change).reasons.map(({ code }) => code);

const table = reasonCodes.filter((code) => code !== 'unknown_fact').map((code) => [code, cases[code]] as const);

describe('clearance', () => {
  it('allows a person in whose way nothing stands', () => {
    expect(clearance(clearedFacts, clearedAt)).toEqual({ allowed: true, reasons: [] });
  });

  it.each(table)('refuses with %s, and with nothing else', (code, { fires }) => {
    expect(new Set(codesOf(fires))).toEqual(new Set([code]));
  });

  it.each(table)('allows when %s is just missed', (_code, { misses }) => {
    expect(ask(misses)).toEqual({ allowed: true, reasons: [] });
  });

  it.each(table)('refuses by name when the fact of %s is missing', (_code, { missing, fact }) => {
    const told = { code: 'unknown_fact', fact, resolvedBy: 'staff', source: 'own choice' };
    expect(ask(missing).reasons).toContainEqual(told);
  });

  it.each(table)('says who resolves %s', (code, { fires }) => {
    const found = ask(fires).reasons.find((each) => each.code === code);
    // A hold until tomorrow passes by time; the table holds what a hold needs that has passed.
    expect(found?.resolvedBy).toBe(code === 'precheck_hold' ? 'time' : resolverOf[code]);
  });

  it.each(table)('tells the source of %s, and of a limit its layer and the value that met it', (code, { fires }) => {
    const found = ask(fires).reasons.find((each) => each.code === code);
    expect(found?.source).not.toBe('');
    // What a limit stops says by how much and whose the limit is; a count of what was missed has none.
    if (found?.limit !== undefined) {
      expect(found.value).toEqual(expect.any(Number));
      expect(limitLayers).toContain(found.layer);
    }
  });

  it('lists reasons in the order of the codes, whatever found them', () => {
    const found = codesOf({ device: { isRecalled: true }, account: { isActive: false }, missedSinceLast: undefined });
    expect(found).toEqual(['account_inactive', 'device_recalled', 'unknown_fact']);
  });

  it('reads a fact that cannot be meant as unknown', () => {
    const facts = (change: Change) => ask(change).reasons.map(({ fact }) => fact);
    expect(facts({ device: { batteryPercent: Number.NaN } })).toEqual(['device.battery_pct']);
    expect(facts({ sessions: [{ ...past, chargeCoulomb: -2 }] })).toEqual(['sessions.0.charge_C']);
    expect(facts({ participant: { zone: 'Mars/Olympus' } })).toEqual(['participant.zone']);
    expect(facts({ participant: { zone: '+02:00' } })).toEqual(['participant.zone']);
    expect(facts({ participant: { bornOn: '1984-02-30' } })).toEqual(['participant.born']);
    expect(facts({ prescription: { hoursFrom: '7 am' } })).toEqual(['prescription.hours_from']);
    expect(facts({ screening: { validUntil: '2026-02-30T00:00:00Z' } })).toEqual(['screening.valid_until']);
    expect(facts({ prescription: { tier: 'refuse' } })).toEqual(['prescription.tier']);
    expect(facts({ recallCallAt: 'never' })).toEqual(['recall_call_at']);
    expect(facts({ site: { maxMinutes24h: Number.NaN } })).toEqual(['site.max_minutes_24h']);
    expect(facts({ moodCheck: { dueAt: 'soon' } })).toEqual(['mood_check.due_at']);
  });

  it('asks nothing more of a prescription that does not exist', () => {
    expect(ask({ prescription: { status: 'none', dose: undefined, hoursFrom: undefined } }).reasons).toEqual([
      { code: 'prescription_unsigned', resolvedBy: 'clinician', source: 'common practice' },
    ]);
    const without = { ...clearedFacts, prescription: { status: 'none' }, site: undefined } as const;
    expect(clearance(without, clearedAt).reasons.map(({ code }) => code)).toEqual(['prescription_unsigned']);
  });

  it('names each fact that is missing once, the highest missing step of its path only', () => {
    const facts = { ...clearedFacts, prescription: undefined, site: undefined, device: undefined };
    expect(clearance(facts, clearedAt).reasons.map(({ fact }) => fact)).toEqual(['prescription', 'site', 'device']);
    expect(clearance({}, clearedAt).reasons.map(({ fact }) => fact)).not.toContain('prescription.min_gap_h');
  });

  it('names both when a screening is not complete and excludes already', () => {
    expect(codesOf({ screening: { isComplete: false, outcome: 'excluded' } })).toEqual([
      'screening_incomplete',
      'screening_excluded',
    ]);
  });

  it('holds the ceiling of 60 min although a site has typed more', () => {
    const sessions = [yesterday('2026-05-11T20:00:00Z', { minutes: 40 })];
    const [found] = ask({ site: { maxMinutes24h: 90 }, sessions }).reasons;
    expect(found).toMatchObject({ code: 'minutes_24h', layer: 'ceiling', limit: 60, value: 61 });
    const [tighter] = ask({ site: { maxMinutes24h: 50 }, sessions }).reasons;
    expect(tighter).toMatchObject({ code: 'minutes_24h', layer: 'site', limit: 50 });
    expect(ask({ site: { maxMinutes24h: undefined } }).allowed).toBe(true);
  });

  it('gives no time when the planned dose alone is above the limit', () => {
    const [found] = ask({ site: { maxCharge24hCoulomb: 2 } }).reasons;
    expect(found).toMatchObject({ code: 'charge_24h', resolvedBy: 'clinician' });
    expect(found?.until).toBeUndefined();
    expect(ask({ prescription: { maxPer7Days: 0 } }).reasons[0]?.until).toBeUndefined();
  });

  it('counts a running session whole, with its planned end', () => {
    const running = { state: 'running', startedAt: '2026-05-12T15:50:00Z', chargeCoulomb: 2.46, minutes: 21 } as const;
    expect(ask({ sessions: [running] }).reasons.map(({ code, until }) => [code, until])).toEqual([
      ['gap_too_short', '2026-05-13T12:11:00Z'],
      ['day_count_reached', '2026-05-12T22:00:00Z'],
      ['session_open', undefined],
    ]);
  });

  it('does not call a permit that still lives an open session, but counts its dose', () => {
    const reserved = {
      state: 'reserved',
      permitExpiresAt: '2026-05-12T16:20:00Z',
      chargeCoulomb: 5,
      minutes: 21,
    } as const;
    const found = codesOf({ sessions: [reserved], prescription: often });
    expect(found).not.toContain('session_open');
    expect(found).toEqual(expect.arrayContaining(['gap_too_short', 'charge_24h']));
    expect(codesOf({ sessions: [{ ...reserved, startedAt: '2026-05-12T15:55:00Z' }] })).toContain('session_open');
  });

  it('takes the newest session whatever the order of the list', () => {
    const older = ended('2026-05-10T15:30:00Z', '2026-05-10T15:51:00Z', { hasDiary: false });
    expect(codesOf({ sessions: [{ ...past }, older] })).toEqual([]);
    expect(codesOf({ sessions: [older, { ...past, hasDiary: false }] })).toEqual(['diary_missing']);
  });

  it('misses the diary of one of two sessions that ended at one instant, whichever is listed first', () => {
    const [written, missing] = [{ ...past }, { ...past, hasDiary: false }];
    expect(codesOf({ sessions: [written, missing] })).toEqual(['diary_missing']);
    expect(codesOf({ sessions: [missing, written] })).toEqual(['diary_missing']);
  });

  it('judges nothing by a history of which one end is not known', () => {
    const sessions = [{ ...past, endedAt: undefined }, yesterday('2026-05-11T20:00:01Z')];
    expect(ask({ sessions }).reasons.map(({ fact }) => fact)).toEqual(['sessions.0.ended_at']);
  });

  it('lists each open lockout by itself with its code', () => {
    const lockouts = [
      { level: 'review', code: 'headache_high' },
      { level: 'review', code: 'pain_high' },
    ] as const;
    expect(ask({ lockouts }).reasons.map(({ subject }) => subject)).toEqual(['headache_high', 'pain_high']);
  });

  it('lists a worn sponge once, and leaves a supply without a count of uses alone', () => {
    const supplies = [
      { ...sponge, uses: 12 },
      { ...sponge, uses: 11 },
      { ...sponge, kind: 'saline', uses: 99, maxUses: null },
    ];
    expect(ask({ supplies }).reasons).toEqual([
      {
        ...{ code: 'supply_used_up', resolvedBy: 'coordinator', subject: 'sponge' },
        ...{ value: 12, limit: 10, layer: 'default', source: 'guidance R56' },
      },
    ]);
  });

  it('opens no hours that close when they open', () => {
    const [found] = ask({ prescription: { hoursFrom: '18:00', hoursTo: '18:00' } }).reasons;
    expect(found).toMatchObject({ code: 'outside_hours', until: undefined });
  });

  it('says that a clinician must look at a pre-check that ended in a review', () => {
    expect(ask({ precheck: { outcome: 'hold_review' } }).reasons).toEqual([
      { code: 'precheck_hold', resolvedBy: 'clinician', subject: 'hold_review', source: 'own choice' },
    ]);
  });

  it('wants a fresh pre-check once a hold until tomorrow is over', () => {
    const change = { now: '2026-05-13T16:00:00Z', precheck: { outcome: 'hold_tomorrow' } } as const;
    const found = ask(change).reasons.find(({ code }) => code === 'precheck_hold');
    expect(found).toMatchObject({ resolvedBy: 'participant', until: undefined });
  });

  it('gives no end of a hold whose local midnight is not known', () => {
    const found = ask({ participant: { zone: undefined }, precheck: { outcome: 'hold_tomorrow' } }).reasons;
    expect(found.find(({ code }) => code === 'precheck_hold')?.until).toBeUndefined();
  });

  it('calls the clock bad for every kind of fact from the future', () => {
    const ahead = '2026-05-12T16:00:01Z';
    expect(codesOf({ recallCallAt: ahead })).toContain('clock_bad');
    expect(codesOf({ supplies: [{ ...sponge, openedAt: ahead }] })).toContain('clock_bad');
    expect(codesOf({ sessions: [{ ...past, endedAt: ahead }] })).toContain('clock_bad');
    expect(codesOf({ livePermits: [{ id: 'k', issuedAt: ahead, expiresAt: ahead }] })).toContain('clock_bad');
    expect(codesOf({ sessions: [{ state: 'void', startedAt: ahead }] })).not.toContain('clock_bad');
  });

  it('does not take a call from the future, or from before the last session, for a call', () => {
    const long = { sessions: [ended('2026-05-02T15:00:00Z', '2026-05-02T15:21:00Z')], missedSinceLast: 1 };
    expect(codesOf({ ...long, recallCallAt: '2026-05-12T16:00:01Z' })).toContain('recall_call_due');
    expect(codesOf({ ...long, recallCallAt: '2026-05-02T15:21:00Z' })).toContain('recall_call_due');
    expect(codesOf({ ...long, recallCallAt: '2026-05-02T15:21:01Z' })).not.toContain('recall_call_due');
  });
});

describe('earliestStart', () => {
  it('is the latest end of the reasons that pass', () => {
    const { reasons } = ask({
      sessions: [ended('2026-05-12T08:00:00Z', '2026-05-12T08:21:00Z')],
      precheck: undefined,
    });
    expect(earliestStart(reasons)).toBe('2026-05-13T04:21:00Z');
    expect(passesByTime(reasons)).toBe(true);
  });

  it('is null where nothing passes by itself', () => {
    const { reasons } = ask({ device: { isRecalled: true } });
    expect(earliestStart(reasons)).toBeNull();
    expect(passesByTime(reasons)).toBe(false);
  });
});

describe('plannedCounts', () => {
  it('counts what stands beside the limits', () => {
    expect(plannedCounts(clearedFacts, '2026-05-11T20:00:00Z')).toEqual({
      sessionsToday: 1,
      sessionsLast7Days: 1,
      sessionsDone: 4,
      sessionsTotal: 20,
      charge24hCoulomb: 2.46,
      charge7dCoulomb: 2.46,
      minutes24h: 21,
    });
  });

  it('counts nothing that is not known', () => {
    expect(plannedCounts({}, clearedAt)).toEqual({});
    expect(plannedCounts(clearedFacts, 'now')).toEqual({});
    const { sessionsToday } = plannedCounts(withFacts(clearedFacts, { participant: { zone: undefined } }), clearedAt);
    expect(sessionsToday).toBeUndefined();
  });
});
