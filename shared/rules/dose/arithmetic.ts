// Dose arithmetic, exact, without any limit. Units stand in the names; charge in C, time in s or min.

import type { DoseFacts, TrapezoidFacts } from './facts';

/** Charge of a trapezoid in C: I × (hold + (ramp up + ramp down)/2). */
export function chargeOf(dose: TrapezoidFacts): number {
  const { intensityMilliamp, rampUpSeconds, holdSeconds, rampDownSeconds } = dose;
  return (intensityMilliamp * (holdSeconds + (rampUpSeconds + rampDownSeconds) / 2)) / 1000;
}

/** Time with current on in min: ramps count. */
export function minutesOn(dose: Omit<TrapezoidFacts, 'intensityMilliamp'>): number {
  return (dose.rampUpSeconds + dose.holdSeconds + dose.rampDownSeconds) / 60;
}

/** mA/cm². */
export function densityOf(milliamp: number, areaSquareCentimetre: number): number {
  return Math.abs(milliamp) / areaSquareCentimetre;
}

/** C/m² over the smallest electrode. */
export function chargeDensityOf(chargeCoulomb: number, areaSquareCentimetre: number): number {
  return (chargeCoulomb / areaSquareCentimetre) * 10_000;
}

/** Charge of one half cycle of a sine in C: I/(π f), offset left out. */
export function halfCycleCharge(peakMilliamp: number, frequencyHertz: number): number {
  return peakMilliamp / 1000 / (Math.PI * frequencyHertz);
}

/**
 * Baseline to peak without offset, in mA; undefined where it cannot be told. Direct current has one amplitude only,
 * so another meaning than peak is not known to mean anything. Noise given by r.m.s. needs the peak at which the
 * generator clips, and a peak below the r.m.s. cannot be meant.
 */
export function amplitudePeakOf(dose: DoseFacts): number | undefined {
  const { valueMilliamp, meaning, peakMilliamp } = dose.amplitude ?? {};
  if (valueMilliamp === undefined || !Number.isFinite(valueMilliamp)) return undefined;
  const value = Math.abs(valueMilliamp);
  if (meaning === 'peak') return value;
  if (dose.waveform === 'tDCS') return undefined;
  if (meaning === 'peak_to_peak') return value / 2;
  if (meaning !== 'rms') return undefined;
  if (dose.waveform === 'tACS') return value * Math.SQRT2;
  if (dose.waveform !== 'tRNS' || peakMilliamp === undefined || !Number.isFinite(peakMilliamp)) return undefined;
  return peakMilliamp >= value ? peakMilliamp : undefined;
}

/** Largest current that flows, offset included, in mA. */
export function peakOf(dose: DoseFacts): number | undefined {
  const amplitude = amplitudePeakOf(dose);
  const offset = dose.offsetMilliamp ?? 0;
  return amplitude === undefined || !Number.isFinite(offset) ? undefined : amplitude + Math.abs(offset);
}

/** Root mean square with offset, in mA; undefined for noise of which only the peak is known. */
export function rmsOf(dose: DoseFacts): number | undefined {
  const amplitude = amplitudePeakOf(dose);
  const offset = dose.offsetMilliamp ?? 0;
  if (amplitude === undefined || !Number.isFinite(offset)) return undefined;
  if (dose.waveform === 'tDCS') return amplitude + Math.abs(offset);
  if (dose.waveform === 'tACS') return Math.hypot(amplitude / Math.SQRT2, offset);
  const { valueMilliamp, meaning } = dose.amplitude ?? {};
  return meaning === 'rms' && valueMilliamp !== undefined ? Math.hypot(valueMilliamp, offset) : undefined;
}

/** How a current divides over electrodes: sum, share of each return, density in A/m². */
export type CurrentSplit =
  | { readonly refused: true; readonly code: 'sum-not-zero'; readonly sumMilliamp: number }
  | {
      readonly refused: false;
      readonly sumMilliamp: number;
      /** Only electrodes with a negative current. */
      readonly shares: Readonly<Record<string, number>>;
      readonly densitiesAmpPerSquareMetre: Readonly<Record<string, number>>;
      /** Largest density; of equals the first in alphabetical order. */
      readonly largest: string;
    };

/** Currents must sum to 0 within 1e-9 mA. */
export function currentSplit(
  electrodes: readonly { position: string; milliamp: number; areaSquareCentimetre: number }[],
): CurrentSplit {
  const sum = electrodes.reduce((total, { milliamp }) => total + milliamp, 0);
  if (!(Math.abs(sum) <= 1e-9)) return { refused: true, code: 'sum-not-zero', sumMilliamp: sum };
  const returns = electrodes.filter(({ milliamp }) => milliamp < 0);
  const returned = returns.reduce((total, { milliamp }) => total - milliamp, 0);
  const densities = electrodes
    .map(({ position, milliamp, areaSquareCentimetre }) => ({
      position,
      density: densityOf(milliamp, areaSquareCentimetre) * 10,
    }))
    .sort((a, b) => b.density - a.density || (a.position < b.position ? -1 : 1));
  return {
    refused: false,
    sumMilliamp: sum,
    shares: Object.fromEntries(returns.map(({ position, milliamp }) => [position, -milliamp / returned])),
    densitiesAmpPerSquareMetre: Object.fromEntries(densities.map(({ position, density }) => [position, density])),
    largest: densities[0]?.position ?? '',
  };
}
