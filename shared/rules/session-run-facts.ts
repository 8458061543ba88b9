// What a batch of events shows about the run, as facts for the lockout rules. Judges nothing.

import type { RedFlag } from '@/shared/values/codes';
import { redFlags } from '@/shared/values/codes';
import { millisecondsOf } from '@/shared/values/units';
import type { LockoutFacts } from './lockout';
import { padPainOf } from './pad-pain';
import { samplesOf, type RecordedEvent } from './session-summary';

/** The plain word for it, beside the sensations that count as pain at a pad (pad-pain.ts). */
const padPain = 'pain_at_pad';

/** Samples this near before a batch may belong to the same run above the permit. Own choice. */
const nearSeconds = 10;

/** From where on earlier samples matter beside these; null when the batch has none. */
export function samplesBeforeMs(events: readonly RecordedEvent[]): number | null {
  const seconds = samplesOf(events).map(([at]) => at);
  return seconds.length === 0 ? null : millisecondsOf(Math.max(0, Math.min(...seconds) - nearSeconds));
}

export function runFactsOf(
  events: readonly RecordedEvent[],
  nearSamples: readonly RecordedEvent[],
  permittedMilliamp: number,
): NonNullable<LockoutFacts['during']> {
  const flags = events.flatMap(({ kind, flag }): RedFlag[] =>
    redFlags.filter((each) => kind === 'red_flag' && each === flag),
  );
  const pains = events.flatMap(({ kind, sensation = '', strength }) => {
    if (kind !== 'sensation' || strength === undefined) return [];
    return (sensation === padPain ? strength : padPainOf(sensation, strength)) ?? [];
  });
  const samples = samplesOf(events);
  return {
    flags,
    painAtPad: pains.length === 0 ? undefined : Math.max(...pains),
    permittedMilliamp,
    // Without new samples nothing new can be above the permit.
    samples: samples.length === 0 ? [] : [...samplesOf(nearSamples), ...samples],
  };
}
