// What a site's protocol may set, with the rows that ship until it does, and the check that none exceeds its
// ceiling. `routine` = one signature is enough; `most` = with two signatures; above it a dose is refused.

import type { Tier } from '@/shared/values/codes';
import type { SiteLimits } from '@/shared/values/protocol-settings';
import { atLeast, atMost } from '@/shared/values/units';
import { ceilings } from './ceilings';

/** Shipped rows: guidance on home stimulation §6. All numbers own choices under the ceilings unless noted. */
export const defaultSiteLimits: SiteLimits = {
  // 1 to 2 mA is the classic range (Bikson, Datta, Elwassif 2009).
  routineCurrentMilliamp: 2,
  mostCurrentMilliamp: ceilings.currentMilliamp.value,
  routineMinutes: 30,
  mostMinutes: ceilings.minutes.value,
  routineChargeCoulomb: 3.6,
  mostChargeCoulomb: ceilings.chargeCoulomb.value,
  // 2 mA on 25 cm².
  routineDensityMilliampPerSquareCentimetre: 0.08,
  mostDensityMilliampPerSquareCentimetre: ceilings.densityMilliampPerSquareCentimetre.value,
  // 25 to 35 cm² is the classic range (Bikson, Datta, Elwassif 2009).
  routineAreaSquareCentimetre: 25,
  routineSessionsPerDay: 1,
  mostMinutesPerDay: ceilings.minutesPerDay.value,
  routineGapHours: 20,
  leastGapHours: ceilings.leastGapHours.value,
  // Two sessions at the routine limit: a 20 h gap lets two fall into one 24 h window.
  routineCharge24hCoulomb: 7.2,
  mostCharge24hCoulomb: ceilings.charge24hCoulomb.value,
  routineCharge7dCoulomb: 25.2,
  mostCharge7dCoulomb: ceilings.charge7dCoulomb.value,
  minorCurrentMilliamp: null,
  allowsRings: false,
};

export type SiteLimitFinding = {
  readonly field: keyof SiteLimits;
  readonly code: 'above_ceiling' | 'below_ceiling' | 'routine_above_most';
  readonly value: number;
  readonly limit: number;
  readonly layer: 'ceiling' | 'site';
  readonly source: string;
};

/** The shipped row wherever a site has set none. */
export function withDefaults(limits: Partial<SiteLimits> = {}): SiteLimits {
  const set = Object.fromEntries(Object.entries(limits).filter(([, value]) => value !== undefined));
  return { ...defaultSiteLimits, ...set };
}

/** Fields that a ceiling bounds from above; the ones with two signatures first. */
const ceilingOf = {
  mostCurrentMilliamp: ceilings.currentMilliamp,
  mostMinutes: ceilings.minutes,
  mostChargeCoulomb: ceilings.chargeCoulomb,
  mostDensityMilliampPerSquareCentimetre: ceilings.densityMilliampPerSquareCentimetre,
  mostMinutesPerDay: ceilings.minutesPerDay,
  mostCharge24hCoulomb: ceilings.charge24hCoulomb,
  mostCharge7dCoulomb: ceilings.charge7dCoulomb,
  minorCurrentMilliamp: ceilings.minorCurrentMilliamp,
} as const;

/** Each routine field with the field that it must not pass. */
const routinePairs = [
  ['routineCurrentMilliamp', 'mostCurrentMilliamp'],
  ['routineMinutes', 'mostMinutes'],
  ['routineChargeCoulomb', 'mostChargeCoulomb'],
  ['routineDensityMilliampPerSquareCentimetre', 'mostDensityMilliampPerSquareCentimetre'],
  ['routineCharge24hCoulomb', 'mostCharge24hCoulomb'],
  ['routineCharge7dCoulomb', 'mostCharge7dCoulomb'],
] as const;

/** Every field in which a site tries to allow more than a ceiling, or contradicts itself. Empty = may be signed. */
export function siteLimitsAllowed(limits: Partial<SiteLimits>): SiteLimitFinding[] {
  const findings: SiteLimitFinding[] = [];
  for (const field of siteLimitFields(ceilingOf)) {
    const value = limits[field];
    const { value: limit, source } = ceilingOf[field];
    if (typeof value === 'number' && !atMost(value, limit)) {
      findings.push({ field, code: 'above_ceiling', value, limit, layer: 'ceiling', source });
    }
  }
  const gap = limits.leastGapHours;
  const { value: leastGap, source } = ceilings.leastGapHours;
  if (gap !== undefined && !atLeast(gap, leastGap)) {
    findings.push({
      field: 'leastGapHours',
      code: 'below_ceiling',
      value: gap,
      limit: leastGap,
      layer: 'ceiling',
      source,
    });
  }
  const whole = withDefaults(limits);
  for (const [routine, most] of routinePairs) {
    if (limits[routine] !== undefined && !atMost(whole[routine], whole[most])) {
      findings.push({
        field: routine,
        code: 'routine_above_most',
        value: whole[routine],
        limit: whole[most],
        layer: 'site',
        source: 'own choice',
      });
    }
  }
  if (limits.routineGapHours !== undefined && !atLeast(whole.routineGapHours, whole.leastGapHours)) {
    findings.push({
      field: 'routineGapHours',
      code: 'routine_above_most',
      value: whole.routineGapHours,
      limit: whole.leastGapHours,
      layer: 'site',
      source: 'own choice',
    });
  }
  return findings;
}

function siteLimitFields<T extends object>(of: T): (keyof T & string)[] {
  const fields: (keyof T & string)[] = [];
  for (const field in of) fields.push(field);
  return fields;
}

/** Rolling limits for a prescription of this tier, in C and min; above a ceiling the ceiling holds. */
export function rollingLimitsOf(
  limits: SiteLimits,
  tier: Tier,
): { maxCharge24hCoulomb: number; maxCharge7dCoulomb: number; maxMinutes24h: number } {
  const isRoutine = tier === 'accept';
  return {
    maxCharge24hCoulomb: Math.min(
      isRoutine ? limits.routineCharge24hCoulomb : limits.mostCharge24hCoulomb,
      ceilings.charge24hCoulomb.value,
    ),
    maxCharge7dCoulomb: Math.min(
      isRoutine ? limits.routineCharge7dCoulomb : limits.mostCharge7dCoulomb,
      ceilings.charge7dCoulomb.value,
    ),
    maxMinutes24h: Math.min(limits.mostMinutesPerDay, ceilings.minutesPerDay.value),
  };
}
