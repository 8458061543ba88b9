// From what stands on record to the facts of clearance: each thing on record becomes its fact, and what is not on record stays unknown.

import { clearance } from '@/shared/rules/clearance';
import { gatherFacts, type Gathered } from '@/shared/rules/clearance/gather';
import { clearedAt, clearedFacts } from '@/tests/support/clearance-facts';
import {
  recorded,
  recordedPrescription,
  recordedSession,
  withLimits,
  withPerson,
  withPrescription,
} from '@/tests/support/recorded';

const factsOf = (of: Gathered) => gatherFacts(of, clearedAt, 80);
const codesOf = (of: Gathered) => clearance(factsOf(of), clearedAt).reasons.map(({ code, fact }) => fact ?? code);
const sessionsOf = (...sessions: Gathered['sessions']) => factsOf({ ...recorded, sessions }).sessions;

it('knows all of a person who may start', () => {
  expect(codesOf(recorded)).toEqual([]);
  const { prescription, site, ...rest } = factsOf(recorded);
  const { prescription: wanted, site: _site, recallCallAt: _call, ...others } = clearedFacts;
  // A signature that is not on record is none: version 0.
  expect(rest).toEqual({ ...others, consent: { ...others.consent, guardianVersion: 0, assentVersion: 0 } });
  expect(prescription).toMatchObject({ ...wanted, tier: 'second_signature', hasSecondSignature: true, overLimits: [] });
  expect(site).toEqual({ maxCharge24hCoulomb: 14.4, maxCharge7dCoulomb: 50.4, maxMinutes24h: 60 });
});

describe('the person', () => {
  it.each<[string, Parameters<typeof withPerson>[0], string[]]>([
    ['a closed record', { participant: { ...recorded.person.participant, closedAt: clearedAt } }, ['account_inactive']],
    ['a suspended account', { accountState: 'suspended' }, ['account_inactive']],
    ['no account yet', { accountState: null }, ['account_inactive']],
    ['no consent', { ownConsent: null }, ['consent_missing']],
    ['an older consent', { ownConsent: '2' }, ['consent_outdated']],
    ['a withdrawn consent', { isConsentWithdrawn: true }, ['consent_withdrawn']],
    ['no screening', { screening: null }, ['screening_incomplete']],
    [
      'a screening with open answers',
      { screening: { outcome: 'incomplete', validUntil: '2030-01-01T00:00:00Z' } },
      ['screening_incomplete'],
    ],
    [
      'an excluding screening',
      { screening: { outcome: 'excluded', validUntil: '2030-01-01T00:00:00Z' } },
      ['screening_excluded'],
    ],
    ['a screening that is over', { screening: { outcome: 'clear', validUntil: clearedAt } }, ['screening_expired']],
    ['no training', { training: null }, ['training_missing']],
    ['a training not signed off', { training: { signedOff: false, validUntil: null } }, ['training_missing']],
    ['a training without a term', { training: { signedOff: true, validUntil: null } }, ['training.valid_until']],
    ['no session watched', { watched: 0 }, ['supervision_due']],
    ['somebody who watches now', { watched: 0, isWatchedNow: true }, []],
    ['a pause', { pauseId: 'p' }, ['prescription_paused']],
    ['no device', { deviceId: null, deviceState: null }, ['device_unassigned']],
    ['a device in quarantine', { deviceState: 'quarantined' }, ['device_recalled']],
    ['a second signature that is missing', { hasSecondSignature: false }, ['second_signature_missing']],
    ['a version not confirmed', { acknowledgedVersion: 1 }, ['prescription_unacknowledged']],
    ['all sessions done', { sessionsDone: 20 }, ['course_complete']],
    ['a course that is over', { course: { closedAt: clearedAt } }, ['course_complete']],
    ['no pre-check', { precheck: null }, ['precheck_missing']],
    [
      'a pre-check with an odd outcome',
      { precheck: { answeredAt: clearedAt, accountId: 'a1', outcome: 'fine', helperPresent: false } },
      ['precheck.outcome'],
    ],
    [
      'a pre-check of somebody else',
      { precheck: { answeredAt: clearedAt, accountId: 'a2', outcome: 'go_on', helperPresent: false } },
      ['precheck_other_person'],
    ],
    [
      'an open permit',
      { openPermit: { id: 'k', issuedAt: '2026-05-12T15:50:00Z', expiresAt: '2026-05-12T16:10:00Z' } },
      ['live_permit'],
    ],
  ])('with %s', (_what, changes, wanted) => {
    expect(codesOf(withPerson(changes))).toEqual(wanted);
  });

  it('takes a call that was made', () => {
    expect(factsOf(withPerson({ recallCallAt: '2026-05-12T10:00:00Z' })).recallCallAt).toBe('2026-05-12T10:00:00Z');
  });
});

describe('the prescription', () => {
  it.each<[string, Parameters<typeof withPrescription>[0], string]>([
    ['a draft', { signedAt: null, version: null }, 'draft'],
    ['one in force', {}, 'signed'],
    ['one that was superseded', { closedAt: clearedAt }, 'none'],
    ['a draft that was discarded', { signedAt: null, closedAt: clearedAt }, 'none'],
  ])('is %s', (_what, changes, status) => {
    expect(factsOf(withPrescription(changes)).prescription?.status).toBe(status);
  });

  it('is none where there is none, and the last one of a course that is over', () => {
    expect(factsOf(withPerson({ prescription: null })).prescription).toEqual({ status: 'none' });
    expect(factsOf(withPerson({ prescription: null })).site).toBeUndefined();
    const over = { course: { closedAt: clearedAt } };
    const closed = { ...recordedPrescription, closedAt: clearedAt };
    expect(factsOf(withPerson({ ...over, prescription: closed })).prescription).toMatchObject({
      status: 'signed',
      sessionsDone: 20,
    });
    expect(factsOf(withPerson({ ...over, prescription: { ...closed, signedAt: null } })).prescription?.status).toBe(
      'none',
    );
    expect(factsOf(withPerson({ course: null, prescription: closed })).prescription?.status).toBe('none');
  });

  it('has no version where none was given', () => {
    expect(factsOf(withPrescription({ signedAt: null, version: null })).prescription?.version).toBe(0);
  });

  it('is judged by the worse of the tier that was signed and today’s', () => {
    const tierOf = (of: Gathered) => factsOf(of).prescription?.tier;
    expect(tierOf(withPrescription({ tier: 'accept' }))).toBe('accept');
    expect(tierOf(withLimits({ routineCurrentMilliamp: 1 }, withPrescription({ tier: 'accept' })))).toBe(
      'second_signature',
    );
    expect(
      tierOf(withLimits({ mostCurrentMilliamp: 1, routineCurrentMilliamp: 1 }, withPrescription({ tier: 'accept' }))),
    ).toBe('accept');
  });

  it('tells each row that today’s limits refuse, with value, limit, unit, layer and source', () => {
    const { overLimits } =
      factsOf(withLimits({ routineCurrentMilliamp: 1, mostCurrentMilliamp: 1.5 })).prescription ?? {};
    expect(overLimits).toEqual([
      { quantity: 'current', value: 2, limit: 1.5, unit: 'mA', layer: 'site', source: 'site protocol' },
    ]);
  });

  it('cannot be judged by electrodes that cannot be read, which refuses', () => {
    for (const electrodes of [
      null,
      [{}],
      [{ position: 'F3', polarity: 'anode', shape: 'disc', areaSquareCentimetre: 25, share: 1 }],
    ]) {
      expect(codesOf(withPrescription({ electrodes }))).toEqual(['prescription.dose']);
    }
  });

  it('is judged by the age of today, where the person is', () => {
    const born = (bornOn: string) => withPerson({ participant: { ...recorded.person.participant, bornOn } });
    const minor = codesOf(born('2008-05-13'));
    expect(minor).toContain('dose_above_limit');
    expect(codesOf(born('2008-05-12'))).toEqual([]);
  });
});

describe('the protocol', () => {
  it('is asked for everything that it decides, and missing refuses by name', () => {
    const codes = codesOf({ ...recorded, protocol: null });
    expect(codes).toEqual([
      'consent.required_version',
      'consent.required_from',
      'consent.previous_version',
      'supervision.required',
      'mood_check.due_at',
      'site',
    ]);
  });

  it('asks for a mood check that is not known where it wants one', () => {
    if (recorded.protocol === null) throw new Error('no protocol');
    const settings = { ...recorded.protocol.settings, moodCheckEveryDays: 14 };
    expect(codesOf({ ...recorded, protocol: { ...recorded.protocol, settings } })).toEqual(['mood_check.due_at']);
  });
});

describe('past sessions', () => {
  it('count what was delivered once their record is whole, and nothing where it shows that none ran', () => {
    expect(sessionsOf(recordedSession, { ...recordedSession, closedWhy: 'unused' })).toEqual([
      {
        ...{ state: 'closed', startedAt: recordedSession.startedAt, endedAt: recordedSession.endedAt },
        ...{ chargeCoulomb: 2.46, minutes: 21, hasDiary: true },
      },
      { state: 'void' },
    ]);
  });

  it('count whole while they run, and while nobody knows whether they ran', () => {
    const open = { ...recordedSession, closedAt: null, closedWhy: null, upperUc: null, upperMs: null };
    expect(sessionsOf(open, { ...open, startedAt: null })).toEqual([
      { state: 'running', startedAt: recordedSession.startedAt, chargeCoulomb: 2.46, minutes: 21 },
      { state: 'reserved', permitExpiresAt: recordedSession.permitExpiresAt, chargeCoulomb: 2.46, minutes: 21 },
    ]);
  });

  it('leave unknown what a closed record does not hold', () => {
    const bare = { ...recordedSession, startedAt: null, endedAt: null, upperUc: null, upperMs: null };
    expect(sessionsOf(bare)).toEqual([{ state: 'closed', hasDiary: true }]);
  });
});

describe('what was missed since the last session', () => {
  const missedOf = (...planned: Gathered['planned']) => factsOf({ ...recorded, planned }).missedSinceLast;
  it.each<[string, Gathered['planned'][number], number]>([
    ['a window marked missed', { windowTo: '2026-05-12T10:00:00Z', closedWhy: 'missed' }, 1],
    ['a window that has passed and nobody has marked', { windowTo: clearedAt, closedWhy: null }, 1],
    ['a window that is still open', { windowTo: '2026-05-12T16:00:01Z', closedWhy: null }, 0],
    ['a window that was done', { windowTo: '2026-05-12T10:00:00Z', closedWhy: 'done' }, 0],
    ['a window missed before it', { windowTo: '2026-05-11T15:51:00Z', closedWhy: 'missed' }, 0],
  ])('counts %s', (_what, planned, wanted) => {
    expect(missedOf(planned)).toBe(wanted);
  });

  it('looks from the newest end, whatever the order', () => {
    const older = { ...recordedSession, endedAt: '2026-05-01T15:51:00Z' };
    const planned = [{ windowTo: '2026-05-10T20:00:00Z', closedWhy: 'missed' }];
    expect(factsOf({ ...recorded, planned, sessions: [recordedSession, older] }).missedSinceLast).toBe(0);
    expect(factsOf({ ...recorded, planned, sessions: [older] }).missedSinceLast).toBe(1);
    expect(factsOf({ ...recorded, planned, sessions: [] }).missedSinceLast).toBe(1);
  });
});

it('passes lockouts on with their ends, and supplies as they are', () => {
  const lockouts = [
    { level: 'hold' as const, code: 'precheck_fever', until: '2026-05-13T00:00:00Z' },
    { level: 'review' as const, code: 'headache_high', until: null },
  ];
  const facts = factsOf({ ...recorded, lockouts });
  expect(facts.lockouts).toEqual([lockouts[0], { level: 'review', code: 'headache_high', until: undefined }]);
  expect(facts.supplies).toBe(recorded.supplies);
});
