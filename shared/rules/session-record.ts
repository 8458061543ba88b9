// The record of a session as it comes in: which events are kept, what is still missing, and in which state that leaves the session. Each
// event is kept once, in any order of arrival, at any delay; a gap stays a gap.

import { isAbove } from '@/shared/values/units';
import { isoOf, parseInstant } from '@/shared/values/zone';
import { eventAheadSeconds, mostEventsPerSession, mostMissingTold, recordGraceSeconds } from './house-limits';
import type { PermitWord } from './permit-state';
import { mostPauseSeconds } from './session/run';

export type IncomingEvent = {
  readonly id: string;
  readonly sequence: number;
  /** The latest second that it tells of. */
  readonly latestSeconds: number;
  readonly contentHash: string;
  /** Of the last event: the sequence after which nothing comes. */
  readonly lastSequence?: number;
};
export type KeptEvent = { readonly id: string; readonly sequence: number; readonly contentHash: string };
export type RefusedCode = 'other_content' | 'from_the_future' | 'sequence_taken' | 'after_the_end' | 'too_many';
export type EventVerdict =
  | { readonly id: string; readonly verdict: 'store' | 'known' }
  | { readonly id: string; readonly verdict: 'refused'; readonly code: RefusedCode };

/**
 * One verdict an event, in their order.
 * @param elapsedSeconds since the permit was issued, on the server's clock: nothing can have happened later
 * @param end the sequence after which nothing comes, once the last event is kept
 */
export function judgeEvents(
  incoming: readonly IncomingEvent[],
  kept: readonly KeptEvent[],
  elapsedSeconds: number,
  end: number | null,
): EventVerdict[] {
  const byId = new Map(kept.map((event) => [event.id, event]));
  const taken = new Set(kept.map(({ sequence }) => sequence));
  let lastSequence = end;
  return incoming.map((event): EventVerdict => {
    const { id, sequence } = event;
    const known = byId.get(id);
    const refused = (code: RefusedCode): EventVerdict => ({ id, verdict: 'refused', code });
    if (known !== undefined) {
      return known.contentHash === event.contentHash ? { id, verdict: 'known' } : refused('other_content');
    }
    if (isAbove(event.latestSeconds, elapsedSeconds + eventAheadSeconds)) return refused('from_the_future');
    if (Math.max(sequence, event.lastSequence ?? 0) >= mostEventsPerSession) return refused('too_many');
    if (taken.has(sequence)) return refused('sequence_taken');
    const isSecondEnd = event.lastSequence !== undefined && lastSequence !== null;
    if (isSecondEnd || (lastSequence !== null && sequence > lastSequence)) return refused('after_the_end');
    if (event.lastSequence !== undefined) lastSequence = event.lastSequence;
    byId.set(id, event);
    taken.add(sequence);
    return { id, verdict: 'store' };
  });
}

/** Sequence numbers that are not here up to the end, or up to the highest that is; at most so many as are told at once. */
export function missingSequences(kept: readonly { readonly sequence: number }[], end: number | null): number[] {
  const here = new Set(kept.map(({ sequence }) => sequence));
  const highest = end ?? Math.max(-1, ...here);
  const missing: number[] = [];
  for (let sequence = 0; sequence <= highest && missing.length < mostMissingTold; sequence += 1) {
    if (!here.has(sequence)) missing.push(sequence);
  }
  return missing;
}

/** Seconds from one instant to another. */
export function secondsSince(earlier: string, later: string): number {
  return ((parseInstant(later) ?? Number.NaN) - (parseInstant(earlier) ?? Number.NaN)) / 1000;
}

/**
 * When the ramp up began: not after the permit's end (no device starts on a permit that is over), not so late that the latest second told
 * of would lie ahead, not before the issue. Of what is possible the latest, so that a gap is never counted too long.
 */
export function startedAtOf(
  permit: { readonly issuedAt: string; readonly expiresAt: string },
  latestSeconds: number,
  now: string,
): string {
  const issued = parseInstant(permit.issuedAt) ?? Number.NaN;
  const over = parseInstant(permit.expiresAt) ?? Number.NaN;
  const told = (parseInstant(now) ?? Number.NaN) - latestSeconds * 1000;
  return isoOf(Math.max(issued, Math.min(over, told)));
}

/** When it ended; never ahead of the server's clock, whatever the network took. */
export function endedAtOf(startedAt: string, endSeconds: number, now: string): string {
  const started = parseInstant(startedAt) ?? Number.NaN;
  return isoOf(Math.min(parseInstant(now) ?? Number.NaN, started + Math.round(endSeconds * 1000)));
}

export type SessionWord = 'permitted' | 'running' | 'awaiting_record' | 'closed' | 'void';

/** Not begun on a permit that is over is awaited too: the dose stays reserved until the device's word. */
export function sessionWordOf(
  session: {
    readonly startedAt: string | null;
    readonly endedAt: string | null;
    readonly closedAt: string | null;
    readonly closedWhy: string | null;
    readonly plannedSeconds: number;
  },
  permit: PermitWord,
  now: string,
): SessionWord {
  if (session.closedWhy === 'unused') return 'void';
  if (session.closedAt !== null) return 'closed';
  const startedAt = parseInstant(session.startedAt);
  if (startedAt === undefined) {
    if (permit === 'live') return 'permitted';
    return permit === 'void' ? 'void' : 'awaiting_record';
  }
  const longest = session.plannedSeconds + mostPauseSeconds + recordGraceSeconds;
  const isOver = (parseInstant(now) ?? Number.POSITIVE_INFINITY) >= startedAt + longest * 1000;
  return session.endedAt !== null || isOver ? 'awaiting_record' : 'running';
}

/** When the next session may be: the later of the gap's end and the next window's start; null when nothing is planned. */
export function nextFromOf(endedAt: string | null, minGapMs: number, nextWindowFrom: string | null): string | null {
  const opens = parseInstant(nextWindowFrom);
  if (opens === undefined) return null;
  const ended = parseInstant(endedAt);
  return isoOf(ended === undefined ? opens : Math.max(opens, ended + minGapMs));
}
