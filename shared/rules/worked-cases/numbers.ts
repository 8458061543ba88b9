// Check values of dose arithmetic: kinds `tdcs`, `split`, `split-refuse`, `tacs`, `trns`, `delivered` (a device's
// samples), `fraction`, `rolling`, `curve`. Results in SI unless the key names another unit.

import { z } from 'zod';
import { ampPerSquareMetreOf, hourMilliseconds } from '@/shared/values/units';
import { deliveredFrom, fractionOf } from '../delivered';
import { chargeDensityOf, chargeOf, currentSplit, densityOf, halfCycleCharge, minutesOn } from '../dose/arithmetic';
import { dayWindow, rollingSum, weekWindow } from '../rolling';
import { plannedAt } from '../session';
import { kindOf } from './form';

const trapezoid = { intensity_mA: z.number(), rampUp_s: z.number(), hold_s: z.number(), rampDown_s: z.number() };
type Trapezoid = { intensity_mA: number; rampUp_s: number; hold_s: number; rampDown_s: number };

function trapezoidOf({ intensity_mA, rampUp_s, hold_s, rampDown_s }: Trapezoid) {
  return {
    intensityMilliamp: intensity_mA,
    rampUpSeconds: rampUp_s,
    holdSeconds: hold_s,
    rampDownSeconds: rampDown_s,
  };
}

export const tdcsNumbers = kindOf(z.strictObject({ ...trapezoid, smallestArea_cm2: z.number() }), (input) => {
  const dose = trapezoidOf(input);
  const charge = chargeOf(dose);
  return {
    charge_C: charge,
    chargeDensity_C_m2: chargeDensityOf(charge, input.smallestArea_cm2),
    currentDensity_A_m2: ampPerSquareMetreOf(densityOf(input.intensity_mA, input.smallestArea_cm2)),
    duration_s: minutesOn(dose) * 60,
  };
});

const perElectrode = z.record(z.string(), z.number());

export const splitNumbers = kindOf(
  z.strictObject({ currents_mA: perElectrode, areas_cm2: perElectrode }),
  ({ currents_mA, areas_cm2 }) => {
    const split = currentSplit(
      Object.entries(currents_mA).map(([position, milliamp]) => ({
        position,
        milliamp,
        areaSquareCentimetre: areas_cm2[position] ?? Number.NaN,
      })),
    );
    if (split.refused) return { refused: true, code: split.code, sum_mA: split.sumMilliamp };
    return {
      sum_mA: split.sumMilliamp,
      currentDensity_A_m2: split.densitiesAmpPerSquareMetre,
      largest: split.largest,
      share: split.shares,
    };
  },
);

export const tacsNumbers = kindOf(
  z.strictObject({
    peak_mA: z.number(),
    frequency_Hz: z.number(),
    smallestArea_cm2: z.number(),
    hold_s: z.number(),
  }),
  ({ peak_mA, frequency_Hz, smallestArea_cm2, hold_s }) => {
    const rms = peak_mA / Math.SQRT2;
    const halfCycle = halfCycleCharge(peak_mA, frequency_Hz);
    return {
      peakToPeak_mA: 2 * peak_mA,
      rms_mA: rms,
      chargePerHalfCycle_C: halfCycle,
      netCharge_C: 0,
      chargeDensityPerHalfCycle_C_m2: chargeDensityOf(halfCycle, smallestArea_cm2),
      peakCurrentDensity_A_m2: ampPerSquareMetreOf(densityOf(peak_mA, smallestArea_cm2)),
      rmsCurrentDensity_A_m2: ampPerSquareMetreOf(densityOf(rms, smallestArea_cm2)),
      cyclesInHold: frequency_Hz * hold_s,
    };
  },
);

export const trnsNumbers = kindOf(
  z.strictObject({
    rms_mA: z.number(),
    peak_mA: z.number(),
    band_Hz: z.tuple([z.number(), z.number()]),
    smallestArea_cm2: z.number(),
  }),
  ({ rms_mA, peak_mA, smallestArea_cm2 }) => ({
    rms_mA,
    peak_mA,
    crestFactor: peak_mA / rms_mA,
    // Mean of a half-normal distribution; true noise is clipped, hence "if".
    meanAbs_mA_ifGaussian: rms_mA * Math.sqrt(2 / Math.PI),
    netCharge_C: 0,
    rmsCurrentDensity_A_m2: ampPerSquareMetreOf(densityOf(rms_mA, smallestArea_cm2)),
    peakCurrentDensity_A_m2: ampPerSquareMetreOf(densityOf(peak_mA, smallestArea_cm2)),
  }),
);

const seconds = (milliseconds: number | undefined) => (milliseconds === undefined ? undefined : milliseconds / 1000);

export const deliveredNumbers = kindOf(
  z.strictObject({
    samples: z.array(z.tuple([z.number(), z.number(), z.number().nullable()])),
    maxGap_s: z.number().nullable(),
    planned_mA: z.number(),
    start_t_ms: z.number().optional(),
    final: z.boolean().optional(),
    planned_end_t_ms: z.number().optional(),
    fields: z.literal('[seq, t_ms, mA]'),
  }),
  ({ samples, maxGap_s, planned_mA, start_t_ms, final, planned_end_t_ms }) => {
    const delivered = deliveredFrom(
      samples.map(([sequence, milliseconds, milliamp]) => [milliseconds / 1000, milliamp, sequence]),
      {
        intensityMilliamp: planned_mA,
        maxGapSeconds: maxGap_s,
        startSeconds: seconds(start_t_ms),
        plannedEndSeconds: seconds(planned_end_t_ms),
        isFinal: final,
      },
    );
    return {
      conflict: delivered.conflicts.length > 0,
      measured_C: delivered.chargeCoulomb,
      gap_s: delivered.gapSeconds,
      upper_C: delivered.upperChargeCoulomb,
    };
  },
);

export const fractionNumbers = kindOf(
  z.strictObject({ prescribed_C: z.number(), delivered_C: z.number().nullable() }),
  ({ prescribed_C, delivered_C }) => ({ fraction: fractionOf(delivered_C, prescribed_C) }),
);

export const rollingNumbers = kindOf(
  z.strictObject({
    sessions: z.array(z.tuple([z.number(), z.number()])),
    now_h: z.number(),
    fields: z.literal('[end_h, charge_C]'),
  }),
  ({ sessions, now_h }) => {
    const counted = sessions.map(([end, amount]) => ({ endedAt: end * hourMilliseconds, amount }));
    const now = now_h * hourMilliseconds;
    return { last24h_C: rollingSum(counted, now, dayWindow), last7d_C: rollingSum(counted, now, weekWindow) };
  },
);

export const curveNumbers = kindOf(z.strictObject({ ...trapezoid, at_s: z.array(z.number()) }), (input) => {
  const points = input.at_s.map((at) => plannedAt(trapezoidOf(input), at));
  return {
    current_mA: points.map(({ currentMilliamp }) => currentMilliamp),
    charge_C: points.map(({ chargeCoulomb }) => chargeCoulomb),
  };
});
