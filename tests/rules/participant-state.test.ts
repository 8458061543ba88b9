// The one word for where a person is, and what it is made from.

import { participantState, type ParticipantStateFacts } from '@/shared/rules/participant-state';
import { readinessOf, type ReadinessFacts } from '@/shared/rules/readiness';

const now = '2026-05-12T16:00:00.000Z';

const ready: ReadinessFacts = {
  isAccountActive: true,
  ageYears: 42,
  consent: {
    ownVersion: 2,
    guardianVersion: 0,
    assentVersion: 0,
    isWithdrawn: false,
    requiredVersion: 2,
    requiredFrom: '2026-01-01T00:00:00.000Z',
    previousVersion: 1,
  },
  screening: { outcome: 'clear', validUntil: '2026-06-01T00:00:00.000Z' },
  training: { isSignedOff: true, validUntil: '2026-06-01T00:00:00.000Z' },
  watched: { done: 1, required: 1 },
  device: { id: 'd', label: 'LS-07' },
  supplies: 2,
  prescription: { status: 'signed', isAcknowledged: true },
};

const plan: NonNullable<ParticipantStateFacts['plan']> = {
  expiresAt: '2026-08-01T00:00:00.000Z',
  minGapHours: 20,
  maxPerDay: 1,
  maxPer7Days: 5,
  windowFrom: '2026-05-12T06:00:00.000Z',
};

function factsWith(
  change: Partial<ParticipantStateFacts> = {},
  changed: Partial<ReadinessFacts> = {},
): ParticipantStateFacts {
  return {
    isWithdrawn: false,
    hasAccount: true,
    zone: 'Europe/London',
    course: { closedWhy: null, isPaused: false },
    lockouts: [],
    readiness: readinessOf({ ...ready, ...changed }, now),
    isWatchedNow: false,
    isDeviceUsable: true,
    plan,
    sessions: [],
    ...change,
  };
}

const openReview = { level: 'review', until: null } as const;

describe('where a person is', () => {
  it('is ready when everything stands and the window is open', () => {
    expect(participantState(factsWith(), now)).toBe('ready');
  });

  it('names the weightiest of all that is so', () => {
    const everything: Partial<ParticipantStateFacts> = {
      isWithdrawn: true,
      hasAccount: false,
      lockouts: [openReview],
      course: { closedWhy: 'finished', isPaused: true },
      plan: null,
    };
    expect(participantState(factsWith(everything), now)).toBe('withdrawn');
    expect(participantState(factsWith({ ...everything, isWithdrawn: false }), now)).toBe('finished');
    const open = { ...everything, isWithdrawn: false, course: { closedWhy: null, isPaused: true } };
    expect(participantState(factsWith(open), now)).toBe('invited');
    expect(participantState(factsWith({ ...open, hasAccount: true }), now)).toBe('held');
    expect(participantState(factsWith({ ...open, hasAccount: true, lockouts: [] }), now)).toBe('paused');
    const going = { ...open, hasAccount: true, lockouts: [], course: { closedWhy: null, isPaused: false } };
    expect(participantState(factsWith(going), now)).toBe('training');
  });

  it('is withdrawn when the course ended by withdrawal', () => {
    expect(participantState(factsWith({ course: { closedWhy: 'withdrawn', isPaused: false } }), now)).toBe('withdrawn');
  });

  it('is held by a hold until exactly its end, and not at it', () => {
    const holdUntil = (until: string) => factsWith({ lockouts: [{ level: 'hold', until }] });
    expect(participantState(holdUntil('2026-05-12T16:00:00.001Z'), now)).toBe('held');
    expect(participantState(holdUntil('2026-05-12T16:00:00.000Z'), now)).toBe('ready');
  });

  it('is held when the clock cannot be read', () => {
    expect(participantState(factsWith(), 'yesterday')).toBe('held');
  });

  it.each<[string, Partial<ReadinessFacts>]>([
    ['the account is not active', { isAccountActive: false }],
    ['no consent stands', { consent: null }],
    ['no screening stands', { screening: null }],
    ['the screening excludes', { screening: { outcome: 'excluded', validUntil: '2026-06-01T00:00:00.000Z' } }],
    ['the screening is over now', { screening: { outcome: 'clear', validUntil: now } }],
    ['the training is not signed off', { training: { isSignedOff: false, validUntil: null } }],
    ['the training is over now', { training: { isSignedOff: true, validUntil: now } }],
    ['a session must still be watched', { watched: { done: 0, required: 1 } }],
    ['there is no device', { device: null }],
    ['nothing is prescribed', { prescription: { status: 'none' } }],
    ['the prescription is a draft', { prescription: { status: 'draft', awaitsSecondSignature: false } }],
    ['the prescription is not acknowledged', { prescription: { status: 'signed', isAcknowledged: false } }],
  ])('is training when %s', (_, changed) => {
    expect(participantState(factsWith({}, changed), now)).toBe('training');
  });

  it('is training when the device is recalled or the prescription is over', () => {
    expect(participantState(factsWith({ isDeviceUsable: false }), now)).toBe('training');
    expect(participantState(factsWith({ plan: { ...plan, expiresAt: now } }), now)).toBe('training');
  });

  it('is ready while somebody watches, though no session was watched yet', () => {
    expect(participantState(factsWith({ isWatchedNow: true }, { watched: { done: 0, required: 1 } }), now)).toBe(
      'ready',
    );
  });

  it('is finished when no planned session is left', () => {
    expect(participantState(factsWith({ plan: { ...plan, windowFrom: null } }), now)).toBe('finished');
  });

  it('is too early until the window opens, and not at that instant', () => {
    const opensAt = (windowFrom: string) => factsWith({ plan: { ...plan, windowFrom } });
    expect(participantState(opensAt('2026-05-12T16:00:00.001Z'), now)).toBe('too_early');
    expect(participantState(opensAt(now), now)).toBe('ready');
  });

  it('is too early until the gap is over, and not at that instant', () => {
    const endedAt = (end: string) => factsWith({ sessions: [{ startedAt: '2026-05-11T19:00:00.000Z', endedAt: end }] });
    expect(participantState(endedAt('2026-05-11T20:00:00.001Z'), now)).toBe('too_early');
    expect(participantState(endedAt('2026-05-11T20:00:00.000Z'), now)).toBe('ready');
  });

  it('is too early when the day’s or the week’s count is reached', () => {
    const begun = (startedAt: string) => ({ startedAt, endedAt: startedAt });
    const noGap = { ...plan, minGapHours: 0 };
    expect(participantState(factsWith({ plan: noGap, sessions: [begun('2026-05-11T23:00:00.000Z')] }), now)).toBe(
      'too_early',
    );
    expect(participantState(factsWith({ plan: noGap, sessions: [begun('2026-05-11T22:59:59.000Z')] }), now)).toBe(
      'ready',
    );
    const week = ['06', '07', '08', '09'].map((day) => begun(`2026-05-${day}T10:00:00.000Z`));
    const fifth = begun('2026-05-05T16:00:00.001Z');
    expect(participantState(factsWith({ plan: noGap, sessions: [...week, fifth] }), now)).toBe('too_early');
    expect(
      participantState(factsWith({ plan: noGap, sessions: [...week, begun('2026-05-05T16:00:00.000Z')] }), now),
    ).toBe('ready');
  });
});

describe('readiness', () => {
  const consentWith = (change: Partial<NonNullable<ReadinessFacts['consent']>>, ageYears = 42) =>
    readinessOf({ ...ready, ageYears, consent: ready.consent && { ...ready.consent, ...change } }, now).consent;

  it('takes the version before while the new one is not in force, and not from then on', () => {
    expect(consentWith({ ownVersion: 1 })).toBe('outdated');
    expect(consentWith({ ownVersion: 1, requiredFrom: '2026-05-12T16:00:00.001Z' })).toBe('current');
    expect(consentWith({ ownVersion: 1, requiredFrom: now })).toBe('outdated');
  });

  it('says withdrawn before anything else, and missing where nothing was signed', () => {
    expect(consentWith({ isWithdrawn: true })).toBe('withdrawn');
    expect(consentWith({ ownVersion: 0 })).toBe('missing');
  });

  it('asks a minor for the guardian’s consent and the own assent, both current', () => {
    expect(consentWith({}, 17)).toBe('missing');
    expect(consentWith({ guardianVersion: 2 }, 17)).toBe('missing');
    expect(consentWith({ guardianVersion: 2, assentVersion: 1 }, 17)).toBe('outdated');
    expect(consentWith({ guardianVersion: 2, assentVersion: 2, ownVersion: 0 }, 17)).toBe('current');
    expect(consentWith({ guardianVersion: 2, assentVersion: 2, ownVersion: 0 }, 18)).toBe('missing');
  });

  it('tells a draft that waits for its second signature from one that nobody signed', () => {
    const statusOf = (awaitsSecondSignature: boolean) =>
      readinessOf({ ...ready, prescription: { status: 'draft', awaitsSecondSignature } }, now).prescription;
    expect(statusOf(true)).toBe('awaiting_second_signature');
    expect(statusOf(false)).toBe('draft');
  });

  it('keeps an incomplete or excluding screening apart from an expired one', () => {
    const screeningOf = (outcome: 'clear' | 'excluded' | 'incomplete') =>
      readinessOf({ ...ready, screening: { outcome, validUntil: now } }, now).screening;
    expect([screeningOf('incomplete'), screeningOf('excluded'), screeningOf('clear')]).toEqual([
      'incomplete',
      'excluded',
      'expired',
    ]);
  });
});
