// What must stand before a session, each with its present state: consent, screening, training, watched sessions, device, prescription.
// For the lists and pages of staff; whether a session may start is clearance's decision alone.

import { parseInstant } from '@/shared/values/zone';
import { ceilings } from './ceilings';

export type ConsentStanding = {
  /** Version of the newest consent of each kind; 0 = none. */
  readonly ownVersion: number;
  readonly guardianVersion: number;
  readonly assentVersion: number;
  readonly isWithdrawn: boolean;
  readonly requiredVersion: number;
  /** Before this instant the version before it is enough. */
  readonly requiredFrom: string;
  readonly previousVersion: number;
};
export type ReadinessFacts = {
  readonly isAccountActive: boolean;
  readonly ageYears: number;
  /** null: the site has signed no protocol, so nothing can be current. */
  readonly consent: ConsentStanding | null;
  readonly screening: { readonly outcome: 'clear' | 'excluded' | 'incomplete'; readonly validUntil: string } | null;
  readonly training: { readonly isSignedOff: boolean; readonly validUntil: string | null } | null;
  readonly watched: { readonly done: number; readonly required: number };
  readonly device: { readonly id: string; readonly label: string } | null;
  readonly supplies: number;
  readonly prescription:
    | { readonly status: 'none' }
    | { readonly status: 'draft'; readonly awaitsSecondSignature: boolean }
    | { readonly status: 'signed'; readonly isAcknowledged: boolean };
};
export type ReadinessAnswer = {
  readonly accountActive: boolean;
  readonly consent: 'missing' | 'outdated' | 'current' | 'withdrawn';
  readonly screening: 'missing' | 'incomplete' | 'excluded' | 'expired' | 'clear';
  readonly training: 'missing' | 'expired' | 'signed_off';
  readonly watched: { readonly done: number; readonly required: number };
  readonly device: { readonly id: string; readonly label: string } | null;
  readonly supplies: number;
  readonly prescription: 'none' | 'draft' | 'awaiting_second_signature' | 'unacknowledged' | 'acknowledged';
};

/** A thing that ends at T is over at T; an instant that is none is over. */
function isOver(until: string, now: string): boolean {
  const end = parseInstant(until);
  const at = parseInstant(now);
  return end === undefined || at === undefined || at >= end;
}

function consentOf(facts: ReadinessFacts, now: string): ReadinessAnswer['consent'] {
  const { consent, ageYears } = facts;
  if (consent === null) return 'missing';
  if (consent.isWithdrawn) return 'withdrawn';
  const isInForce = isOver(consent.requiredFrom, now);
  const required = isInForce ? consent.requiredVersion : consent.previousVersion;
  // A child's agreement is two: the guardian's consent and the own assent (guidance §18).
  const isMinor = ageYears < ceilings.adultAgeYears.value;
  const versions = isMinor ? [consent.guardianVersion, consent.assentVersion] : [consent.ownVersion];
  if (versions.some((version) => version === 0)) return 'missing';
  return versions.every((version) => version >= required) ? 'current' : 'outdated';
}

function screeningOf({ screening }: ReadinessFacts, now: string): ReadinessAnswer['screening'] {
  if (screening === null) return 'missing';
  if (screening.outcome !== 'clear') return screening.outcome;
  return isOver(screening.validUntil, now) ? 'expired' : 'clear';
}

function trainingOf({ training }: ReadinessFacts, now: string): ReadinessAnswer['training'] {
  if (training === null || !training.isSignedOff || training.validUntil === null) return 'missing';
  return isOver(training.validUntil, now) ? 'expired' : 'signed_off';
}

function prescriptionOf({ prescription }: ReadinessFacts): ReadinessAnswer['prescription'] {
  if (prescription.status === 'none') return 'none';
  if (prescription.status === 'draft')
    return prescription.awaitsSecondSignature ? 'awaiting_second_signature' : 'draft';
  return prescription.isAcknowledged ? 'acknowledged' : 'unacknowledged';
}

export function readinessOf(facts: ReadinessFacts, now: string): ReadinessAnswer {
  const { isAccountActive, watched, device, supplies } = facts;
  return {
    accountActive: isAccountActive,
    consent: consentOf(facts, now),
    screening: screeningOf(facts, now),
    training: trainingOf(facts, now),
    watched,
    device,
    supplies,
    prescription: prescriptionOf(facts),
  };
}
