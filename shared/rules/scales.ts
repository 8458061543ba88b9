// Scoring of the questionnaires that ship: numbers only. Their sentences stand in locales/.

import type { ScaleName } from '@/shared/values/codes';
import { atMost } from '@/shared/values/units';

export type ScaleDefinition = {
  readonly items: number;
  readonly min: number;
  readonly max: number;
  /** Least total of each band, and its word. */
  readonly bands: readonly (readonly [from: number, word: string])[];
  readonly positiveAt: number | null;
  readonly maxMissing: number;
  /** Counted from 1. */
  readonly selfHarmItem: number | null;
  readonly worseBy: number | null;
  readonly importantChange?: { readonly points: number; readonly percent: number };
  readonly source: string;
};
export type ScaleScore =
  | { readonly error: 'wrong_count' | 'out_of_range' }
  | {
      readonly missing: readonly number[];
      readonly total: number | null;
      readonly band: string | null;
      readonly prorated?: boolean;
      readonly positive?: boolean;
      readonly selfHarm?: 'zero' | 'above_0' | 'not_known';
      readonly effect?: 'none' | 'contact' | 'safety_lockout';
      readonly algorithm?: 'none' | 'other' | 'major';
    };
export type ScaleChange = {
  readonly points: number;
  readonly percent: number | null;
  readonly importantByPoints?: boolean;
  readonly importantByPercent?: boolean | null;
  readonly worseBoundReached?: boolean;
};

const phqBands = [
  [0, 'minimal'],
  [5, 'mild'],
  [10, 'moderate'],
  [15, 'moderately severe'],
  [20, 'severe'],
] as const;

/** A band is a word for the staff's screen, not a diagnosis. Missing rules and bounds are own choices unless noted. */
export const scales: Readonly<Record<ScaleName, ScaleDefinition>> = {
  'PHQ-9': {
    items: 9,
    min: 0,
    max: 3,
    bands: phqBands,
    positiveAt: 10,
    maxMissing: 2,
    selfHarmItem: 9,
    worseBy: 5,
    source: 'Kroenke, Spitzer, Williams 2001',
  },
  'PHQ-8': {
    items: 8,
    min: 0,
    max: 3,
    bands: phqBands,
    positiveAt: 10,
    maxMissing: 1,
    selfHarmItem: null,
    worseBy: 5,
    source: 'Kroenke et al. 2009',
  },
  'PHQ-2': {
    items: 2,
    min: 0,
    max: 3,
    bands: [
      [0, 'negative'],
      [3, 'positive'],
    ],
    positiveAt: 3,
    maxMissing: 0,
    selfHarmItem: null,
    worseBy: 2,
    source: 'Kroenke, Spitzer, Williams 2003',
  },
  'GAD-7': {
    items: 7,
    min: 0,
    max: 3,
    bands: [
      [0, 'minimal'],
      [5, 'mild'],
      [10, 'moderate'],
      [15, 'severe'],
    ],
    positiveAt: 10,
    maxMissing: 1,
    selfHarmItem: null,
    worseBy: 4,
    source: 'Spitzer, Kroenke, Williams, Löwe 2006',
  },
  'pain-NRS': {
    items: 1,
    min: 0,
    max: 10,
    bands: [
      [0, 'none'],
      [1, 'mild'],
      [4, 'moderate'],
      [7, 'severe'],
    ],
    positiveAt: null,
    maxMissing: 0,
    selfHarmItem: null,
    worseBy: 2,
    importantChange: { points: -2, percent: -30 },
    source: 'Farrar et al. 2001',
  },
  PGIC: {
    items: 1,
    min: 1,
    max: 7,
    bands: [
      [1, 'responder'],
      [3, 'not a responder'],
    ],
    positiveAt: null,
    maxMissing: 0,
    selfHarmItem: null,
    worseBy: null,
    source: 'after Guy 1976; Farrar et al. 2001',
  },
};

function bandOf(scale: ScaleDefinition, total: number): string | null {
  return scale.bands.filter(([from]) => total >= from).at(-1)?.[1] ?? null;
}

/** Above 0 acts at once, whatever the sum; left out, somebody asks again. */
function selfHarmOf(scale: ScaleDefinition, answers: readonly (number | null)[]): Partial<ScaleScore> {
  if (scale.selfHarmItem === null) return {};
  const answer = answers[scale.selfHarmItem - 1] ?? null;
  if (answer === null) return { selfHarm: 'not_known', effect: 'contact' };
  return answer > 0 ? { selfHarm: 'above_0', effect: 'safety_lockout' } : { selfHarm: 'zero', effect: 'none' };
}

/** PHQ-9's own algorithm (its manual): five or more at ≥ 2, item 9 from ≥ 1, with item 1 or 2 among them. */
function algorithmOf(answers: readonly (number | null)[]): 'none' | 'other' | 'major' {
  const counts = answers.map((answer, index) => (answer ?? 0) >= (index === 8 ? 1 : 2));
  const symptoms = counts.filter(Boolean).length;
  if (counts[0] !== true && counts[1] !== true) return 'none';
  if (symptoms >= 5) return 'major';
  return symptoms >= 2 ? 'other' : 'none';
}

/** Answers in item order, null = not answered. Proration: sum × items / answered, rounded half up. */
export function scoreScale(name: ScaleName, answers: readonly (number | null)[]): ScaleScore {
  const scale = scales[name];
  if (answers.length !== scale.items) return { error: 'wrong_count' };
  const given = answers.filter((answer) => answer !== null);
  if (!given.every((answer) => Number.isInteger(answer) && answer >= scale.min && answer <= scale.max)) {
    return { error: 'out_of_range' };
  }
  const missing = answers.flatMap((answer, index) => (answer === null ? [index + 1] : []));
  const selfHarm = selfHarmOf(scale, answers);
  if (missing.length > scale.maxMissing) return { missing, total: null, band: null, ...selfHarm };
  const sum = given.reduce((total, answer) => total + answer, 0);
  const total = Math.floor((sum * scale.items) / given.length + 0.5);
  return {
    missing,
    total,
    band: bandOf(scale, total),
    prorated: missing.length > 0,
    ...(scale.positiveAt === null ? {} : { positive: total >= scale.positiveAt }),
    ...selfHarm,
    ...(name === 'PHQ-9' && missing.length === 0 ? { algorithm: algorithmOf(answers) } : {}),
  };
}

/** Change between two totals; higher is worse. Percent of the first, null where that was 0. */
export function changeOf(name: ScaleName, before: number, after: number, worseBy?: number): ScaleChange {
  const { importantChange, worseBy: shipped } = scales[name];
  const points = after - before;
  const percent = before === 0 ? null : (100 * points) / before;
  const bound = worseBy ?? shipped;
  return {
    points,
    percent,
    ...(importantChange === undefined
      ? {}
      : {
          importantByPoints: atMost(points, importantChange.points),
          importantByPercent: percent === null ? null : atMost(percent, importantChange.percent),
        }),
    ...(bound === null ? {} : { worseBoundReached: points >= bound }),
  };
}
