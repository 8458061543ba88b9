// Worked cases of kind `dose`: a prescription, the person's age, site limits.

import { z } from 'zod';
import { amplitudeMeanings, electrodeShapes, polarities, waveforms } from '@/shared/values/codes';
import { judgeDose, type DoseFacts, type DoseRow } from '../dose';
import type { SiteLimits } from '@/shared/values/protocol-settings';
import { kindOf, present } from './form';

const number = z.number().optional();
const doseSchema = z.strictObject({
  waveform: z.enum(waveforms).optional(),
  amplitude: z
    .strictObject({ value_mA: number, meaning: z.enum(amplitudeMeanings).optional(), peak_mA: number })
    .optional(),
  offset_mA: number,
  hold_s: number,
  ramp_up_s: number,
  ramp_down_s: number,
  frequency_Hz: number,
  band_Hz: z.tuple([z.number(), z.number()]).optional(),
  sessions_per_day: number,
  min_gap_h: number,
  electrodes: z
    .array(
      z.strictObject({
        name: z.string().optional(),
        polarity: z.enum(polarities).optional(),
        shape: z.enum(electrodeShapes).optional(),
        area_cm2: number,
        share: number,
      }),
    )
    .optional(),
});
const siteSchema = z.strictObject({
  max_current_mA: number,
  max_minutes: number,
  max_charge_C: number,
  minor_limit_mA: number,
  ring_row: z.boolean().optional(),
});
const givenSchema = z.strictObject({
  age_years: number,
  dose: doseSchema.optional(),
  site: siteSchema.optional(),
});

function doseOf(dose: z.infer<typeof doseSchema>): DoseFacts {
  return {
    waveform: dose.waveform,
    amplitude: dose.amplitude && {
      valueMilliamp: dose.amplitude.value_mA,
      meaning: dose.amplitude.meaning,
      peakMilliamp: dose.amplitude.peak_mA,
    },
    offsetMilliamp: dose.offset_mA,
    holdSeconds: dose.hold_s,
    rampUpSeconds: dose.ramp_up_s,
    rampDownSeconds: dose.ramp_down_s,
    frequencyHertz: dose.frequency_Hz,
    bandHertz: dose.band_Hz,
    sessionsPerDay: dose.sessions_per_day,
    minGapHours: dose.min_gap_h,
    electrodes: dose.electrodes?.map(({ name, polarity, shape, area_cm2, share }) => ({
      position: name,
      polarity,
      shape,
      areaSquareCentimetre: area_cm2,
      share,
    })),
  };
}

function limitsOf(site: z.infer<typeof siteSchema> | undefined): Partial<SiteLimits> {
  return {
    mostCurrentMilliamp: site?.max_current_mA,
    mostMinutes: site?.max_minutes,
    mostChargeCoulomb: site?.max_charge_C,
    minorCurrentMilliamp: site?.minor_limit_mA,
    allowsRings: site?.ring_row,
  };
}

/** The file names a layer where a site's own limit is broken (of minors never), or where it reaches above a ceiling. */
function layerOf({ quantity, tier, layer }: DoseRow): string | undefined {
  if (quantity === 'site_limit') return layer;
  return layer === 'site' && tier === 'refuse' && quantity !== 'minor' ? layer : undefined;
}

export const doseKind = kindOf(givenSchema, ({ age_years, dose, site }) => {
  const { verdict, over, computed } = judgeDose(dose && doseOf(dose), age_years, limitsOf(site));
  const rows = over.map((row) => present({ row: row.quantity, tier: row.tier, layer: layerOf(row), fact: row.fact }));
  return {
    verdict,
    // Rows are compared as a set: a site that reaches above two ceilings says so once.
    over: rows.filter((row, index) => rows.findIndex((each) => JSON.stringify(each) === JSON.stringify(row)) === index),
    computed: present({
      peak_mA: computed.peakMilliamp,
      peak_to_peak_mA: computed.peakToPeakMilliamp,
      rms_mA: computed.rmsMilliamp,
      minutes: computed.minutes,
      charge_C: computed.chargeCoulomb,
      max_density_mA_cm2: computed.maxDensityMilliampPerSquareCentimetre,
      half_cycle_charge_uC: computed.halfCycleChargeMicrocoulomb,
    }),
  };
});
