// What a review may decide about a row and its lockout, and who may. A safety or review lockout is a clinician's, a device hold
// also a coordinator's; a hold until tomorrow ends by time and nobody lifts it.

import type { Role } from '@/shared/values/roles';

export type ReviewDecision = 'lift' | 'keep' | 'noted' | 'done';
export type ReviewFacts = {
  readonly decision: ReviewDecision;
  readonly role: Role;
  readonly isItemClosed: boolean;
  readonly hasGrading: boolean;
  /** The row's lockout, if it is open. */
  readonly lockoutLevel: 'safety' | 'review' | 'device' | 'hold' | null;
};
export type ReviewAnswer =
  | {
      readonly allowed: false;
      readonly code: 'worklist.closed' | 'review.clinician_decides' | 'review.nothing_to_lift' | 'review.lockout_open';
    }
  | { readonly allowed: true; readonly closesItem: boolean; readonly closesLockout: boolean };

export function reviewing({ decision, role, isItemClosed, hasGrading, lockoutLevel }: ReviewFacts): ReviewAnswer {
  if (isItemClosed) return { allowed: false, code: 'worklist.closed' };
  // Grading an event is a clinician's, like the lockouts themselves.
  if (hasGrading && role !== 'clinician') return { allowed: false, code: 'review.clinician_decides' };
  if (decision === 'keep') return { allowed: true, closesItem: false, closesLockout: false };
  if (decision !== 'lift') {
    if (lockoutLevel !== null) return { allowed: false, code: 'review.lockout_open' };
    return { allowed: true, closesItem: true, closesLockout: false };
  }
  if (lockoutLevel === null || lockoutLevel === 'hold') return { allowed: false, code: 'review.nothing_to_lift' };
  const mayLift = role === 'clinician' || (role === 'coordinator' && lockoutLevel === 'device');
  return mayLift
    ? { allowed: true, closesItem: true, closesLockout: true }
    : { allowed: false, code: 'review.clinician_decides' };
}
