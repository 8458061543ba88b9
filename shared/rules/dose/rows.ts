// Each row of a judged dose. A row whose facts are unknown is not judged: the unknown fact itself refuses.

import { atLeast, atMost, isAbove, isBelow } from '@/shared/values/units';
import type { LimitLayer, Tier } from '@/shared/values/codes';
import type { SiteLimits } from '@/shared/values/protocol-settings';
import { ceilings } from '../ceilings';
import { siteLimitsAllowed } from '../site-limits';
import type { DoseRow } from './facts';
import type { ReadDose, ReadElectrode } from './read';
import { routineLayer, rowUpTo, siteSource } from './tiers';

function sourceOf(layer: LimitLayer, otherwise: string): string {
  return layer === 'site' ? siteSource : otherwise;
}

export function currentRow(dose: ReadDose, limits: SiteLimits): DoseRow[] {
  const fields = { routine: 'routineCurrentMilliamp', most: 'mostCurrentMilliamp' } as const;
  return rowUpTo('current', dose.peakMilliamp, limits, fields, ceilings.currentMilliamp);
}

export function minutesRow(dose: ReadDose, limits: SiteLimits): DoseRow[] {
  const fields = { routine: 'routineMinutes', most: 'mostMinutes' } as const;
  return rowUpTo('minutes', dose.minutes, limits, fields, ceilings.minutes);
}

export function chargeRow(dose: ReadDose, limits: SiteLimits): DoseRow[] {
  const fields = { routine: 'routineChargeCoulomb', most: 'mostChargeCoulomb' } as const;
  return rowUpTo('charge', dose.chargeCoulomb, limits, fields, ceilings.chargeCoulomb);
}

/** The electrodes that the pad rows judge: all of them, or pads alone once a protocol has switched rings on. */
function judgedByPadRows(dose: ReadDose, limits: SiteLimits): readonly ReadElectrode[] {
  const electrodes = dose.electrodes ?? [];
  return limits.allowsRings ? electrodes.filter(({ shape }) => shape !== 'ring') : electrodes;
}

export function densityRow(dose: ReadDose, limits: SiteLimits): DoseRow[] {
  let worst: { density: number; position?: string } | undefined;
  for (const { density, position } of judgedByPadRows(dose, limits)) {
    if (density === undefined) return [];
    if (worst === undefined || density > worst.density) worst = { density, position };
  }
  const fields = {
    routine: 'routineDensityMilliampPerSquareCentimetre',
    most: 'mostDensityMilliampPerSquareCentimetre',
  } as const;
  const ceiling = ceilings.densityMilliampPerSquareCentimetre;
  return rowUpTo('density', worst?.density, limits, fields, ceiling, worst?.position);
}

/** A small pad needs a second signature; whether it is too small is the density's business. */
export function areaRow(dose: ReadDose, limits: SiteLimits): DoseRow[] {
  let smallest: { area: number; position?: string } | undefined;
  for (const { areaSquareCentimetre: area, position } of judgedByPadRows(dose, limits)) {
    if (area === undefined) return [];
    if (smallest === undefined || area < smallest.area) smallest = { area, position };
  }
  if (smallest === undefined) return [];
  const routineLimit = limits.routineAreaSquareCentimetre;
  const layer = routineLayer(limits, 'routineAreaSquareCentimetre');
  return [
    {
      quantity: 'area',
      tier: atLeast(smallest.area, routineLimit) ? 'accept' : 'second_signature',
      value: smallest.area,
      unit: 'cm²',
      routineLimit,
      direction: 'at_least',
      layer,
      source: sourceOf(layer, 'Bikson, Datta, Elwassif 2009'),
      electrode: smallest.position,
    },
  ];
}

export function perDayRow(dose: ReadDose, limits: SiteLimits): DoseRow[] {
  const value = dose.sessionsPerDay;
  if (value === undefined) return [];
  const layer = routineLayer(limits, 'routineSessionsPerDay');
  return [
    {
      quantity: 'per_day',
      tier: atMost(value, limits.routineSessionsPerDay) ? 'accept' : 'second_signature',
      value,
      unit: '',
      routineLimit: limits.routineSessionsPerDay,
      direction: 'at_most',
      layer,
      source: sourceOf(layer, 'own choice'),
    },
  ];
}

/** Planned per day; the sum over any 24 h is clearance's. */
export function dayMinutesRow(dose: ReadDose, limits: SiteLimits): DoseRow[] {
  if (dose.sessionsPerDay === undefined || dose.minutes === undefined) return [];
  const { value: ceiling, source } = ceilings.minutesPerDay;
  const siteLimit = Math.min(limits.mostMinutesPerDay, ceiling);
  const value = dose.sessionsPerDay * dose.minutes;
  const layer: LimitLayer = isBelow(siteLimit, ceiling) ? 'site' : 'ceiling';
  const tier: Tier = atMost(value, siteLimit) ? 'accept' : 'refuse';
  const limit = { siteLimit, ceiling, direction: 'at_most', layer, source: sourceOf(layer, source) } as const;
  return [{ quantity: 'day_minutes', tier, value, unit: 'min', ...limit }];
}

export function gapRow(dose: ReadDose, limits: SiteLimits): DoseRow[] {
  const value = dose.minGapHours;
  if (value === undefined) return [];
  const least = ceilings.leastGapHours.value;
  const siteLimit = Math.max(limits.leastGapHours, least);
  const tier: Tier = !atLeast(value, siteLimit)
    ? 'refuse'
    : atLeast(value, limits.routineGapHours)
      ? 'accept'
      : 'second_signature';
  const layer: LimitLayer =
    tier === 'refuse' ? (isAbove(siteLimit, least) ? 'site' : 'ceiling') : routineLayer(limits, 'routineGapHours');
  return [
    {
      quantity: 'gap',
      tier,
      value,
      unit: 'h',
      routineLimit: Math.max(limits.routineGapHours, siteLimit),
      siteLimit,
      ceiling: least,
      direction: 'at_least',
      layer,
      source: sourceOf(layer, ceilings.leastGapHours.source),
    },
  ];
}

/** Shows the ramp that is out of bounds, else the shorter one. */
export function rampRow(dose: ReadDose): DoseRow[] {
  const { rampUpSeconds: up, rampDownSeconds: down } = dose;
  if (up === undefined || down === undefined) return [];
  const { value: floor, source } = ceilings.leastRampSeconds;
  const ceiling = ceilings.mostRampSeconds.value;
  const isOut = (seconds: number) => !atLeast(seconds, floor) || !atMost(seconds, ceiling);
  const value = [up, down].find(isOut) ?? Math.min(up, down);
  const tier: Tier = isOut(value) ? 'refuse' : 'accept';
  return [{ quantity: 'ramp', tier, value, unit: 's', floor, ceiling, direction: 'at_most', layer: 'ceiling', source }];
}

export function frequencyRow(dose: ReadDose): DoseRow[] {
  const { frequencyHertz, bandHertz } = dose;
  if (frequencyHertz !== undefined) {
    const { value: floor, source } = ceilings.leastFrequencyHertz;
    const ceiling = ceilings.mostFrequencyHertz.value;
    const tier: Tier = atLeast(frequencyHertz, floor) && atMost(frequencyHertz, ceiling) ? 'accept' : 'refuse';
    const limit = { floor, ceiling, direction: 'at_most', layer: 'ceiling', source } as const;
    return [{ quantity: 'frequency', tier, value: frequencyHertz, unit: 'Hz', ...limit }];
  }
  if (bandHertz === undefined) return [];
  const [low, high] = bandHertz;
  const { value: floor, source } = ceilings.leastBandHertz;
  const ceiling = ceilings.mostBandHertz.value;
  const isLowIn = atLeast(low, floor) && low < high;
  const tier: Tier = isLowIn && atMost(high, ceiling) ? 'accept' : 'refuse';
  const limit = { floor, ceiling, direction: 'at_most', layer: 'ceiling', source } as const;
  return [{ quantity: 'frequency', tier, value: isLowIn ? high : low, unit: 'Hz', ...limit }];
}

/** One signature under 18 years up to this, in mA (own choice after Buchanan et al. 2021, Kessler et al. 2013). */
const minorRoutineMilliamp = 1;

export function minorRow(dose: ReadDose, limits: SiteLimits): DoseRow[] {
  const { ageYears, peakMilliamp } = dose;
  if (ageYears === undefined || ageYears >= ceilings.adultAgeYears.value) return [];
  const { value: ceiling, source, unit } = ceilings.minorCurrentMilliamp;
  const row = { quantity: 'minor', value: peakMilliamp, unit, ceiling, direction: 'at_most' } as const;
  // No setting helps under the compiled age floor, so no fact is named.
  if (ageYears < ceilings.leastAgeYears.value) {
    return [{ ...row, tier: 'refuse', layer: 'ceiling', source: ceilings.leastAgeYears.source }];
  }
  if (limits.minorCurrentMilliamp === null) {
    return [{ ...row, tier: 'refuse', layer: 'default', source, fact: 'site.minor_limit_mA' }];
  }
  if (peakMilliamp === undefined) return [];
  const siteLimit = Math.min(limits.minorCurrentMilliamp, ceiling);
  const routineLimit = Math.min(minorRoutineMilliamp, siteLimit);
  const tier: Tier = atMost(peakMilliamp, routineLimit)
    ? 'accept'
    : atMost(peakMilliamp, siteLimit)
      ? 'second_signature'
      : 'refuse';
  const layer: LimitLayer = tier !== 'refuse' ? 'default' : isBelow(siteLimit, ceiling) ? 'site' : 'ceiling';
  return [{ ...row, tier, routineLimit, siteLimit, layer, source: sourceOf(layer, source) }];
}

/** Small gel electrodes: refused unless the protocol has switched their one row on, and then two signatures always. */
export function ringRow(dose: ReadDose, limits: SiteLimits): DoseRow[] {
  const rings = (dose.electrodes ?? []).filter(({ shape }) => shape === 'ring');
  if (rings.length === 0) return [];
  const { value: ceiling, unit, source } = ceilings.ringMostCurrentMilliamp;
  const row = { quantity: 'ring', unit, ceiling, direction: 'at_most', source } as const;
  if (!limits.allowsRings) return [{ ...row, tier: 'refuse', layer: 'default' }];
  let value = 0;
  let areAllLarge = true;
  for (const { areaSquareCentimetre, milliamp } of rings) {
    if (areaSquareCentimetre === undefined || milliamp === undefined) return [];
    value = Math.max(value, milliamp);
    areAllLarge = areAllLarge && atLeast(areaSquareCentimetre, ceilings.ringLeastAreaSquareCentimetre.value);
  }
  if (dose.minutes === undefined) return [];
  const isIn = areAllLarge && atMost(value, ceiling) && atMost(dose.minutes, ceilings.ringMostMinutes.value);
  return [{ ...row, tier: isIn ? 'second_signature' : 'refuse', value, layer: 'ceiling' }];
}

/** Shares of one polarity may miss 1 by this (own choice: a typed 0.33 three times). */
const shareTolerance = 0.01;

export function sharesRow(dose: ReadDose): DoseRow[] {
  if (dose.electrodes === undefined) return [];
  const sums = { anode: 0, cathode: 0 };
  for (const { polarity, share } of dose.electrodes) {
    if (polarity === undefined || share === undefined) return [];
    sums[polarity] += share;
  }
  const isFarther = Math.abs(sums.anode - 1) > Math.abs(sums.cathode - 1);
  const value = isFarther ? sums.anode : sums.cathode;
  // The slack is that of a sum near 1, not of the small difference: 1.01 − 1 is a hair above 0.01.
  const tier: Tier = Math.abs(value - 1) <= shareTolerance + 1e-9 ? 'accept' : 'refuse';
  const limit = { floor: 1 - shareTolerance, ceiling: 1 + shareTolerance, direction: 'at_most' } as const;
  return [{ quantity: 'shares', tier, value, unit: '', ...limit, layer: 'ceiling', source: 'own choice' }];
}

/** One row for each field in which the site tries to set more than a ceiling, whoever the prescription is for. */
export function siteLimitRows(limits: SiteLimits): DoseRow[] {
  return siteLimitsAllowed(limits)
    .filter(({ layer }) => layer === 'ceiling')
    .map(({ field, value, limit, source, code }) => ({
      quantity: 'site_limit',
      tier: 'refuse',
      value,
      unit: '',
      ceiling: limit,
      direction: code === 'below_ceiling' ? 'at_least' : 'at_most',
      layer: 'ceiling',
      source,
      field,
    }));
}

export function unknownRows(dose: ReadDose): DoseRow[] {
  return dose.missing.map((fact) => ({
    quantity: 'unknown_fact',
    tier: 'refuse',
    unit: '',
    direction: 'at_most',
    source: 'own choice',
    fact,
  }));
}
