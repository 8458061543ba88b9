// The one word that says where a person is, for lists, the person's page and the demo's accounts. It orders and labels; it opens nothing:
// whether a session may start is clearance's decision alone.

import { dayMilliseconds, hourMilliseconds } from '@/shared/values/units';
import { localDate, parseInstant } from '@/shared/values/zone';
import type { ReadinessAnswer } from './readiness';

export type ParticipantStateWord =
  'invited' | 'training' | 'ready' | 'too_early' | 'held' | 'paused' | 'finished' | 'withdrawn';

export type ParticipantStateFacts = {
  readonly isWithdrawn: boolean;
  readonly hasAccount: boolean;
  readonly zone: string;
  /** Of the newest course; null = there is none yet. */
  readonly course: { readonly closedWhy: string | null; readonly isPaused: boolean } | null;
  /** Open ones; a hold carries the instant at which it is over by itself. */
  readonly lockouts: readonly {
    readonly level: 'safety' | 'review' | 'device' | 'hold';
    readonly until: string | null;
  }[];
  readonly readiness: ReadinessAnswer;
  readonly isWatchedNow: boolean;
  /** The device that the person has may run: neither recalled nor quarantined. */
  readonly isDeviceUsable: boolean;
  /** Of the prescription in force. */
  readonly plan: {
    readonly expiresAt: string;
    readonly minGapHours: number;
    readonly maxPerDay: number;
    readonly maxPer7Days: number;
    /** Start of the next planned session's window; null = no planned session is left. */
    readonly windowFrom: string | null;
  } | null;
  /** Sessions that began in the last 7 days, and the last one. */
  readonly sessions: readonly { readonly startedAt: string; readonly endedAt: string | null }[];
};

function isReached(instant: string, now: number): boolean {
  const at = parseInstant(instant);
  return at !== undefined && now >= at;
}

function isHeld(facts: ParticipantStateFacts, now: number): boolean {
  return facts.lockouts.some(({ until }) => until === null || !isReached(until, now));
}

function standsReady(facts: ParticipantStateFacts, now: number): boolean {
  const { readiness, plan } = facts;
  const isWatched = facts.isWatchedNow || readiness.watched.done >= readiness.watched.required;
  return (
    readiness.accountActive &&
    readiness.consent === 'current' &&
    readiness.screening === 'clear' &&
    readiness.training === 'signed_off' &&
    isWatched &&
    readiness.device !== null &&
    facts.isDeviceUsable &&
    readiness.prescription === 'acknowledged' &&
    plan !== null &&
    !isReached(plan.expiresAt, now)
  );
}

function isTooEarly(
  facts: ParticipantStateFacts,
  plan: NonNullable<ParticipantStateFacts['plan']>,
  now: number,
): boolean {
  if (plan.windowFrom !== null && !isReached(plan.windowFrom, now)) return true;
  const begun = facts.sessions.flatMap(({ startedAt, endedAt }) => {
    const from = parseInstant(startedAt);
    return from === undefined ? [] : [{ from, to: parseInstant(endedAt) ?? from }];
  });
  const today = localDate(now, facts.zone);
  const onThisDay = begun.filter(({ from }) => localDate(from, facts.zone) === today).length;
  const inSevenDays = begun.filter(({ from }) => now - from < 7 * dayMilliseconds).length;
  const lastEnd = Math.max(Number.NEGATIVE_INFINITY, ...begun.map(({ to }) => to));
  return (
    onThisDay >= plan.maxPerDay ||
    inSevenDays >= plan.maxPer7Days ||
    now < lastEnd + plan.minGapHours * hourMilliseconds
  );
}

/** What weighs more comes first: a person who is held and paused is held. */
export function participantState(facts: ParticipantStateFacts, now: string): ParticipantStateWord {
  const at = parseInstant(now);
  if (facts.isWithdrawn || facts.course?.closedWhy === 'withdrawn') return 'withdrawn';
  if (facts.course?.closedWhy === 'finished') return 'finished';
  if (!facts.hasAccount) return 'invited';
  // A clock that cannot be read opens nothing.
  if (at === undefined || isHeld(facts, at)) return 'held';
  if (facts.course?.isPaused === true) return 'paused';
  // Every planned session is done or past, though the course was not closed yet.
  if (facts.plan?.windowFrom === null) return 'finished';
  if (facts.plan === null || !standsReady(facts, at)) return 'training';
  return isTooEarly(facts, facts.plan, at) ? 'too_early' : 'ready';
}
