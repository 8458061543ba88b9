// Small rules of the house: when terms end, when a notice may arrive, who may be invited, from when a supply counts.

import { adherenceShown } from '@/shared/rules/adherence-shown';
import { caregiverRefusal } from '@/shared/rules/caregiver-invitation';
import { countedOf } from '@/shared/rules/counted';
import { participantCode } from '@/shared/rules/enrolment';
import { invitationEnd, validUntil, watchingEnd } from '@/shared/rules/house-terms';
import { defaultProtocolSettings } from '@/shared/rules/protocol-defaults';
import { afterQuietHours } from '@/shared/rules/quiet-hours';
import { siteLimitsAllowed } from '@/shared/rules/site-limits';
import { skinRank } from '@/shared/rules/skin-rank';
import { openedAtOf } from '@/shared/rules/supply-opening';
import { firstNameOf } from '@/shared/values/first-name';
import { ProtocolSettings } from '@/shared/values/protocol-settings';

const now = '2026-05-12T16:00:00Z';
const london = 'Europe/London';

describe('terms', () => {
  it('of an invitation are 14 days, of watching now two hours, of a protocol as many days as it says', () => {
    expect(invitationEnd(now)).toBe('2026-05-26T16:00:00Z');
    expect(watchingEnd(now)).toBe('2026-05-12T18:00:00Z');
    expect(validUntil(now, 90)).toBe('2026-08-10T16:00:00Z');
  });

  it('are over at once when the clock cannot be read', () => {
    expect(validUntil('never', 90)).toBe('never');
  });
});

describe('a notice', () => {
  it.each([
    ['2026-05-12T16:00:00Z', '2026-05-12T16:00:00Z'],
    ['2026-05-12T19:59:59Z', '2026-05-12T19:59:59Z'],
    // 21:00 in London, in summer.
    ['2026-05-12T20:00:00Z', '2026-05-13T07:00:00Z'],
    ['2026-05-13T02:00:00Z', '2026-05-13T07:00:00Z'],
    ['2026-05-13T07:00:00Z', '2026-05-13T07:00:00Z'],
    // The night in which the clocks go forward.
    ['2026-03-28T22:00:00Z', '2026-03-29T07:00:00Z'],
  ])('of %s arrives at %s in London', (at, arrives) => {
    expect(afterQuietHours(at, london)).toBe(arrives);
  });

  it('is not kept back by a clock or a zone that cannot be read', () => {
    expect(afterQuietHours('never', london)).toBe('never');
    expect(afterQuietHours('2026-05-12T22:00:00Z', 'Nowhere/Land')).toBe('2026-05-12T22:00:00Z');
  });
});

describe('a caregiver', () => {
  const facts = { isWithdrawn: false, roleOfAddress: null, caregivers: 0 };

  it.each([
    [facts, null],
    [{ ...facts, roleOfAddress: 'caregiver' as const, caregivers: 4 }, null],
    [{ ...facts, caregivers: 5 }, 'caregiver.too_many'],
    [{ ...facts, roleOfAddress: 'participant' as const }, 'caregiver.address_is_staff_or_participant'],
    [{ ...facts, roleOfAddress: 'administrator' as const }, 'caregiver.address_is_staff_or_participant'],
    [{ ...facts, isWithdrawn: true }, 'participant.withdrawn'],
  ])('with %j is answered %s', (given, refusal) => {
    expect(caregiverRefusal(given)).toBe(refusal);
  });
});

describe('a supply', () => {
  it('counts from the start of the day on which it was opened, where the person lives', () => {
    expect(openedAtOf('2026-05-12', london, now)).toBe('2026-05-11T23:00:00Z');
    expect(openedAtOf('2026-05-01', 'America/New_York', now)).toBe('2026-05-01T04:00:00Z');
  });

  it('is not opened on a day that has not come, or is none', () => {
    expect(openedAtOf('2026-05-13', london, now)).toBeNull();
    expect(openedAtOf('2026-02-30', london, now)).toBeNull();
    expect(openedAtOf('2026-05-12', london, 'never')).toBeNull();
    // It is the 13th in Tokyo already.
    expect(openedAtOf('2026-05-13', 'Asia/Tokyo', now)).toBe('2026-05-12T15:00:00Z');
  });
});

describe('numbers that are shown', () => {
  it('count complete ones out of those that were due', () => {
    const counted = countedOf({ complete: 3, partial: 1, notDelivered: 0, missed: 1 });
    expect(counted.planned).toBe(5);
    expect(counted.interval?.low).toBeCloseTo(0.2307, 4);
    expect(countedOf({ complete: 0, partial: 0, notDelivered: 0, missed: 0 })).toEqual({ planned: 0, interval: null });
  });

  it('are the same for one person’s windows', () => {
    const windowOf = (day: string) => ({
      windowFrom: `2026-05-${day}T06:00:00Z`,
      windowTo: `2026-05-${day}T21:00:00Z`,
    });
    const sessions = [
      { ...windowOf('09'), state: 'complete' as const },
      { ...windowOf('10'), state: 'excused' as const },
      { ...windowOf('11'), state: 'missed' as const },
      { ...windowOf('13'), state: 'future' as const },
    ];
    expect(adherenceShown({ sessions, holds: [] }, now)).toMatchObject({ complete: 1, planned: 2, missedRunning: 1 });
  });

  it('rank the skin from well to worst', () => {
    expect(['ok', 'pink_fading', 'red', 'broken_or_blistered', 'green', null].map(skinRank)).toEqual([
      0,
      1,
      2,
      3,
      null,
      null,
    ]);
  });

  it('make a code of four digits, longer for the ten thousandth', () => {
    expect([participantCode('LS', 142), participantCode('LS', 10_000)]).toEqual(['LS-0142', 'LS-10000']);
  });

  it('call somebody by what stands before the first space', () => {
    expect([firstNameOf('Ines Marlow'), firstNameOf('  Bo '), firstNameOf('')]).toEqual(['Ines', 'Bo', '']);
  });
});

it('ships defaults that a site may sign as they are', () => {
  const contacts = [{ name: 'On call', email: 'oncall@harrowmere.example', phone: '020 7946 0101' }];
  const settings = ProtocolSettings.parse(defaultProtocolSettings({ contacts, consentRequiredFrom: now }));
  expect(siteLimitsAllowed(settings.limits)).toEqual([]);
});
