// The order of the worklist, and which finished sessions are worth a look though nothing locked.

import type { Completeness, WorklistLevel } from '@/shared/values/codes';

export type WorklistRank = readonly [owned: number, level: number, age: number];
export type WorklistFacts = {
  readonly level: WorklistLevel;
  readonly ownerAccountId: string | null;
  readonly openedAt: string;
};
export type SessionReportFacts = {
  /** Number within the course. */
  readonly number: number;
  readonly endReason: string | null;
  readonly completeness: Completeness | null;
  readonly effects: readonly { readonly kind: string; readonly strength: number }[];
  readonly gapSeconds?: number;
  readonly conflicts?: number;
};
export type LookReason = 'strong_effect' | 'stopped_early' | 'first_session' | 'record_conflict';

export declare function worklistRank(item: WorklistFacts): WorklistRank;
export declare function compareRank(a: WorklistRank, b: WorklistRank): number;
export declare function rankWorklist<T extends WorklistFacts>(items: readonly T[]): T[];
export declare function reportWorthLooking(report: SessionReportFacts): LookReason[];
