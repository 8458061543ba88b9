// Reads a prescribed dose into numbers and lists the facts that are not known. Judges nothing.

import {
  amplitudeMeanings,
  electrodeShapes,
  polarities,
  waveforms,
  type ElectrodeShape,
  type Polarity,
  type Waveform,
} from '@/shared/values/codes';
import { Known } from '../known';
import { amplitudePeakOf, chargeOf, densityOf, minutesOn, peakOf } from './arithmetic';
import type { DoseFacts, ElectrodeFacts } from './facts';

export type ReadElectrode = {
  readonly position?: string;
  readonly polarity?: Polarity;
  readonly shape?: ElectrodeShape;
  readonly areaSquareCentimetre?: number;
  readonly share?: number;
  /** Peak current through it, its own share only. */
  readonly milliamp?: number;
  readonly density?: number;
};
export type ReadDose = {
  readonly waveform?: Waveform;
  readonly amplitudePeakMilliamp?: number;
  readonly peakMilliamp?: number;
  readonly rampUpSeconds?: number;
  readonly rampDownSeconds?: number;
  readonly minutes?: number;
  readonly chargeCoulomb?: number;
  readonly frequencyHertz?: number;
  /** From 0 up to, not with, 360. */
  readonly phaseDegrees?: number;
  readonly bandHertz?: readonly [number, number];
  readonly sessionsPerDay?: number;
  readonly minGapHours?: number;
  readonly electrodes?: readonly ReadElectrode[];
  readonly ageYears?: number;
  readonly missing: readonly string[];
};

function positive(known: Known, name: string, value: number | undefined): number | undefined {
  // 0 sessions a day or a pad without area is no answer.
  return known.amount(name, value === 0 ? undefined : value);
}

function readAmplitude(known: Known, dose: DoseFacts, waveform: Waveform | undefined): void {
  const amplitude = known.some('dose.amplitude', dose.amplitude);
  known.some(
    'dose.amplitude.value_mA',
    Number.isFinite(amplitude?.valueMilliamp) ? amplitude?.valueMilliamp : undefined,
  );
  const meaning = known.word('dose.amplitude.meaning', amplitude?.meaning, amplitudeMeanings);
  if (waveform === undefined || meaning === undefined || amplitudePeakOf(dose) !== undefined) return;
  if (waveform === 'tRNS') known.some('dose.amplitude.peak_mA', undefined);
  if (waveform === 'tDCS') known.some('dose.amplitude.meaning', undefined);
}

function readElectrode(
  known: Known,
  electrode: ElectrodeFacts,
  index: number,
  peakMilliamp: number | undefined,
): ReadElectrode {
  const name = `dose.electrodes.${index}`;
  const polarity = known.word(`${name}.polarity`, electrode.polarity, polarities);
  const shape = known.word(`${name}.shape`, electrode.shape, electrodeShapes);
  const area = positive(known, `${name}.area_cm2`, electrode.areaSquareCentimetre);
  const share = known.amount(`${name}.share`, electrode.share);
  const milliamp = peakMilliamp === undefined || share === undefined ? undefined : peakMilliamp * share;
  const density = milliamp === undefined || area === undefined ? undefined : densityOf(milliamp, area);
  return { position: electrode.position, polarity, shape, areaSquareCentimetre: area, share, milliamp, density };
}

/** Peak for direct current, the offset for the others: a sine or noise has no net charge of its own. */
function netMilliamp(dose: DoseFacts, waveform: Waveform | undefined): number | undefined {
  if (waveform === undefined) return undefined;
  return waveform === 'tDCS' ? peakOf(dose) : Math.abs(dose.offsetMilliamp ?? 0);
}

const fullTurnDegrees = 360;

function readPhase(known: Known, phaseDegrees = 0): number | undefined {
  const isMeant = Number.isFinite(phaseDegrees) && Math.abs(phaseDegrees) <= fullTurnDegrees;
  const phase = known.some('dose.phase_deg', isMeant ? phaseDegrees : undefined);
  return phase === undefined ? undefined : (phase + fullTurnDegrees) % fullTurnDegrees;
}

export function readDose(facts: DoseFacts | undefined, age: number | undefined): ReadDose {
  const known = new Known();
  const dose = known.some('dose', facts);
  const ageYears = known.amount('age_years', age);
  if (dose === undefined) return { ageYears, missing: known.missing };
  const waveform = known.word('dose.waveform', dose.waveform, waveforms);
  readAmplitude(known, dose, waveform);
  const offset = dose.offsetMilliamp ?? 0;
  known.some('dose.offset_mA', Number.isFinite(offset) ? offset : undefined);
  const holdSeconds = known.amount('dose.hold_s', dose.holdSeconds);
  const rampUpSeconds = known.amount('dose.ramp_up_s', dose.rampUpSeconds);
  const rampDownSeconds = known.amount('dose.ramp_down_s', dose.rampDownSeconds);
  const frequencyHertz = waveform === 'tACS' ? known.amount('dose.frequency_Hz', dose.frequencyHertz) : undefined;
  const phaseDegrees = waveform === 'tACS' ? readPhase(known, dose.phaseDegrees) : undefined;
  const bandIsKnown = dose.bandHertz?.length === 2 && dose.bandHertz.every(Number.isFinite);
  const bandHertz =
    waveform === 'tRNS' ? known.some('dose.band_Hz', bandIsKnown ? dose.bandHertz : undefined) : undefined;
  const peakMilliamp = peakOf(dose);
  const electrodes = known.some('dose.electrodes', dose.electrodes);
  const isTimed = holdSeconds !== undefined && rampUpSeconds !== undefined && rampDownSeconds !== undefined;
  const intensityMilliamp = netMilliamp(dose, waveform);
  return {
    waveform,
    amplitudePeakMilliamp: amplitudePeakOf(dose),
    peakMilliamp,
    rampUpSeconds,
    rampDownSeconds,
    minutes: isTimed ? minutesOn({ rampUpSeconds, holdSeconds, rampDownSeconds }) : undefined,
    chargeCoulomb:
      isTimed && intensityMilliamp !== undefined
        ? chargeOf({ intensityMilliamp, rampUpSeconds, holdSeconds, rampDownSeconds })
        : undefined,
    frequencyHertz,
    phaseDegrees,
    bandHertz,
    sessionsPerDay: positive(known, 'dose.sessions_per_day', dose.sessionsPerDay),
    minGapHours: known.amount('dose.min_gap_h', dose.minGapHours),
    electrodes: electrodes?.map((electrode, index) => readElectrode(known, electrode, index, peakMilliamp)),
    ageYears,
    missing: known.missing,
  };
}
