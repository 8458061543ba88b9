// From what is on record about a person to their readiness and the one word for their state. The only place that ties the two rules
// together, so that lists, pages and the person's own answer never differ.

import { localDate, parseInstant } from '@/shared/values/zone';
import { ageYearsOn } from './age';
import { participantState, type ParticipantStateFacts, type ParticipantStateWord } from './participant-state';
import { readinessOf, type ReadinessAnswer, type ReadinessFacts } from './readiness';

/** As `loadStanding` of db/queries/participant-standing.ts gives it. */
export type StandingFacts = {
  readonly zone: string;
  readonly bornOn: string;
  readonly isWithdrawn: boolean;
  readonly hasAccount: boolean;
  readonly isAccountActive: boolean;
  readonly protocol: {
    readonly settings: {
      readonly consentVersion: number;
      readonly consentRequiredFrom: string;
      readonly watchedSessionsRequired: number;
    };
    readonly previousConsentVersion: number;
  } | null;
  readonly consent: {
    readonly ownVersion: number;
    readonly guardianVersion: number;
    readonly assentVersion: number;
    readonly isWithdrawn: boolean;
  };
  readonly screening: ReadinessFacts['screening'];
  readonly training: ReadinessFacts['training'];
  readonly watchedDone: number;
  readonly isWatchedNow: boolean;
  readonly device: { readonly id: string; readonly label: string; readonly state: string } | null;
  readonly supplies: number;
  readonly course: ParticipantStateFacts['course'];
  readonly prescription: {
    readonly isSigned: boolean;
    readonly isAcknowledged: boolean;
    readonly awaitsSecondSignature: boolean;
    readonly expiresAt: string;
    readonly minGapHours: number;
    readonly maxPerDay: number;
    readonly maxPer7Days: number;
  } | null;
  readonly windowFrom: string | null;
  readonly lockouts: ParticipantStateFacts['lockouts'];
  readonly sessions: ParticipantStateFacts['sessions'];
};
export type StandingAnswer = {
  readonly ageYears: number;
  readonly readiness: ReadinessAnswer;
  readonly state: ParticipantStateWord;
};

/** A site without a protocol has said nothing: one watched session is the shipped default, and no consent can be current. */
const watchedWithoutProtocol = 1;

function prescriptionFacts({ prescription }: StandingFacts): ReadinessFacts['prescription'] {
  if (prescription === null) return { status: 'none' };
  if (prescription.isSigned) return { status: 'signed', isAcknowledged: prescription.isAcknowledged };
  return { status: 'draft', awaitsSecondSignature: prescription.awaitsSecondSignature };
}

export function standingOf(facts: StandingFacts, now: string): StandingAnswer {
  const at = parseInstant(now);
  const today = at === undefined ? '' : localDate(at, facts.zone);
  // Without a readable age a person counts as a child: the stricter reading.
  const ageYears = ageYearsOn(facts.bornOn, today) ?? 0;
  const { protocol, device, prescription } = facts;
  const readiness = readinessOf(
    {
      isAccountActive: facts.isAccountActive,
      ageYears,
      consent: protocol && {
        ...facts.consent,
        requiredVersion: protocol.settings.consentVersion,
        requiredFrom: protocol.settings.consentRequiredFrom,
        previousVersion: protocol.previousConsentVersion,
      },
      screening: facts.screening,
      training: facts.training,
      watched: {
        done: facts.watchedDone,
        required: protocol?.settings.watchedSessionsRequired ?? watchedWithoutProtocol,
      },
      device: device && { id: device.id, label: device.label },
      supplies: facts.supplies,
      prescription: prescriptionFacts(facts),
    },
    now,
  );
  const state = participantState(
    {
      isWithdrawn: facts.isWithdrawn,
      hasAccount: facts.hasAccount,
      zone: facts.zone,
      course: facts.course,
      lockouts: facts.lockouts,
      readiness,
      isWatchedNow: facts.isWatchedNow,
      isDeviceUsable: device?.state === 'out',
      plan: prescription?.isSigned === true ? { ...prescription, windowFrom: facts.windowFrom } : null,
      sessions: facts.sessions,
    },
    now,
  );
  return { ageYears, readiness, state };
}
