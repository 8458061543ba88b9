// Permits beside the published cases: every missing fact refuses by name, nothing revives a permit that is over.

import {
  mayIssue,
  mayStartWithPermit,
  permitExpiry,
  permitState,
  releaseOf,
  type PermitFacts,
  type PermitPresentFacts,
} from '@/shared/rules/permit';

const now = '2026-05-12T16:05:00Z';
const permit: PermitFacts = {
  id: 'k1',
  deviceId: 'd1',
  prescriptionVersion: 2,
  counter: 17,
  issuedAt: '2026-05-12T16:00:00Z',
  expiresAt: '2026-05-12T16:30:00Z',
  key: 'a',
  chargeCoulomb: 2.46,
  minutes: 21,
};
const present: PermitPresentFacts = {
  prescriptionVersion: 2,
  isPaused: false,
  isLocked: false,
  deviceLastCounter: 16,
  precheckAnsweredAt: '2026-05-12T15:55:00Z',
  zone: 'Europe/Berlin',
  hoursFrom: '07:00',
  hoursTo: '22:00',
  prescriptionExpiresAt: '2026-11-30T23:00:00Z',
};
const start = { deviceId: 'd1', counter: 17 };

describe('mayStartWithPermit', () => {
  it('lets the device of the permit start once', () => {
    expect(mayStartWithPermit(permit, present, start, now)).toEqual({ valid: true, reasons: [], facts: [] });
  });

  it.each<[string, PermitFacts, PermitPresentFacts]>([
    ['permit_used', { isUsed: true }, {}],
    ['permit_revoked', {}, { isPaused: true }],
    ['permit_revoked', {}, { isLocked: true }],
    ['permit_revoked', {}, { prescriptionVersion: 3 }],
    ['permit_expired', { expiresAt: now }, {}],
    ['wrong_device', { deviceId: 'd2' }, {}],
    ['counter_used', {}, { deviceLastCounter: 17 }],
    ['counter_used', { counter: 18 }, {}],
  ])('refuses with %s alone (%#)', (code, ofPermit, ofPresent) => {
    const answer = mayStartWithPermit({ ...permit, ...ofPermit }, { ...present, ...ofPresent }, start, now);
    expect(answer).toEqual({ valid: false, reasons: [code], facts: [] });
  });

  it.each<[string, PermitFacts, PermitPresentFacts, object]>([
    ['permit.expires_at', { expiresAt: undefined }, {}, {}],
    ['permit.prescription_version', { prescriptionVersion: undefined }, {}, {}],
    ['permit.device', { deviceId: undefined }, {}, {}],
    ['permit.counter', { counter: undefined }, {}, {}],
    ['current.prescription_version', {}, { prescriptionVersion: undefined }, {}],
    ['current.paused', {}, { isPaused: undefined }, {}],
    ['current.lockout', {}, { isLocked: undefined }, {}],
    ['current.device_last_counter', {}, { deviceLastCounter: undefined }, {}],
    ['ask.device', {}, {}, { deviceId: undefined }],
    ['ask.counter', {}, {}, { counter: undefined }],
  ])('refuses by name without %s', (fact, ofPermit, ofPresent, ofAsk) => {
    const answer = mayStartWithPermit(
      { ...permit, ...ofPermit },
      { ...present, ...ofPresent },
      { ...start, ...ofAsk },
      now,
    );
    expect(answer).toEqual({ valid: false, reasons: ['unknown_fact'], facts: [fact] });
  });

  it('refuses without a permit, without a present state and without a clock', () => {
    expect(mayStartWithPermit(undefined, present, start, now).facts).toEqual(['permit']);
    expect(mayStartWithPermit(permit, undefined, start, now).facts).toEqual(['current']);
    expect(mayStartWithPermit(permit, present, start, 'now').facts).toEqual(['now']);
    expect(permitState(permit, present, now).valid).toBe(true);
  });
});

describe('permitExpiry', () => {
  it.each<[string, PermitPresentFacts]>([
    ['current.precheck_answered_at', { precheckAnsweredAt: undefined }],
    ['current.zone', { zone: 'Nowhere/Land' }],
    ['current.hours_from', { hoursFrom: undefined }],
    ['current.hours_to', { hoursTo: '25:00' }],
    ['current.prescription_expires_at', { prescriptionExpiresAt: undefined }],
  ])('is not known without %s', (fact, changes) => {
    expect(permitExpiry({ ...present, ...changes }, now)).toEqual({ known: false, facts: [fact] });
  });

  it('is not known without anything', () => {
    expect(permitExpiry(undefined, 'now')).toEqual({ known: false, facts: ['now', 'current'] });
  });

  it('is not known by a clock that cannot be read', () => {
    expect(permitExpiry(present, 'today')).toEqual({ known: false, facts: ['now'] });
  });

  it('is now where the hours are closed', () => {
    expect(permitExpiry({ ...present, hoursTo: '18:00' }, now)).toEqual({
      known: true,
      expiresAt: now,
      expiresBy: 'hours',
    });
  });
});

describe('mayIssue', () => {
  it('gives no permit that would be over at once', () => {
    const ask = (changes: PermitPresentFacts) => mayIssue(undefined, { ...present, ...changes }, 'z', now);
    expect(ask({ hoursTo: '18:00' })).toMatchObject({ valid: false, reasons: ['outside_hours'], isNewPermit: false });
    expect(ask({ prescriptionExpiresAt: now })).toMatchObject({ valid: false, reasons: ['permit_expired'] });
  });

  it.each<[string, PermitFacts, PermitPresentFacts]>([
    ['expired', { expiresAt: now }, {}],
    ['used', { isUsed: true }, {}],
    ['revoked', {}, { prescriptionVersion: 3 }],
  ])('gives a new one for another key once the other is %s', (_word, ofPermit, ofPresent) => {
    const answer = mayIssue({ ...permit, ...ofPermit }, { ...present, ...ofPresent }, 'z', now);
    expect(answer).toMatchObject({
      valid: true,
      isNewPermit: true,
      expiresAt: '2026-05-12T16:35:00Z',
      expiresBy: 'issue',
    });
  });

  it('answers each wish in full, and says nothing that is not so', () => {
    const [no, none] = [{ valid: false, isNewPermit: false }, { facts: [] }];
    expect(mayIssue(undefined, present, undefined, now)).toEqual({
      ...no,
      reasons: ['unknown_fact'],
      facts: ['ask.key'],
    });
    expect(mayIssue(permit, present, 'z', now)).toEqual({ ...no, ...none, reasons: ['live_permit'] });
    expect(mayIssue(undefined, { ...present, hoursTo: '18:00' }, 'z', now)).toEqual({
      ...no,
      ...none,
      reasons: ['outside_hours'],
    });
    expect(mayIssue(undefined, present, 'z', now)).toEqual({
      ...{ valid: true, reasons: [], facts: [], isNewPermit: true },
      ...{ expiresAt: '2026-05-12T16:35:00Z', expiresBy: 'issue' },
    });
    expect(mayIssue(permit, present, 'a', now)).toEqual({
      valid: true,
      ...none,
      reasons: [],
      isNewPermit: false,
      permitId: 'k1',
    });
  });

  it('cannot tell a retry from a new wish without the keys', () => {
    expect(mayIssue(permit, present, undefined, now).facts).toEqual(['ask.key']);
    expect(mayIssue({ ...permit, key: undefined }, present, 'a', now).facts).toEqual(['permit.key']);
  });

  it('gives no second permit while it is not known whether the first lives', () => {
    const answer = mayIssue(permit, { ...present, isPaused: undefined }, 'z', now);
    expect(answer).toMatchObject({ valid: false, facts: ['current.paused'], isNewPermit: false });
  });
});

describe('releaseOf', () => {
  it('releases nothing for a final record whose sums are missing or cannot be meant', () => {
    const whole = { state: 'reserved', chargeCoulomb: 2.46, minutes: 21 };
    expect(releaseOf(permit, { type: 'record', isFinal: true, minutes: 3 })).toEqual(whole);
    expect(releaseOf(permit, { type: 'record', isFinal: true, upperChargeCoulomb: -1, minutes: 3 })).toEqual(whole);
    expect(releaseOf(permit, { type: 'record', isFinal: true, upperChargeCoulomb: 1, minutes: Number.NaN })).toEqual(
      whole,
    );
    const endless = {
      type: 'record',
      isFinal: true,
      upperChargeCoulomb: Number.POSITIVE_INFINITY,
      minutes: 3,
    } as const;
    expect(releaseOf(permit, endless)).toEqual(whole);
    expect(releaseOf(permit, { type: 'readout' })).toEqual(whole);
  });

  it('takes a final record at its word, also that nothing flowed', () => {
    const nothing = { type: 'record', isFinal: true, upperChargeCoulomb: 0, minutes: 0 } as const;
    expect(releaseOf(permit, nothing)).toEqual({ state: 'closed', chargeCoulomb: 0, minutes: 0 });
    expect(releaseOf(permit, { ...nothing, isFinal: false })).toMatchObject({ state: 'reserved' });
    expect(releaseOf(permit, { type: 'readout', showsUse: false })).toEqual({
      state: 'void',
      chargeCoulomb: 0,
      minutes: 0,
    });
  });
});
