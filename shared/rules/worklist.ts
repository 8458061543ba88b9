// The order of the worklist, and which finished sessions are worth a look though nothing locked. It sorts; it never
// sets or lifts a lockout.

import { worklistLevels, type Completeness, type WorklistLevel } from '@/shared/values/codes';
import { parseInstant } from '@/shared/values/zone';

/** Smaller comes first, part by part: the level, so that a safety matter stays on top whoever has it; nobody's before somebody's; the newest. */
export type WorklistRank = readonly [level: number, owned: number, age: number];
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

export function worklistRank({ level, ownerAccountId, openedAt }: WorklistFacts): WorklistRank {
  return [worklistLevels.indexOf(level), ownerAccountId === null ? 0 : 1, -(parseInstant(openedAt) ?? 0)];
}

export function compareRank(a: WorklistRank, b: WorklistRank): number {
  return a[0] - b[0] || a[1] - b[1] || a[2] - b[2];
}

/** A sorted copy; equals keep their order. */
export function rankWorklist<T extends WorklistFacts>(items: readonly T[]): T[] {
  return items
    .map((item) => ({ item, rank: worklistRank(item) }))
    .sort((a, b) => compareRank(a.rank, b.rank))
    .map(({ item }) => item);
}

/** Own choices: from a moderate effect on, and from half a minute without samples on, somebody looks. */
const strongEffect = 4;
const longGapSeconds = 30;

/** Why a finished session should be looked at; empty = it needs nobody. All own choices. */
export function reportWorthLooking(report: SessionReportFacts): LookReason[] {
  const { number, endReason, completeness, effects, gapSeconds = 0, conflicts = 0 } = report;
  const reasons: LookReason[] = [];
  if (effects.some(({ strength }) => strength >= strongEffect)) reasons.push('strong_effect');
  if (endReason !== 'complete' || completeness !== 'complete') reasons.push('stopped_early');
  if (number === 1) reasons.push('first_session');
  if (gapSeconds >= longGapSeconds || conflicts > 0) reasons.push('record_conflict');
  return reasons;
}
