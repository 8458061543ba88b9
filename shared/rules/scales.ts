// Scoring of the questionnaires that ship: numbers only. Their sentences stand in locales/.

import type { ScaleName } from '@/shared/values/codes';

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
  | { readonly error: 'wrong_count' | 'out_of_range' | 'unknown_scale' }
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

export declare const scales: Readonly<Record<ScaleName, ScaleDefinition>>;
export declare function scoreScale(name: ScaleName, answers: readonly (number | null)[]): ScaleScore;
export declare function changeOf(name: ScaleName, before: number, after: number, worseBy?: number): ScaleChange;
