// What several families of clearance rules need alike: the clock, the person's local day and age, the past sessions
// with the ends that must be assumed. Reads facts, decides nothing.

import { sessionFactStates, type SessionFactState } from '@/shared/values/codes';
import { minuteMilliseconds } from '@/shared/values/units';
import { isZone, localDate, parseInstant } from '@/shared/values/zone';
import { ageYearsOn } from '../age';
import { ceilings } from '../ceilings';
import { type Known } from '../known';
import type { ClearanceFacts, PastSessionFacts } from './facts';

export type PastSession = {
  readonly state: Exclude<SessionFactState, 'void'>;
  /** Milliseconds; undefined where a fact is missing. */
  readonly startedAt?: number;
  /** Running: start + planned minutes. Reserved: end of the permit + planned minutes. */
  readonly endedAt?: number;
  readonly chargeCoulomb?: number;
  readonly minutes?: number;
  readonly hasDiary?: boolean;
  /** Running, or its permit used or over without a final record. */
  readonly isOpen: boolean;
};
export type ClearanceContext = {
  readonly facts: ClearanceFacts;
  readonly known: Known;
  readonly now: number;
  readonly zone?: string;
  /** Local date of `now`. */
  readonly today?: string;
  readonly isMinor?: boolean;
  /** Without void ones, any order; undefined if the history is not known. */
  readonly sessions?: readonly PastSession[];
};

/** False only where it is known that there is no prescription yet: then nothing that it would say is asked. */
export function isPrescribed({ facts }: ClearanceContext): boolean {
  return facts.prescription?.status !== 'none';
}

function plusMinutes(instant: number | undefined, minutes: number | undefined): number | undefined {
  return instant === undefined || minutes === undefined ? undefined : instant + minutes * minuteMilliseconds;
}

function readSession(known: Known, facts: PastSessionFacts, index: number, now: number): PastSession | undefined {
  const name = `sessions.${index}`;
  const state = known.word(`${name}.state`, facts.state, sessionFactStates);
  if (state === 'void') return undefined;
  // What else would have to be known depends on the state.
  if (state === undefined) return { state: 'closed', isOpen: false };
  const amounts = {
    chargeCoulomb: known.amount(`${name}.charge_C`, facts.chargeCoulomb),
    minutes: known.amount(`${name}.minutes`, facts.minutes),
  };
  if (state === 'reserved') {
    const over = known.instant(`${name}.permit_expires_at`, facts.permitExpiresAt);
    const begun = parseInstant(facts.startedAt);
    const isOpen = begun !== undefined || over === undefined || over <= now;
    return { state, startedAt: begun ?? over, endedAt: plusMinutes(over, amounts.minutes), ...amounts, isOpen };
  }
  const startedAt = known.instant(`${name}.started_at`, facts.startedAt);
  if (state === 'running') {
    return { state, startedAt, endedAt: plusMinutes(startedAt, amounts.minutes), ...amounts, isOpen: true };
  }
  const endedAt = known.instant(`${name}.ended_at`, facts.endedAt);
  const hasDiary = known.flag(`${name}.diary`, facts.hasDiary);
  return { state: 'closed', startedAt, endedAt, ...amounts, hasDiary, isOpen: false };
}

export function contextOf(facts: ClearanceFacts, known: Known, now: number): ClearanceContext {
  const participant = known.some('participant', facts.participant);
  const typedZone = known.text('participant.zone', participant?.zone);
  const zone = typedZone !== undefined && isZone(typedZone) ? typedZone : undefined;
  if (zone === undefined) known.some('participant.zone', undefined);
  const bornOn = known.text('participant.born', participant?.bornOn);
  const today = zone === undefined ? undefined : localDate(now, zone);
  const age = bornOn === undefined || today === undefined ? undefined : ageYearsOn(bornOn, today);
  if (bornOn !== undefined && today !== undefined && age === undefined) known.some('participant.born', undefined);
  return {
    facts,
    known,
    now,
    zone,
    today,
    isMinor: age === undefined ? undefined : age < ceilings.adultAgeYears.value,
    sessions: known
      .some('sessions', facts.sessions)
      ?.map((session, index) => readSession(known, session, index, now))
      .filter((session) => session !== undefined),
  };
}

/** Sessions whose named facts are all known; undefined if one is not, so that the rule is not judged. */
export function allKnown<K extends 'startedAt' | 'endedAt' | 'chargeCoulomb' | 'minutes'>(
  sessions: readonly PastSession[] | undefined,
  ...keys: readonly K[]
): readonly (PastSession & Readonly<Record<K, number>>)[] | undefined {
  if (sessions === undefined) return undefined;
  const whole = sessions.filter((session): session is PastSession & Readonly<Record<K, number>> =>
    keys.every((key) => session[key] !== undefined),
  );
  return whole.length === sessions.length ? whole : undefined;
}

type EndedSession = PastSession & { readonly endedAt: number };

/** Of two that ended at one instant, in whatever order they are listed, the one whose diary is missing. */
function isLater(session: EndedSession, last: EndedSession): boolean {
  return session.endedAt > last.endedAt || (session.endedAt === last.endedAt && session.hasDiary === false);
}

/** The session that ended last, assumed ends included. */
export function lastSession(context: ClearanceContext): EndedSession | undefined {
  return allKnown(context.sessions, 'endedAt')?.reduce<EndedSession | undefined>(
    (last, session) => (last === undefined || isLater(session, last) ? session : last),
    undefined,
  );
}
