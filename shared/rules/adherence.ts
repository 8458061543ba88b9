// How much of what was planned was done, with its denominator, and the flags that sort the worklist.

import type { AdherenceFlag, PlannedSessionState } from '@/shared/values/codes';
import { dayMilliseconds, isBelow } from '@/shared/values/units';
import { parseInstant } from '@/shared/values/zone';
import { weekWindow } from './rolling';
import { wilson, type Interval } from './wilson';

export type PlannedSessionFacts = {
  readonly windowFrom: string;
  readonly windowTo: string;
  readonly state: PlannedSessionState;
  readonly endedAt?: string;
};
/** No `until`: still open. */
export type HoldFacts = { readonly from: string; readonly until?: string };
export type AdherenceFacts = {
  /** Old to new. */
  readonly sessions: readonly PlannedSessionFacts[];
  readonly holds: readonly HoldFacts[];
  readonly recallCallAt?: string;
};
export type AdherenceAnswer = {
  readonly counts: Readonly<Record<PlannedSessionState, number>>;
  readonly planned: number;
  readonly fraction: number | null;
  /** Wilson 95 %; null while nothing was planned. */
  readonly interval: Interval | null;
  readonly missedRunning: number;
  readonly flags: readonly AdherenceFlag[];
};

/** Own choices, as the safety rules say them. */
const missedForFlag = 3;
const lowAdherence = { days: 14, leastPlanned: 5, leastFraction: 0.8 } as const;

type Span = { readonly from: number; readonly to: number };

/** Holds as spans without overlap, old to new. One without an end, or without a readable one, is still open. */
function heldSpans(holds: readonly HoldFacts[]): Span[] {
  const spans = holds
    .map(({ from, until }) => ({
      from: parseInstant(from) ?? Number.NaN,
      to: parseInstant(until) ?? Number.POSITIVE_INFINITY,
    }))
    .filter(({ from }) => Number.isFinite(from))
    .sort((a, b) => a.from - b.from);
  return spans.reduce<Span[]>((joined, span) => {
    const last = joined.at(-1);
    if (last === undefined || span.from > last.to) return [...joined, span];
    return [...joined.slice(0, -1), { from: last.from, to: Math.max(last.to, span.to) }];
  }, []);
}

/** True when the holds cover the whole window, one after the other or overlapping. */
export function isHeldThrough(
  window: { readonly windowFrom: string; readonly windowTo: string },
  holds: readonly HoldFacts[],
): boolean {
  const from = parseInstant(window.windowFrom);
  const to = parseInstant(window.windowTo);
  if (from === undefined || to === undefined) return false;
  return heldSpans(holds).some((span) => span.from <= from && to <= span.to);
}

type Judged = { readonly state: PlannedSessionState; readonly closesAt: number; readonly endedAt?: number };

const counting: readonly PlannedSessionState[] = ['complete', 'partial', 'not_delivered', 'missed'];

function fractionOf(sessions: readonly Judged[]): { complete: number; planned: number } {
  return {
    complete: sessions.filter(({ state }) => state === 'complete').length,
    planned: sessions.filter(({ state }) => counting.includes(state)).length,
  };
}

/** From the newest closed window backwards; what was excused, cancelled or is still to come is passed over. */
function missedRunningOf(closed: readonly Judged[]): number {
  let running = 0;
  for (const { state } of [...closed].sort((a, b) => b.closesAt - a.closesAt)) {
    if (state === 'complete' || state === 'partial') break;
    if (state === 'missed' || state === 'not_delivered') running += 1;
  }
  return running;
}

function isRecallNeeded(sessions: readonly Judged[], recallCallAt: string | undefined, now: number): boolean {
  const ends = sessions.flatMap(({ endedAt }) => (endedAt === undefined ? [] : [endedAt]));
  if (ends.length === 0) return false;
  const lastEnd = Math.max(...ends);
  const isMissedSince = sessions.some(({ state, closesAt }) => state === 'missed' && closesAt > lastEnd);
  const calledAt = parseInstant(recallCallAt);
  const isCalled = calledAt !== undefined && calledAt > lastEnd && calledAt <= now;
  return now - lastEnd > weekWindow && isMissedSince && !isCalled;
}

/** Counts, fraction with its interval, and flags, at the server's clock `now`. */
export function adherence(facts: AdherenceFacts, now: string): AdherenceAnswer {
  const instant = parseInstant(now) ?? Number.NaN;
  const sessions = facts.sessions.map((session): Judged => ({
    state: session.state === 'missed' && isHeldThrough(session, facts.holds) ? 'excused' : session.state,
    closesAt: parseInstant(session.windowTo) ?? Number.NaN,
    endedAt: parseInstant(session.endedAt),
  }));
  const closed = sessions.filter(({ closesAt }) => closesAt <= instant);
  const since = instant - lowAdherence.days * dayMilliseconds;
  const recent = fractionOf(closed.filter(({ closesAt }) => closesAt > since));
  const { complete, planned } = fractionOf(sessions);
  const missedRunning = missedRunningOf(closed);
  const isLow =
    recent.planned >= lowAdherence.leastPlanned &&
    isBelow(recent.complete / recent.planned, lowAdherence.leastFraction);
  const flags: AdherenceFlag[] = [];
  if (missedRunning >= missedForFlag) flags.push('missed_three');
  if (isLow) flags.push('adherence_low');
  if (isRecallNeeded(sessions, facts.recallCallAt, instant)) flags.push('recall_needed');
  const count = (state: PlannedSessionState) => sessions.filter((session) => session.state === state).length;
  return {
    counts: {
      complete: count('complete'),
      partial: count('partial'),
      not_delivered: count('not_delivered'),
      missed: count('missed'),
      excused: count('excused'),
      cancelled: count('cancelled'),
      future: count('future'),
    },
    planned,
    fraction: planned === 0 ? null : complete / planned,
    interval: wilson(complete, planned),
    missedRunning,
    flags,
  };
}
