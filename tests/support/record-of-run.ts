// The record of an invented session, as a phone would send it: a run by the rules themselves, sampled once a second, its events numbered. Never
// used outside tests.

import type { IncomingEvent } from '@/shared/rules/session-record';
import { sessionStateAt, type SessionEventFact } from '@/shared/rules/session';
import { latestSecondsOf, type RecordedEvent } from '@/shared/rules/session-summary';
import { chargeOf, minutesOn, type TrapezoidFacts } from '@/shared/rules/dose';

export type SentEvent = RecordedEvent & {
  readonly id: string;
  readonly sequence: number;
  readonly lastSequence?: number;
};
export type PermittedDose = TrapezoidFacts & { readonly chargeCoulomb: number; readonly minutes: number };

export function permitted(plan: TrapezoidFacts): PermittedDose {
  return { ...plan, chargeCoulomb: chargeOf(plan), minutes: minutesOn(plan) };
}

export type RunPlan = {
  readonly dose: PermittedDose;
  readonly words: readonly SessionEventFact[];
  /** Samples in one event. */
  readonly batch: number;
  /** Anything else that is told, at its second. */
  readonly told?: readonly RecordedEvent[];
  /** mA more than planned, second by second. */
  readonly fault?: (seconds: number) => number;
};

/** Every event of the run in the order in which it happened, the end last. */
export function recordOf({ dose, words, batch, told = [], fault = () => 0 }: RunPlan): SentEvent[] {
  const { endedAtSeconds, endReason, onSeconds, chargeCoulomb } = sessionStateAt(dose, words, Number.POSITIVE_INFINITY);
  const end = endedAtSeconds ?? 0;
  const heard = words.filter(([seconds]) => seconds <= end);
  const seconds = [
    ...Array.from({ length: Math.floor(end) + 1 }, (_, second) => second),
    ...heard.map(([at]) => at),
    end,
  ];
  const samples = [...new Set(seconds)]
    .sort((a, b) => a - b)
    .map((at): [number, number] => [at, sessionStateAt(dose, words, at).currentMilliamp + fault(at)]);
  const parts: RecordedEvent[] = [];
  for (let from = 0; from < samples.length; from += batch) {
    const part = samples.slice(from, from + batch);
    parts.push({ kind: 'samples', atSeconds: part[0]?.[0] ?? 0, samples: part, impedance: [['F3', 5 + (from % 3)]] });
  }
  const body = [
    ...parts,
    ...heard.map(([atSeconds, kind]): RecordedEvent => ({ kind, atSeconds })),
    ...told.filter(({ atSeconds }) => atSeconds <= end),
  ].sort((a, b) => a.atSeconds - b.atSeconds);
  const all: RecordedEvent[] = [
    { kind: 'started', atSeconds: 0 },
    ...body,
    { kind: 'ended', atSeconds: end, reason: endReason ?? 'complete', onSeconds, chargeCoulomb },
  ];
  return all.map((event, sequence) => ({
    ...event,
    id: `event-${sequence}`,
    sequence,
    ...(event.kind === 'ended' ? { lastSequence: sequence } : {}),
  }));
}

export function incomingOf(event: SentEvent): IncomingEvent {
  const { id, sequence, lastSequence } = event;
  return { id, sequence, lastSequence, latestSeconds: latestSecondsOf(event), contentHash: JSON.stringify(event) };
}
