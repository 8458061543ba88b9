// The dose of a stored prescription in the units that people and rules use. Decides nothing about it.

import { z } from 'zod';
import { coulombOf, milliampOf, minuteMilliseconds, secondsOf } from '@/shared/values/units';

/** Same shape as `DoseView` of the contract. */
export interface DoseRecord {
  waveform: 'tDCS';
  intensityMilliamp: number;
  rampUpSeconds: number;
  holdSeconds: number;
  rampDownSeconds: number;
  chargeCoulomb: number;
  minutes: number;
  electrodes: { position: string; polarity: 'anode' | 'cathode'; areaSquareCentimetre: number; share: number }[];
}

const storedElectrodes = z.array(
  z.object({
    position: z.string(),
    polarity: z.enum(['anode', 'cathode']),
    areaSquareCentimetre: z.number(),
    share: z.number(),
  }),
);

export interface StoredDose {
  waveform: 'tDCS';
  intensityUa: number;
  rampUpMs: number;
  holdMs: number;
  rampDownMs: number;
  chargeUc: number;
  onMs: number;
  electrodes: unknown;
}

export function doseOf(row: StoredDose): DoseRecord {
  return {
    waveform: row.waveform,
    intensityMilliamp: milliampOf(row.intensityUa),
    rampUpSeconds: secondsOf(row.rampUpMs),
    holdSeconds: secondsOf(row.holdMs),
    rampDownSeconds: secondsOf(row.rampDownMs),
    chargeCoulomb: coulombOf(row.chargeUc),
    minutes: row.onMs / minuteMilliseconds,
    electrodes: storedElectrodes.parse(row.electrodes),
  };
}
