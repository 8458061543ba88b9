// Puts what happened in a session into the phone's log: a number and an id for each, in one piece with how much of the
// stimulator's record was taken, so that nothing is logged twice or lost between two writes. It sends nothing.

import type { SessionEvent } from '@/shared/contracts/permit';
import type { PhoneStore, RunRow } from './phone-store';

type Bare<E> = E extends SessionEvent ? Omit<E, 'id' | 'sequence'> : never;
export type EventFact = Bare<SessionEvent>;
/** `ended` names the last number, which is its own. */
export type EventDraft =
  Exclude<EventFact, { kind: 'ended' }> | Omit<Extract<EventFact, { kind: 'ended' }>, 'lastSequence'>;

function eventOf(draft: EventDraft, sequence: number): SessionEvent {
  const head = { id: crypto.randomUUID(), sequence };
  return draft.kind === 'ended' ? { ...draft, ...head, lastSequence: sequence } : { ...draft, ...head };
}

export type RunChange = Partial<Omit<RunRow, 'permitId' | 'sessionId' | 'nextSequence'>>;

/** Writes the events and the changed run together. Gives back the run as it is now; null when this phone holds no such run. */
export async function logEvents(
  store: PhoneStore,
  permitId: string,
  drafts: readonly EventDraft[],
  change: RunChange = {},
): Promise<RunRow | null> {
  return store.changeRun(permitId, (run) => {
    const events = drafts.map((draft, place) => eventOf(draft, run.nextSequence + place));
    return { run: { ...run, ...change, nextSequence: run.nextSequence + events.length }, events };
  });
}
