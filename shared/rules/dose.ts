// Dose arithmetic and its judgement against the tiers. Total: any shape gives an answer; what is not known refuses.

import type {
  AmplitudeMeaning,
  DoseQuantity,
  ElectrodeShape,
  LimitLayer,
  Polarity,
  Tier,
  Waveform,
} from '@/shared/values/codes';
import type { SiteLimits } from './site-limits';

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
  readonly direction: 'at_most' | 'at_least';
  /** The layer of the limit that decides the tier. */
  readonly layer?: LimitLayer;
  readonly source: string;
  /** What is not known, or what a site would have to set. */
  readonly fact?: string;
  readonly electrode?: string;
};

export type ComputedDose = {
  readonly peakMilliamp?: number;
  readonly peakToPeakMilliamp?: number;
  readonly rmsMilliamp?: number;
  readonly minutes?: number;
  readonly chargeCoulomb?: number;
  readonly maxDensityMilliampPerSquareCentimetre?: number;
  readonly halfCycleChargeMicrocoulomb?: number;
};

export type DoseJudgement = {
  readonly verdict: Tier;
  /** Every row that could be judged, in a fixed order. */
  readonly rows: readonly DoseRow[];
  /** The rows above `accept`. */
  readonly over: readonly DoseRow[];
  readonly computed: ComputedDose;
};

export declare function chargeOf(dose: TrapezoidFacts): number;
export declare function minutesOn(dose: Omit<TrapezoidFacts, 'intensityMilliamp'>): number;
export declare function densityOf(milliamp: number, areaSquareCentimetre: number): number;
export declare function halfCycleCharge(peakMilliamp: number, frequencyHertz: number): number;
export declare function peakOf(dose: DoseFacts): number | undefined;
export declare function rmsOf(dose: DoseFacts): number | undefined;
/** The dose of a contract's form: `intensityMilliamp` is the peak. */
export declare function doseFactsOf(dose: {
  waveform: Waveform;
  intensityMilliamp: number;
  rampUpSeconds: number;
  holdSeconds: number;
  rampDownSeconds: number;
  electrodes: readonly ElectrodeFacts[];
  sessionsPerDay: number;
  minGapHours: number;
}): DoseFacts;
export declare function judgeDose(
  dose: DoseFacts | undefined,
  ageYears: number | undefined,
  siteLimits?: Partial<SiteLimits>,
): DoseJudgement;
/** Full years on a local day. Born 29 February: a year older on 1 March (own choice). */
export declare function ageYearsOn(bornOn: string, localDate: string): number | undefined;
