// Who may be enrolled and what a recorded consent must say. Answers with codes; whether an address is free is the database's knowledge.

import { localDate, parseInstant } from '@/shared/values/zone';
import { ageYearsOn } from './age';
import { ceilings } from './ceilings';

export type EnrolmentRefusal = 'participant.born_in_future' | 'participant.too_young';

/** null = may be enrolled. Age counts on the local day of the person's own zone. */
export function enrolmentRefusal(person: { bornOn: string; zone: string }, now: string): EnrolmentRefusal | null {
  const at = parseInstant(now);
  const age = at === undefined ? undefined : ageYearsOn(person.bornOn, localDate(at, person.zone));
  if (age === undefined) return 'participant.born_in_future';
  return age < ceilings.leastAgeYears.value ? 'participant.too_young' : null;
}

/** Digits of a person's number within the site: LS-0142. More people than that make the code longer, not wrong. Own choice. */
const codeDigits = 4;

export function participantCode(siteCode: string, number: number): string {
  return `${siteCode}-${String(number).padStart(codeDigits, '0')}`;
}

/** Everything that a person must have understood and agreed to; photos are a choice of their own. */
const neededAnswers = [
  'understandsPurpose',
  'understandsRisks',
  'understandsMayStop',
  'agreesToDataUse',
  'questionsAnswered',
  'copyGiven',
] as const;

export type ConsentGiven = Readonly<Record<(typeof neededAnswers)[number], boolean>> & {
  readonly documentVersion: number;
  readonly signedOn: string;
};
export type ConsentRefusal = {
  readonly code: 'consent.not_given' | 'consent.version_unknown' | 'consent.signed_in_future';
  /** Names of the answers or fields that stand in the way. */
  readonly fields: readonly string[];
};

/** null = may be recorded. */
export function consentRefusal(
  given: ConsentGiven,
  site: { newestVersion: number; zone: string },
  now: string,
): ConsentRefusal | null {
  const open = neededAnswers.filter((name) => given[name] !== true);
  if (open.length > 0) return { code: 'consent.not_given', fields: open };
  const isKnown = given.documentVersion >= 1 && given.documentVersion <= site.newestVersion;
  if (!isKnown) return { code: 'consent.version_unknown', fields: ['documentVersion'] };
  const at = parseInstant(now);
  const isPast = at !== undefined && given.signedOn <= localDate(at, site.zone);
  return isPast ? null : { code: 'consent.signed_in_future', fields: ['signedOn'] };
}
