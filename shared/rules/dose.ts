// Judges a prescribed dose against the tiers. Total: any shape gives an answer; what is not known refuses; nothing
// is ever clamped. The arithmetic stands in dose/arithmetic.ts, each row in dose/rows.ts.

import { tiers, type Tier, type Waveform } from '@/shared/values/codes';
import type { SiteLimits } from '@/shared/values/protocol-settings';
import { halfCycleCharge, rmsOf } from './dose/arithmetic';
import type { ComputedDose, DoseFacts, DoseJudgement, DoseRow, ElectrodeFacts } from './dose/facts';
import { readDose, type ReadDose } from './dose/read';
import {
  areaRow,
  chargeRow,
  currentRow,
  dayMinutesRow,
  densityRow,
  frequencyRow,
  gapRow,
  minorRow,
  minutesRow,
  perDayRow,
  rampRow,
  ringRow,
  sharesRow,
  siteLimitRows,
  unknownRows,
} from './dose/rows';
import { withDefaults } from './site-limits';

export type { ComputedDose, DoseFacts, DoseJudgement, DoseRow, ElectrodeFacts, TrapezoidFacts } from './dose/facts';
export { chargeOf, densityOf, halfCycleCharge, minutesOn, peakOf, rmsOf } from './dose/arithmetic';

function largest(values: readonly (number | undefined)[]): number | undefined {
  let most: number | undefined;
  for (const value of values) {
    if (value === undefined) return undefined;
    most = most === undefined ? value : Math.max(most, value);
  }
  return most;
}

function computedOf(facts: DoseFacts | undefined, dose: ReadDose): ComputedDose {
  const { waveform, amplitudePeakMilliamp: amplitude, frequencyHertz } = dose;
  const isAlternating = waveform === 'tACS' || waveform === 'tRNS';
  return {
    peakMilliamp: dose.peakMilliamp,
    peakToPeakMilliamp: isAlternating && amplitude !== undefined ? 2 * amplitude : undefined,
    rmsMilliamp: isAlternating && facts !== undefined ? rmsOf(facts) : undefined,
    minutes: dose.minutes,
    chargeCoulomb: dose.chargeCoulomb,
    maxDensityMilliampPerSquareCentimetre: largest((dose.electrodes ?? []).map(({ density }) => density)),
    halfCycleChargeMicrocoulomb:
      amplitude !== undefined && frequencyHertz !== undefined && frequencyHertz > 0
        ? halfCycleCharge(amplitude, frequencyHertz) * 1_000_000
        : undefined,
    phaseDegrees: dose.phaseDegrees,
  };
}

export function worstTier(of: readonly Tier[]): Tier {
  return of.reduce<Tier>((worst, tier) => (tiers.indexOf(tier) > tiers.indexOf(worst) ? tier : worst), 'accept');
}

/** The dose of a prescription form: `intensityMilliamp` is baseline to peak. */
export function doseFactsOf(dose: {
  readonly waveform: Waveform;
  readonly intensityMilliamp: number;
  readonly rampUpSeconds: number;
  readonly holdSeconds: number;
  readonly rampDownSeconds: number;
  readonly electrodes: readonly ElectrodeFacts[];
  readonly sessionsPerDay: number;
  readonly minGapHours: number;
}): DoseFacts {
  const { intensityMilliamp, ...rest } = dose;
  return { ...rest, amplitude: { valueMilliamp: intensityMilliamp, meaning: 'peak' } };
}

/**
 * Every row with its value and limits, the worst tier as verdict. `siteLimits` may be partial: the shipped rows hold
 * wherever a site has set none.
 */
export function judgeDose(
  facts: DoseFacts | undefined,
  ageYears: number | undefined,
  siteLimits?: Partial<SiteLimits>,
): DoseJudgement {
  const limits = withDefaults(siteLimits);
  const dose = readDose(facts, ageYears);
  const rows: DoseRow[] = [
    ...currentRow(dose, limits),
    ...minutesRow(dose, limits),
    ...chargeRow(dose, limits),
    ...densityRow(dose, limits),
    ...areaRow(dose, limits),
    ...perDayRow(dose, limits),
    ...dayMinutesRow(dose, limits),
    ...gapRow(dose, limits),
    ...rampRow(dose),
    ...frequencyRow(dose),
    ...minorRow(dose, limits),
    ...ringRow(dose, limits),
    ...sharesRow(dose),
    ...siteLimitRows(limits),
    ...unknownRows(dose),
  ];
  return {
    verdict: worstTier(rows.map(({ tier }) => tier)),
    rows,
    over: rows.filter(({ tier }) => tier !== 'accept'),
    computed: computedOf(facts, dose),
  };
}
