// What a batch of events shows about the run, as facts for the lockout rules. Judges nothing.

import type { RedFlag } from '@/shared/values/codes';
import { redFlags } from '@/shared/values/codes';
import type { LockoutFacts } from './lockout';
import { padPainOf } from './pad-pain';
import { samplesOf, type RecordedEvent } from './session-summary';

/** The plain word for it, beside the sensations that count as pain at a pad (pad-pain.ts). */
const padPain = 'pain_at_pad';

/**
 * @param keptSamples all events with samples that are kept of the session, these among them: a run above the permit may lie across two
 * batches, and one event may begin long before it ends
 */
export function runFactsOf(
  events: readonly RecordedEvent[],
  keptSamples: readonly RecordedEvent[],
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
    samples: samples.length === 0 ? [] : [...samplesOf(keptSamples), ...samples],
  };
}
