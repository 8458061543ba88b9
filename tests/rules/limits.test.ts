// Site limits under the ceilings, amounts in whole parts, and the comparison that both sides use.

import { ceilings } from '@/shared/rules/ceilings';
import { defaultSiteLimits, rollingLimitsOf, siteLimitsAllowed, withDefaults } from '@/shared/rules/site-limits';
import {
  ampPerSquareMetreOf,
  atLeast,
  atMost,
  coulombOf,
  isAbove,
  isBelow,
  microampOf,
  microcoulombOf,
  milliampOf,
  millisecondsOf,
  minutesOf,
  secondsOf,
} from '@/shared/values/units';

describe('siteLimitsAllowed', () => {
  it('allows what ships', () => {
    expect(siteLimitsAllowed(defaultSiteLimits)).toEqual([]);
    expect(siteLimitsAllowed({})).toEqual([]);
  });

  it.each([
    ['mostCurrentMilliamp', 4],
    ['mostMinutes', 40],
    ['mostChargeCoulomb', 7.2],
    ['mostDensityMilliampPerSquareCentimetre', 0.16],
    ['mostMinutesPerDay', 60],
    ['mostCharge24hCoulomb', 14.4],
    ['mostCharge7dCoulomb', 50.4],
    ['minorCurrentMilliamp', 2],
  ] as const)('refuses %s above %d, with limit, layer and source', (field, ceiling) => {
    expect(siteLimitsAllowed({ [field]: ceiling })).toEqual([]);
    expect(siteLimitsAllowed({ [field]: ceiling + 0.01 })).toEqual([
      expect.objectContaining({
        field,
        code: 'above_ceiling',
        limit: ceiling,
        layer: 'ceiling',
        source: expect.any(String),
      }),
    ]);
  });

  it('refuses a gap under the compiled least one', () => {
    expect(siteLimitsAllowed({ leastGapHours: 3.9 })).toEqual([
      expect.objectContaining({ field: 'leastGapHours', code: 'below_ceiling', limit: 4 }),
    ]);
  });

  it.each([
    ['routineCurrentMilliamp', { routineCurrentMilliamp: 3, mostCurrentMilliamp: 2.5 }],
    ['routineMinutes', { routineMinutes: 41 }],
    ['routineChargeCoulomb', { routineChargeCoulomb: 5, mostChargeCoulomb: 4 }],
    ['routineDensityMilliampPerSquareCentimetre', { routineDensityMilliampPerSquareCentimetre: 0.2 }],
    ['routineCharge24hCoulomb', { routineCharge24hCoulomb: 15 }],
    ['routineCharge7dCoulomb', { routineCharge7dCoulomb: 51 }],
    ['routineGapHours', { routineGapHours: 3 }],
  ] as const)('refuses %s that contradicts its own most', (field, limits) => {
    expect(siteLimitsAllowed(limits)).toEqual([
      expect.objectContaining({ field, code: 'routine_above_most', layer: 'site' }),
    ]);
  });

  it('keeps the shipped row where a site has set nothing', () => {
    expect(withDefaults({ mostMinutes: undefined, minorCurrentMilliamp: 1.5 })).toEqual({
      ...defaultSiteLimits,
      minorCurrentMilliamp: 1.5,
    });
    expect(withDefaults()).toEqual(defaultSiteLimits);
  });

  it('gives the rolling limits of a tier, never above a ceiling', () => {
    expect(rollingLimitsOf(defaultSiteLimits, 'accept')).toEqual({
      maxCharge24hCoulomb: 7.2,
      maxCharge7dCoulomb: 25.2,
      maxMinutes24h: 60,
    });
    expect(
      rollingLimitsOf({ ...defaultSiteLimits, mostCharge24hCoulomb: 20, mostMinutesPerDay: 90 }, 'second_signature'),
    ).toEqual({
      maxCharge24hCoulomb: 14.4,
      maxCharge7dCoulomb: 50.4,
      maxMinutes24h: 60,
    });
  });

  it('names a source for every ceiling', () => {
    expect(Object.values(ceilings).map(({ source }) => source.length)).not.toContain(0);
  });
});

describe('amounts', () => {
  it('rounds up to whole parts, but not for the last bit of a float', () => {
    expect([microampOf(2.1), microampOf(0.0001), milliampOf(2100)]).toEqual([2100, 1, 2.1]);
    expect([microcoulombOf(2.46), microcoulombOf(0.1 + 0.2), microcoulombOf(2.4600001)]).toEqual([
      2_460_000, 300_000, 2_460_001,
    ]);
    expect([millisecondsOf(0.001), millisecondsOf(1.0001), secondsOf(1500), coulombOf(2_460_000)]).toEqual([
      1, 1001, 1.5, 2.46,
    ]);
    expect([minutesOf(90), ampPerSquareMetreOf(0.08)]).toEqual([1.5, 0.8]);
  });

  it('compares with a tolerance of 1e-9, both ways, and never for what is no number', () => {
    expect([atMost(1.2 + 1.2 + 1.2, 3.6), isAbove(1.2 + 1.2 + 1.2, 3.6)]).toEqual([true, false]);
    expect([atMost(3.6000001, 3.6), isAbove(3.6000001, 3.6)]).toEqual([false, true]);
    expect([atLeast(19.999999, 20), isBelow(19.999999, 20)]).toEqual([false, true]);
    expect([atLeast(0.3, 0.1 + 0.2), isBelow(0.3, 0.1 + 0.2)]).toEqual([true, false]);
    expect([atMost(Number.NaN, 1), atLeast(Number.NaN, 1), isAbove(Number.NaN, 1), isBelow(Number.NaN, 1)]).toEqual([
      false,
      false,
      false,
      false,
    ]);
  });
});
