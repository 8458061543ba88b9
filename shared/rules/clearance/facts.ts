// Everything that the server must know to say whether a session may start. Each fact may be undefined: then it is
// unknown and clearance refuses with its name. Instants are ISO 8601 in UTC, zones IANA names. No rules here.

import type {
  DoseQuantity,
  LimitLayer,
  PrecheckOutcome,
  SessionFactState,
  StoredLockoutCode,
  Tier,
} from '@/shared/values/codes';

export type AccountFacts = { readonly isActive?: boolean };
export type ParticipantFacts = {
  readonly id?: string;
  /** Day of birth, `1984-03-02`. */
  readonly bornOn?: string;
  readonly zone?: string;
};
export type ConsentFacts = {
  /** 0 = never signed. */
  readonly signedVersion?: number;
  readonly requiredVersion?: number;
  /** From this instant on `requiredVersion` is in force, before it `previousVersion` (0 = there was none). */
  readonly requiredFrom?: string;
  readonly previousVersion?: number;
  readonly isWithdrawn?: boolean;
  /** Judged under 18 only. */
  readonly guardianVersion?: number;
  readonly assentVersion?: number;
};
export type ScreeningFacts = {
  readonly isComplete?: boolean;
  readonly outcome?: 'clear' | 'excluded';
  readonly validUntil?: string;
};
export type TrainingFacts = { readonly isSignedOff?: boolean; readonly validUntil?: string };
export type SupervisionFacts = {
  readonly requiredSessions?: number;
  readonly watchedSessions?: number;
  readonly isWatchedNow?: boolean;
};
export type MoodCheckFacts = {
  /** null = the protocol asks none. */
  readonly dueAt?: string | null;
};
/** A row of the signed dose that the limits in force now refuse. */
export type OverLimitFacts = {
  readonly quantity: DoseQuantity;
  readonly value?: number;
  readonly limit?: number;
  readonly unit?: string;
  readonly layer?: LimitLayer;
  readonly source?: string;
};
export type PrescriptionFacts = {
  /** `none`: there is no prescription yet, and nothing else here is asked for. */
  readonly status?: 'none' | 'draft' | 'signed';
  readonly version?: number;
  /** 0 = no version yet. */
  readonly acknowledgedVersion?: number;
  /** Its content is what was signed: the hash of every signature on it is the hash of what stands there. */
  readonly isIntact?: boolean;
  readonly isPaused?: boolean;
  readonly expiresAt?: string;
  /** The worse of the tier at signing and the tier by the limits in force now. */
  readonly tier?: Tier;
  /** By the limits in force now, `unknown_fact` where the dose cannot be read. Absent: judged by its tier alone. */
  readonly overLimits?: readonly OverLimitFacts[];
  readonly hasSecondSignature?: boolean;
  readonly sessionsTotal?: number;
  readonly sessionsDone?: number;
  readonly maxPerDay?: number;
  readonly maxPer7Days?: number;
  readonly minGapHours?: number;
  readonly hoursFrom?: string;
  readonly hoursTo?: string;
  readonly isAssisted?: boolean;
  readonly dose?: { readonly chargeCoulomb?: number; readonly minutes?: number };
};
export type SiteRollingFacts = {
  readonly maxCharge24hCoulomb?: number;
  readonly maxCharge7dCoulomb?: number;
  /** The ceiling of 60 min if absent. */
  readonly maxMinutes24h?: number;
};
export type OpenLockoutFacts = {
  readonly level?: 'safety' | 'review' | 'device' | 'hold' | 'flag';
  readonly code?: StoredLockoutCode | (string & {});
  /** Of a hold. */
  readonly until?: string;
};
export type PastSessionFacts = {
  /** void: a read-out of the device shows that it never ran. */
  readonly state?: SessionFactState;
  readonly startedAt?: string;
  readonly endedAt?: string;
  readonly permitExpiresAt?: string;
  /** Upper figure of what was delivered; the whole dose while running or reserved. */
  readonly chargeCoulomb?: number;
  readonly minutes?: number;
  readonly hasDiary?: boolean;
};
export type DeviceFacts = {
  readonly isAssigned?: boolean;
  readonly isRecalled?: boolean;
  readonly batteryPercent?: number;
};
export type SupplyFacts = {
  readonly kind?: string;
  readonly uses?: number;
  /** null = no count of uses for this kind. */
  readonly maxUses?: number | null;
  readonly openedAt?: string;
  readonly maxDays?: number;
};
export type PrecheckGivenFacts = {
  readonly answeredAt?: string;
  readonly answeredBy?: string;
  readonly outcome?: PrecheckOutcome;
  readonly isHelperPresent?: boolean;
};
export type LivePermitFacts = { readonly id?: string; readonly issuedAt?: string; readonly expiresAt?: string };

export type ClearanceFacts = {
  readonly account?: AccountFacts;
  /** The person who asks to start; the same kind of id as `participant.id` and `precheck.answeredBy`. */
  readonly asker?: string;
  readonly participant?: ParticipantFacts;
  readonly consent?: ConsentFacts;
  readonly screening?: ScreeningFacts;
  readonly training?: TrainingFacts;
  readonly supervision?: SupervisionFacts;
  readonly moodCheck?: MoodCheckFacts;
  readonly prescription?: PrescriptionFacts;
  readonly site?: SiteRollingFacts;
  /** Open ones, and holds whose `until` has passed. */
  readonly lockouts?: readonly OpenLockoutFacts[];
  /** At least the last 7 days, any order. */
  readonly sessions?: readonly PastSessionFacts[];
  readonly missedSinceLast?: number;
  /** Absent = there was no call. */
  readonly recallCallAt?: string;
  readonly device?: DeviceFacts;
  readonly supplies?: readonly SupplyFacts[];
  /** Absent = none was answered, or it is incomplete. */
  readonly precheck?: PrecheckGivenFacts;
  readonly livePermits?: readonly LivePermitFacts[];
};
