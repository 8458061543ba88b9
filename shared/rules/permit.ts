// The life of a permit: when it ends, whether a device may start on it, whether one may be issued, what it releases.

import type { PermitExpiryCause, PermitReasonCode } from '@/shared/values/codes';

export type PermitFacts = {
  readonly id?: string;
  readonly deviceId?: string;
  readonly prescriptionVersion?: number;
  readonly counter?: number;
  readonly issuedAt?: string;
  readonly expiresAt?: string;
  /** Idempotency key it was asked with. */
  readonly key?: string;
  readonly isUsed?: boolean;
  readonly chargeCoulomb?: number;
  readonly minutes?: number;
};
export type PermitPresentFacts = {
  readonly prescriptionVersion?: number;
  readonly isPaused?: boolean;
  readonly isLocked?: boolean;
  readonly deviceLastCounter?: number;
  readonly precheckAnsweredAt?: string;
  readonly zone?: string;
  readonly hoursFrom?: string;
  readonly hoursTo?: string;
  readonly prescriptionExpiresAt?: string;
};
export type PermitExpiry =
  | { readonly known: true; readonly expiresAt: string; readonly expiresBy: PermitExpiryCause }
  | { readonly known: false; readonly facts: readonly string[] };
export type PermitAnswer = {
  readonly valid: boolean;
  readonly reasons: readonly PermitReasonCode[];
  /** With `unknown_fact`. */
  readonly facts: readonly string[];
};
export type IssueAnswer = PermitAnswer & {
  readonly isNewPermit: boolean;
  readonly permitId?: string;
  readonly expiresAt?: string;
  readonly expiresBy?: PermitExpiryCause;
};
export type ReleaseEvidence =
  | {
      readonly type: 'record';
      readonly isFinal?: boolean;
      readonly upperChargeCoulomb?: number;
      readonly minutes?: number;
    }
  | { readonly type: 'readout'; readonly showsUse?: boolean }
  | { readonly type: 'statement' };
export type Release = {
  readonly state: 'closed' | 'void' | 'reserved';
  readonly chargeCoulomb?: number;
  readonly minutes?: number;
};

export declare function permitExpiry(present: PermitPresentFacts | undefined, now: string): PermitExpiry;
export declare function permitState(
  permit: PermitFacts,
  present: PermitPresentFacts | undefined,
  now: string,
): PermitAnswer;
export declare function mayStartWithPermit(
  permit: PermitFacts | undefined,
  present: PermitPresentFacts | undefined,
  ask: { readonly deviceId?: string; readonly counter?: number },
  now: string,
): PermitAnswer;
export declare function mayIssue(
  permit: PermitFacts | undefined,
  present: PermitPresentFacts | undefined,
  key: string | undefined,
  now: string,
): IssueAnswer;
export declare function releaseOf(permit: PermitFacts, evidence?: ReleaseEvidence): Release;
