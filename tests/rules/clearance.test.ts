// Each reason of clearance: it fires, it just misses, and its fact is missing. A code without its three cases fails.

import { clearance, earliestStart, passesByTime, plannedCounts, type ClearanceFacts } from '@/shared/rules/clearance';
import { resolverOf } from '@/shared/rules/clearance/reason';
import { reasonCodes, type ReasonCode } from '@/shared/values/codes';
import { clearedAt, clearedFacts, withFacts } from '@/tests/support/clearance-facts';

type Change = ClearanceFacts & { readonly now?: string };
type Cases = {
  readonly fires: Change;
  /** The same in every other respect, one step before the limit. */
  readonly misses: Change;
  readonly missing: Change;
  readonly fact: string;
};

const past = clearedFacts.sessions?.[0];
const ended = (startedAt: string, endedAt: string, more: object = {}) => ({ ...past, startedAt, endedAt, ...more });
const yesterday = (endedAt: string, more: object = {}) => ended('2026-05-11T09:00:00Z', endedAt, more);
const sponge = clearedFacts.supplies?.[0];
const minor = { participant: { bornOn: '2009-03-02' }, precheck: { isHelperPresent: true } };
const often = { maxPerDay: 3, minGapHours: 4, maxPer7Days: 20 };
const noHours = { hoursFrom: '00:00', hoursTo: '23:59' };

const cases: Readonly<Record<Exclude<ReasonCode, 'unknown_fact'>, Cases>> = {
  account_inactive: {
    fires: { account: { isActive: false } },
    misses: { account: { isActive: true } },
    missing: { account: { isActive: undefined } },
    fact: 'account.active',
  },
  consent_withdrawn: {
    fires: { consent: { isWithdrawn: true } },
    misses: { consent: { isWithdrawn: false } },
    missing: { consent: { isWithdrawn: undefined } },
    fact: 'consent.withdrawn',
  },
  consent_missing: {
    fires: { consent: { signedVersion: 0 } },
    misses: { consent: { signedVersion: 1, requiredVersion: 1 } },
    missing: { consent: { signedVersion: undefined } },
    fact: 'consent.signed_version',
  },
  consent_outdated: {
    fires: { consent: { signedVersion: 2, requiredFrom: clearedAt } },
    misses: { consent: { signedVersion: 2, requiredFrom: '2026-05-12T16:00:01Z' } },
    missing: { consent: { requiredFrom: undefined } },
    fact: 'consent.required_from',
  },
  guardian_consent_missing: {
    fires: { ...minor, consent: { guardianVersion: 2, assentVersion: 3 } },
    misses: { ...minor, consent: { guardianVersion: 3, assentVersion: 3 } },
    missing: { ...minor, consent: { assentVersion: 3 } },
    fact: 'consent.guardian_version',
  },
  assent_missing: {
    fires: { ...minor, consent: { guardianVersion: 3, assentVersion: 0 } },
    misses: { ...minor, consent: { guardianVersion: 3, assentVersion: 3 } },
    missing: { ...minor, consent: { guardianVersion: 3 } },
    fact: 'consent.assent_version',
  },
  screening_incomplete: {
    fires: { screening: { isComplete: false, outcome: undefined, validUntil: undefined } },
    misses: { screening: { isComplete: true } },
    missing: { screening: { isComplete: undefined } },
    fact: 'screening.complete',
  },
  screening_excluded: {
    fires: { screening: { outcome: 'excluded' } },
    misses: { screening: { outcome: 'clear' } },
    missing: { screening: { outcome: undefined } },
    fact: 'screening.outcome',
  },
  screening_expired: {
    fires: { screening: { validUntil: clearedAt } },
    misses: { screening: { validUntil: '2026-05-12T16:00:01Z' } },
    missing: { screening: { validUntil: undefined } },
    fact: 'screening.valid_until',
  },
  training_missing: {
    fires: { training: { isSignedOff: false, validUntil: undefined } },
    misses: { training: { isSignedOff: true } },
    missing: { training: { isSignedOff: undefined } },
    fact: 'training.signed_off',
  },
  training_expired: {
    fires: { training: { validUntil: clearedAt } },
    misses: { training: { validUntil: '2026-05-12T16:00:01Z' } },
    missing: { training: { validUntil: undefined } },
    fact: 'training.valid_until',
  },
  supervision_due: {
    fires: { supervision: { requiredSessions: 5, watchedSessions: 4 } },
    misses: { supervision: { requiredSessions: 5, watchedSessions: 5 } },
    missing: { supervision: { watchedSessions: undefined } },
    fact: 'supervision.watched',
  },
  mood_check_due: {
    fires: { moodCheck: { dueAt: clearedAt } },
    misses: { moodCheck: { dueAt: '2026-05-12T16:00:01Z' } },
    missing: { moodCheck: { dueAt: undefined } },
    fact: 'mood_check.due_at',
  },
  prescription_unsigned: {
    fires: { prescription: { status: 'draft' } },
    misses: { prescription: { status: 'signed' } },
    missing: { prescription: { status: undefined } },
    fact: 'prescription.status',
  },
  second_signature_missing: {
    fires: { prescription: { tier: 'second_signature' } },
    misses: { prescription: { tier: 'second_signature', hasSecondSignature: true } },
    missing: { prescription: { tier: undefined } },
    fact: 'prescription.tier',
  },
  prescription_paused: {
    fires: { prescription: { isPaused: true } },
    misses: { prescription: { isPaused: false } },
    missing: { prescription: { isPaused: undefined } },
    fact: 'prescription.paused',
  },
  prescription_expired: {
    fires: { prescription: { expiresAt: clearedAt } },
    misses: { prescription: { expiresAt: '2026-05-12T16:00:01Z' } },
    missing: { prescription: { expiresAt: undefined } },
    fact: 'prescription.expires_at',
  },
  prescription_unacknowledged: {
    fires: { prescription: { version: 3 } },
    misses: { prescription: { version: 3, acknowledgedVersion: 3 } },
    missing: { prescription: { acknowledgedVersion: undefined } },
    fact: 'prescription.acknowledged_version',
  },
  lockout_safety: {
    fires: { lockouts: [{ level: 'safety', code: 'faint' }] },
    misses: { lockouts: [{ level: 'flag', code: 'adherence_low' }] },
    missing: { lockouts: [{ code: 'faint' }] },
    fact: 'lockouts.0.level',
  },
  lockout_review: {
    fires: { lockouts: [{ level: 'review', code: 'headache_high' }] },
    misses: { lockouts: [] },
    missing: { lockouts: undefined },
    fact: 'lockouts',
  },
  lockout_device: {
    fires: { lockouts: [{ level: 'device', code: 'lost_contact_twice' }] },
    misses: { lockouts: [{ level: 'flag', code: 'missed_three' }] },
    missing: { lockouts: [{ level: undefined, code: 'lost_contact_twice' }] },
    fact: 'lockouts.0.level',
  },
  lockout_hold: {
    fires: { lockouts: [{ level: 'hold', code: 'precheck_fever', until: '2026-05-12T16:00:01Z' }] },
    misses: {
      lockouts: [{ level: 'hold', code: 'precheck_fever', until: '2026-05-12T15:55:00Z' }],
      precheck: { answeredAt: '2026-05-12T15:55:00Z' },
    },
    missing: { lockouts: [{ level: 'hold', code: 'precheck_fever' }] },
    fact: 'lockouts.0.until',
  },
  outside_hours: {
    fires: { prescription: { hoursTo: '18:00' } },
    misses: { prescription: { hoursTo: '18:01' } },
    missing: { prescription: { hoursTo: undefined } },
    fact: 'prescription.hours_to',
  },
  gap_too_short: {
    fires: { sessions: [yesterday('2026-05-11T20:00:01Z')] },
    misses: { sessions: [yesterday('2026-05-11T20:00:00Z')] },
    missing: { prescription: { minGapHours: undefined } },
    fact: 'prescription.min_gap_h',
  },
  day_count_reached: {
    // 22:00 UTC is midnight in Berlin.
    fires: {
      sessions: [ended('2026-05-11T22:00:00Z', '2026-05-11T22:21:00Z')],
      prescription: { ...noHours, minGapHours: 4 },
    },
    misses: {
      sessions: [ended('2026-05-11T21:59:59Z', '2026-05-11T22:21:00Z')],
      prescription: { ...noHours, minGapHours: 4 },
    },
    missing: { prescription: { maxPerDay: undefined } },
    fact: 'prescription.max_per_day',
  },
  minutes_24h: {
    fires: { sessions: [yesterday('2026-05-11T16:00:01Z', { minutes: 39.5 })] },
    misses: { sessions: [yesterday('2026-05-11T16:00:00Z', { minutes: 39.5 })] },
    missing: { sessions: [{ ...past, minutes: undefined }] },
    fact: 'sessions.0.minutes',
  },
  week_count_reached: {
    fires: { prescription: { maxPer7Days: 1 } },
    misses: { prescription: { maxPer7Days: 2 } },
    missing: { prescription: { maxPer7Days: undefined } },
    fact: 'prescription.max_per_7_days',
  },
  charge_24h: {
    fires: { site: { maxCharge24hCoulomb: 4.91 }, sessions: [yesterday('2026-05-11T16:00:01Z')] },
    misses: { site: { maxCharge24hCoulomb: 4.92 }, sessions: [yesterday('2026-05-11T16:00:01Z')] },
    missing: { site: { maxCharge24hCoulomb: undefined } },
    fact: 'site.max_24h_C',
  },
  charge_7d: {
    fires: { site: { maxCharge7dCoulomb: 4.91 } },
    misses: { site: { maxCharge7dCoulomb: 4.92 } },
    missing: { site: { maxCharge7dCoulomb: undefined } },
    fact: 'site.max_7d_C',
  },
  course_complete: {
    fires: { prescription: { sessionsDone: 20 } },
    misses: { prescription: { sessionsDone: 19 } },
    missing: { prescription: { sessionsDone: undefined } },
    fact: 'prescription.sessions_done',
  },
  session_open: {
    fires: { sessions: [{ state: 'reserved', permitExpiresAt: '2026-05-10T16:00:00Z', chargeCoulomb: 1, minutes: 9 }] },
    misses: { sessions: [{ state: 'void' }] },
    missing: { sessions: [{ state: 'reserved', chargeCoulomb: 1, minutes: 9 }] },
    fact: 'sessions.0.permit_expires_at',
  },
  diary_missing: {
    fires: { sessions: [{ ...past, hasDiary: false }] },
    misses: { sessions: [ended('2026-05-10T15:30:00Z', '2026-05-10T15:51:00Z', { hasDiary: false }), { ...past }] },
    missing: { sessions: [{ ...past, hasDiary: undefined }] },
    fact: 'sessions.0.diary',
  },
  recall_call_due: {
    fires: { sessions: [ended('2026-05-05T15:30:00Z', '2026-05-05T15:59:59Z')], missedSinceLast: 1 },
    misses: { sessions: [ended('2026-05-05T15:30:00Z', '2026-05-05T16:00:00Z')], missedSinceLast: 1 },
    missing: { missedSinceLast: undefined },
    fact: 'missed_since_last',
  },
  device_unassigned: {
    fires: { device: { isAssigned: false, isRecalled: undefined, batteryPercent: undefined } },
    misses: { device: { isAssigned: true } },
    missing: { device: { isAssigned: undefined } },
    fact: 'device.assigned',
  },
  device_recalled: {
    fires: { device: { isRecalled: true } },
    misses: { device: { isRecalled: false } },
    missing: { device: { isRecalled: undefined } },
    fact: 'device.recalled',
  },
  battery_low: {
    fires: { device: { batteryPercent: 29 } },
    misses: { device: { batteryPercent: 30 } },
    missing: { device: { batteryPercent: undefined } },
    fact: 'device.battery_pct',
  },
  supply_used_up: {
    fires: { supplies: [{ ...sponge, uses: 10 }] },
    misses: { supplies: [{ ...sponge, uses: 9 }] },
    missing: { supplies: [{ ...sponge, maxUses: undefined }] },
    fact: 'supplies.0.max_uses',
  },
  supply_expired: {
    fires: { supplies: [{ ...sponge, openedAt: '2026-04-28T16:00:00Z' }] },
    misses: { supplies: [{ ...sponge, openedAt: '2026-04-28T16:00:01Z' }] },
    missing: { supplies: [{ ...sponge, openedAt: undefined }] },
    fact: 'supplies.0.opened_at',
  },
  precheck_missing: {
    // Absent means that none was answered, so its own absence is no missing fact; who asks is one.
    fires: { precheck: undefined },
    misses: { precheck: clearedFacts.precheck },
    missing: { asker: undefined },
    fact: 'asker',
  },
  precheck_expired: {
    fires: { precheck: { answeredAt: '2026-05-12T15:30:00Z' } },
    misses: { precheck: { answeredAt: '2026-05-12T15:30:01Z' } },
    missing: { precheck: { answeredAt: undefined } },
    fact: 'precheck.answered_at',
  },
  precheck_other_person: {
    fires: { precheck: { answeredBy: 'p2' }, asker: 'p2' },
    misses: { precheck: { answeredBy: 'p1' } },
    missing: { precheck: { answeredBy: undefined } },
    fact: 'precheck.by',
  },
  precheck_hold: {
    fires: { precheck: { outcome: 'hold_tomorrow' } },
    misses: { precheck: { outcome: 'caution' } },
    missing: { precheck: { outcome: undefined } },
    fact: 'precheck.outcome',
  },
  helper_absent: {
    fires: { prescription: { isAssisted: true } },
    misses: { prescription: { isAssisted: true }, precheck: { isHelperPresent: true } },
    missing: { precheck: { isHelperPresent: undefined } },
    fact: 'precheck.helper_present',
  },
  live_permit: {
    fires: { livePermits: [{ id: 'k1', issuedAt: '2026-05-12T15:50:00Z', expiresAt: '2026-05-12T16:00:01Z' }] },
    misses: { livePermits: [{ id: 'k1', issuedAt: '2026-05-12T15:30:00Z', expiresAt: clearedAt }] },
    missing: { livePermits: [{ id: 'k1', issuedAt: '2026-05-12T15:30:00Z' }] },
    fact: 'live_permits.0.expires_at',
  },
  clock_bad: {
    fires: { precheck: { answeredAt: '2026-05-12T16:00:01Z' } },
    misses: { precheck: { answeredAt: clearedAt } },
    missing: { now: 'today' },
    fact: 'now',
  },
};

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
    expect(ask(missing).reasons).toContainEqual({ code: 'unknown_fact', fact, resolvedBy: 'staff' });
  });

  it.each(table)('says who resolves %s', (code, { fires }) => {
    const found = ask(fires).reasons.find((each) => each.code === code);
    // A hold until tomorrow passes by time; the table holds what a hold needs that has passed.
    expect(found?.resolvedBy).toBe(code === 'precheck_hold' ? 'time' : resolverOf[code]);
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
      { code: 'prescription_unsigned', resolvedBy: 'clinician' },
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
      { code: 'supply_used_up', resolvedBy: 'coordinator', subject: 'sponge', value: 12, limit: 10 },
    ]);
  });

  it('opens no hours that close when they open', () => {
    const [found] = ask({ prescription: { hoursFrom: '18:00', hoursTo: '18:00' } }).reasons;
    expect(found).toMatchObject({ code: 'outside_hours', until: undefined });
  });

  it('says that a clinician must look at a pre-check that ended in a review', () => {
    expect(ask({ precheck: { outcome: 'hold_review' } }).reasons).toEqual([
      { code: 'precheck_hold', resolvedBy: 'clinician', subject: 'hold_review' },
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
