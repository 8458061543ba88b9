// Who may record which screening form, and what a site's protocol makes of it. The judgement of the answers themselves is screening.ts'.

import type { Role } from '@/shared/values/roles';
import { judgeScreening, type ScreeningAnswers } from './screening';

export type ScreeningRefusal = {
  readonly code: 'screening.item_unknown' | 'screening.reason_missing' | 'screening.clinician_decides';
  /** Ids of the items that stand in the way. */
  readonly items: readonly string[];
};
export type ScreeningRecord =
  | { readonly refusal: ScreeningRefusal }
  | { readonly refusal: null; readonly outcome: 'clear' | 'excluded' | 'incomplete' };

/** Pregnancy, or the chance of it, is relative, and absolute where the protocol says so (guidance §1). */
const pregnancyItem = 'pregnancy';

export function screeningRecord(
  answers: ScreeningAnswers,
  by: Role,
  protocol: { readonly excludesPregnancy: boolean },
): ScreeningRecord {
  const judged = judgeScreening(answers);
  if (judged.unknown.length > 0) return { refusal: { code: 'screening.item_unknown', items: judged.unknown } };
  if (judged.needsReason.length > 0)
    return { refusal: { code: 'screening.reason_missing', items: judged.needsReason } };
  // Going on in spite of a relative item is a decision about treatment (guidance R2).
  if (judged.reasoned.length > 0 && by !== 'clinician') {
    return { refusal: { code: 'screening.clinician_decides', items: judged.reasoned } };
  }
  const isExcludedHere = protocol.excludesPregnancy && answers[pregnancyItem]?.answer === 'yes';
  return { refusal: null, outcome: isExcludedHere ? 'excluded' : judged.outcome };
}
