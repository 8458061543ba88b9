// Which field of the prescription's form stands behind a row of the judged dose, so that a refusal can point at it with the
// limit, its layer and its source. Judges nothing.

import type { DoseJudgement, DoseRow } from './dose';
import { ceilings } from './ceilings';

type MontageFacts = {
  readonly rampUpSeconds: number;
  readonly electrodes: readonly { readonly position: string }[];
};

export type OverLimitField = {
  readonly path: string;
  readonly code: string;
  readonly facts: Readonly<Record<string, string | number>>;
};

function electrodePath(row: DoseRow, dose: MontageFacts, field: string): string {
  const at = dose.electrodes.findIndex(({ position }) => position === row.electrode);
  return `dose.electrodes.${Math.max(at, 0)}.${field}`;
}

function pathOf(row: DoseRow, dose: MontageFacts): string {
  switch (row.quantity) {
    case 'current':
    case 'minor':
    case 'site_limit':
      return 'dose.intensityMilliamp';
    case 'minutes':
    case 'charge':
      return 'dose.holdSeconds';
    case 'density':
    case 'area':
    case 'ring':
      return electrodePath(row, dose, 'areaSquareCentimetre');
    case 'shares':
      return electrodePath(row, dose, 'share');
    case 'per_day':
    case 'day_minutes':
      return 'schedule.maxPerDay';
    case 'gap':
      return 'schedule.minGapHours';
    case 'ramp': {
      const { rampUpSeconds: up } = dose;
      const isUpOut = up < ceilings.leastRampSeconds.value || up > ceilings.mostRampSeconds.value;
      return isUpOut ? 'dose.rampUpSeconds' : 'dose.rampDownSeconds';
    }
    case 'frequency':
      return 'dose.waveform';
    case 'unknown_fact':
      return 'dose';
  }
}

/** The limit that was crossed: the lower bound if the value is below it, else the site's or the ceiling. */
export function limitOf(row: DoseRow): number | undefined {
  const { value, floor } = row;
  if (floor !== undefined && value !== undefined && value < floor) return floor;
  return row.siteLimit ?? row.ceiling;
}

/** Millionths are as fine as any limit here; the rest is the last bit of a product. */
function told(fact: number | string): number | string {
  return typeof fact === 'number' ? Math.round(fact * 1_000_000) / 1_000_000 : fact;
}

/** One field a refused row: value, limit, unit, layer, source. Facts that the row does not know are left out. */
export function overLimitFields(judgement: DoseJudgement, dose: MontageFacts): OverLimitField[] {
  return judgement.rows
    .filter(({ tier }) => tier === 'refuse')
    .map((row) => {
      const all = {
        value: row.value,
        limit: limitOf(row),
        unit: row.unit,
        layer: row.layer,
        source: row.source,
        fact: row.fact,
      };
      const facts: Record<string, string | number> = {};
      for (const [name, fact] of Object.entries(all)) if (fact !== undefined && fact !== '') facts[name] = told(fact);
      return { path: pathOf(row, dose), code: row.quantity, facts };
    });
}
