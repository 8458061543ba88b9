// The facts of a prescribed dose and the rows of its judgement. Amounts in mA, s, Hz, h, cm²; shares 0 to 1. No rules.

import type {
  AmplitudeMeaning,
  DoseQuantity,
  ElectrodeShape,
  LimitLayer,
  Polarity,
  Tier,
  Waveform,
} from '@/shared/values/codes';

export type TrapezoidFacts = {
  readonly intensityMilliamp: number;
  readonly rampUpSeconds: number;
  readonly holdSeconds: number;
  readonly rampDownSeconds: number;
};

export type ElectrodeFacts = {
  readonly position?: string;
  readonly polarity?: Polarity;
  readonly shape?: ElectrodeShape;
  readonly areaSquareCentimetre?: number;
  /** Part of the total current of its polarity, 0 to 1. */
  readonly share?: number;
};

export type DoseFacts = {
  readonly waveform?: Waveform;
  readonly amplitude?: {
    readonly valueMilliamp?: number;
    readonly meaning?: AmplitudeMeaning;
    /** tRNS given by r.m.s.: the peak at which the generator clips. */
    readonly peakMilliamp?: number;
  };
  /** 0 if absent. */
  readonly offsetMilliamp?: number;
  readonly holdSeconds?: number;
  readonly rampUpSeconds?: number;
  readonly rampDownSeconds?: number;
  readonly frequencyHertz?: number;
  /** tACS: of the sine at its start, −360 to 360; 0 if absent. One generator has one phase, so no limit hangs on it. */
  readonly phaseDegrees?: number;
  readonly bandHertz?: readonly [number, number];
  readonly sessionsPerDay?: number;
  readonly minGapHours?: number;
  readonly electrodes?: readonly ElectrodeFacts[];
};

export type DoseRow = {
  readonly quantity: DoseQuantity;
  readonly tier: Tier;
  readonly value?: number;
  readonly unit: string;
  /** One signature up to here (`at_most`) or from here on (`at_least`). */
  readonly routineLimit?: number;
  /** The site's limit with two signatures. */
  readonly siteLimit?: number;
  readonly ceiling?: number;
  /** Least allowed value of a row that is bounded on both sides. */
  readonly floor?: number;
  readonly direction: 'at_most' | 'at_least';
  /** The layer of the limit that decides the tier. */
  readonly layer?: LimitLayer;
  readonly source: string;
  /** What is not known, or what a site would have to set. */
  readonly fact?: string;
  /** Position of the electrode that decides. */
  readonly electrode?: string;
  /** Of `site_limit`: the field of the site's protocol. */
  readonly field?: string;
};

export type ComputedDose = {
  readonly peakMilliamp?: number;
  readonly peakToPeakMilliamp?: number;
  readonly rmsMilliamp?: number;
  readonly minutes?: number;
  readonly chargeCoulomb?: number;
  readonly maxDensityMilliampPerSquareCentimetre?: number;
  readonly halfCycleChargeMicrocoulomb?: number;
  /** tACS: from 0 up to, not with, 360. */
  readonly phaseDegrees?: number;
};

export type DoseJudgement = {
  readonly verdict: Tier;
  /** Every row that could be judged, in a fixed order. */
  readonly rows: readonly DoseRow[];
  /** The rows above `accept`. */
  readonly over: readonly DoseRow[];
  readonly computed: ComputedDose;
};
