// The dose of a signed prescription, judged again by the limits and the age of today. A site may have become stricter since the
// signature, or may treat minors no more. Judges by the rules of the dose and adds none.

import { z } from 'zod';
import { electrodeShapes, polarities, type Tier, type Waveform } from '@/shared/values/codes';
import type { SiteLimits } from '@/shared/values/protocol-settings';
import { hourMilliseconds, milliampOf, secondsOf } from '@/shared/values/units';
import { judgeDose, worstTier } from '../dose';
import { limitOf } from '../prescription-fields';
import type { OverLimitFacts } from './facts';

export type RecordedDose = {
  readonly tier: Tier;
  readonly waveform: Waveform;
  readonly intensityUa: number;
  readonly rampUpMs: number;
  readonly holdMs: number;
  readonly rampDownMs: number;
  readonly electrodes: unknown;
  readonly maxPerDay: number;
  readonly minGapMs: number;
};

const recordedElectrodes = z.array(
  z.object({
    position: z.string(),
    polarity: z.enum(polarities),
    shape: z.enum(electrodeShapes),
    areaSquareCentimetre: z.number(),
    share: z.number(),
  }),
);

/** The tier that holds today, never better than the one that was signed, and every row that today's limits refuse. */
export function doseNow(
  recorded: RecordedDose,
  ageYears: number | undefined,
  limits: SiteLimits | undefined,
): { readonly tier: Tier; readonly overLimits: readonly OverLimitFacts[] } {
  const electrodes = recordedElectrodes.safeParse(recorded.electrodes);
  const { verdict, rows } = judgeDose(
    {
      waveform: recorded.waveform,
      amplitude: { valueMilliamp: milliampOf(recorded.intensityUa), meaning: 'peak' },
      rampUpSeconds: secondsOf(recorded.rampUpMs),
      holdSeconds: secondsOf(recorded.holdMs),
      rampDownSeconds: secondsOf(recorded.rampDownMs),
      electrodes: electrodes.success ? electrodes.data : undefined,
      sessionsPerDay: recorded.maxPerDay,
      minGapHours: recorded.minGapMs / hourMilliseconds,
    },
    ageYears,
    limits,
  );
  return {
    // A refused row is told by itself; the tier says who must have signed.
    tier: verdict === 'refuse' ? recorded.tier : worstTier([recorded.tier, verdict]),
    overLimits: rows
      .filter(({ tier }) => tier === 'refuse')
      .map((row) => ({
        quantity: row.quantity,
        value: row.value,
        limit: limitOf(row),
        unit: row.unit,
        layer: row.layer,
        source: row.source,
      })),
  };
}
