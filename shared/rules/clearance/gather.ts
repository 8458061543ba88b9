// From what stands on record to the facts that clearance asks for. What is not on record stays undefined, so that the
// rule refuses by its name; "nothing was recorded" is a known fact. No limits and no reasons here.

import { precheckOutcomes } from '@/shared/values/codes';
import type { ProtocolSettings } from '@/shared/values/protocol-settings';
import { coulombOf, hourMilliseconds, minuteMilliseconds } from '@/shared/values/units';
import { localDate, parseInstant } from '@/shared/values/zone';
import { ageYearsOn } from '../age';
import { rollingLimitsOf } from '../site-limits';
import { doseNow, type RecordedDose } from './dose-now';
import type { ClearanceFacts, ConsentFacts, OpenLockoutFacts, PastSessionFacts, PrescriptionFacts } from './facts';

type RecordedPrescription = RecordedDose & {
  readonly version: number | null;
  readonly signedAt: string | null;
  readonly closedAt: string | null;
  readonly expiresAt: string;
  readonly sessionsTotal: number;
  readonly maxPer7Days: number;
  readonly hoursFrom: string;
  readonly hoursTo: string;
  readonly assisted: boolean;
  readonly chargeUc: number;
  readonly onMs: number;
};
type RecordedSession = {
  readonly startedAt: string | null;
  readonly endedAt: string | null;
  /** Upper figures of the whole record. */
  readonly upperUc: number | null;
  readonly upperMs: number | null;
  readonly closedAt: string | null;
  readonly closedWhy: string | null;
  readonly permitExpiresAt: string;
  readonly plannedUc: number;
  readonly plannedMs: number;
  readonly hasDiary: boolean;
};
type RecordedPlanned = { readonly windowTo: string; readonly closedWhy: string | null };

/** One person's record as the database holds it. */
export type Gathered = {
  readonly person: {
    readonly participant: {
      readonly id: string;
      readonly bornOn: string;
      readonly zone: string;
      readonly accountId: string | null;
      readonly closedAt: string | null;
    };
    readonly accountState: string | null;
    readonly course: { readonly closedAt: string | null } | null;
    readonly pauseId: string | null;
    readonly prescription: RecordedPrescription | null;
    readonly screening: { readonly outcome: 'clear' | 'excluded' | 'incomplete'; readonly validUntil: string } | null;
    readonly training: { readonly signedOff: boolean; readonly validUntil: string | null } | null;
    readonly deviceId: string | null;
    readonly deviceState: string | null;
    readonly precheck: {
      readonly answeredAt: string;
      readonly accountId: string;
      readonly outcome: string | null;
      readonly helperPresent: boolean;
    } | null;
    readonly openPermit: { readonly id: string; readonly issuedAt: string; readonly expiresAt: string } | null;
    readonly ownConsent: string | null;
    readonly guardianConsent: string | null;
    readonly assent: string | null;
    readonly isConsentWithdrawn: boolean;
    readonly watched: number;
    readonly isWatchedNow: boolean;
    readonly isPrescriptionIntact: boolean;
    readonly hasSecondSignature: boolean;
    readonly acknowledgedVersion: number;
    readonly sessionsDone: number;
    readonly recallCallAt: string | null;
  };
  readonly protocol: { readonly settings: ProtocolSettings; readonly previousConsentVersion: number } | null;
  readonly sessions: readonly RecordedSession[];
  readonly planned: readonly RecordedPlanned[];
  readonly lockouts: readonly {
    readonly level: OpenLockoutFacts['level'];
    readonly code: string;
    readonly until: string | null;
  }[];
  readonly supplies: NonNullable<ClearanceFacts['supplies']>;
};

function consentOf({ person, protocol }: Gathered): ConsentFacts {
  return {
    signedVersion: Number(person.ownConsent ?? 0),
    guardianVersion: Number(person.guardianConsent ?? 0),
    assentVersion: Number(person.assent ?? 0),
    isWithdrawn: person.isConsentWithdrawn,
    requiredVersion: protocol?.settings.consentVersion,
    requiredFrom: protocol?.settings.consentRequiredFrom,
    previousVersion: protocol?.previousConsentVersion,
  };
}

/** Full years today, where the person is. */
function ageOf({ person: { participant } }: Gathered, now: string): number | undefined {
  return ageYearsOn(participant.bornOn, localDate(parseInstant(now) ?? Number.NaN, participant.zone));
}

function prescriptionOf(gathered: Gathered, now: string): PrescriptionFacts {
  const { person, protocol } = gathered;
  const { prescription, course } = person;
  const isOver = course !== null && course.closedAt !== null;
  // Discarded, or superseded without a successor in force: as good as none.
  if (prescription === null || (prescription.closedAt !== null && !(isOver && prescription.signedAt !== null))) {
    return { status: 'none' };
  }
  return {
    status: prescription.signedAt === null ? 'draft' : 'signed',
    version: prescription.version ?? 0,
    acknowledgedVersion: person.acknowledgedVersion,
    isIntact: person.isPrescriptionIntact,
    isPaused: person.pauseId !== null,
    expiresAt: prescription.expiresAt,
    ...doseNow(prescription, ageOf(gathered, now), protocol?.settings.limits),
    hasSecondSignature: person.hasSecondSignature,
    sessionsTotal: prescription.sessionsTotal,
    // A course that is over has nothing left, however many of its sessions were missed.
    sessionsDone: isOver ? prescription.sessionsTotal : person.sessionsDone,
    maxPerDay: prescription.maxPerDay,
    maxPer7Days: prescription.maxPer7Days,
    minGapHours: prescription.minGapMs / hourMilliseconds,
    hoursFrom: prescription.hoursFrom,
    hoursTo: prescription.hoursTo,
    isAssisted: prescription.assisted,
    dose: { chargeCoulomb: coulombOf(prescription.chargeUc), minutes: prescription.onMs / minuteMilliseconds },
  };
}

function sessionOf(row: RecordedSession): PastSessionFacts {
  const planned = { chargeCoulomb: coulombOf(row.plannedUc), minutes: row.plannedMs / minuteMilliseconds };
  if (row.closedWhy === 'unused') return { state: 'void' };
  if (row.closedAt !== null) {
    return {
      state: 'closed',
      startedAt: row.startedAt ?? undefined,
      endedAt: row.endedAt ?? undefined,
      chargeCoulomb: row.upperUc === null ? undefined : coulombOf(row.upperUc),
      minutes: row.upperMs === null ? undefined : row.upperMs / minuteMilliseconds,
      hasDiary: row.hasDiary,
    };
  }
  // The whole dose counts until the record is whole.
  if (row.startedAt !== null) return { state: 'running', startedAt: row.startedAt, ...planned };
  return { state: 'reserved', permitExpiresAt: row.permitExpiresAt, ...planned };
}

/** Windows missed after the last session's end, those included that nobody has marked yet. */
function missedSinceLast({ sessions, planned }: Gathered, now: string): number {
  const lastEnd = sessions.map(({ endedAt }) => endedAt ?? '').reduce((last, end) => (end > last ? end : last), '');
  return planned.filter(
    ({ closedWhy, windowTo }) =>
      (closedWhy === 'missed' || (closedWhy === null && windowTo <= now)) && windowTo > lastEnd,
  ).length;
}

function precheckOf({ person: { precheck, participant } }: Gathered): ClearanceFacts['precheck'] {
  if (precheck === null) return undefined;
  return {
    answeredAt: precheck.answeredAt,
    answeredBy: precheck.accountId === participant.accountId ? participant.id : precheck.accountId,
    outcome: precheckOutcomes.find((outcome) => outcome === precheck.outcome),
    isHelperPresent: precheck.helperPresent,
  };
}

/** `batteryPercent` as the device told it just now; undefined = not known. */
export function gatherFacts(gathered: Gathered, now: string, batteryPercent?: number): ClearanceFacts {
  const { person, protocol } = gathered;
  const { participant, screening, training } = person;
  const prescription = prescriptionOf(gathered, now);
  return {
    account: { isActive: participant.closedAt === null && person.accountState === 'active' },
    asker: participant.id,
    participant: { id: participant.id, bornOn: participant.bornOn, zone: participant.zone },
    consent: consentOf(gathered),
    screening:
      screening === null || screening.outcome === 'incomplete'
        ? { isComplete: false }
        : { isComplete: true, outcome: screening.outcome, validUntil: screening.validUntil },
    training: { isSignedOff: training?.signedOff ?? false, validUntil: training?.validUntil ?? undefined },
    supervision: {
      requiredSessions: protocol?.settings.watchedSessionsRequired,
      watchedSessions: person.watched,
      isWatchedNow: person.isWatchedNow,
    },
    // No score is stored yet: where a protocol asks for the check, when it is due is unknown, and that refuses.
    moodCheck: { dueAt: protocol?.settings.moodCheckEveryDays === null ? null : undefined },
    prescription,
    site:
      protocol === null || prescription.tier === undefined
        ? undefined
        : rollingLimitsOf(protocol.settings.limits, prescription.tier),
    lockouts: gathered.lockouts.map(({ level, code, until }) => ({ level, code, until: until ?? undefined })),
    sessions: gathered.sessions.map(sessionOf),
    missedSinceLast: missedSinceLast(gathered, now),
    recallCallAt: person.recallCallAt ?? undefined,
    device: {
      isAssigned: person.deviceId !== null,
      // Quarantined, lost or retired is as good as recalled: it must not run.
      isRecalled: person.deviceId === null ? undefined : person.deviceState !== 'out',
      batteryPercent,
    },
    supplies: gathered.supplies,
    precheck: precheckOf(gathered),
    livePermits: person.openPermit === null ? [] : [person.openPermit],
  };
}
