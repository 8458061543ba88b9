// What a session's whole record amounts to: delivered charge from the samples, contact, pauses, sensations, a thinned curve. Reads the
// events as kept; what the device itself counted is carried along and never used.

import type { Completeness, SessionEventWord } from '@/shared/values/codes';
import { isAbove } from '@/shared/values/units';
import { completenessOf, deliveredFrom, longestStepSeconds, type Delivered, type Sample } from './delivered';
import type { TrapezoidFacts } from './dose';
import { mostCurvePoints } from './house-limits';
import { runCurve, type SessionEventFact } from './session';

/** The parts of an event that count here; other kinds and fields pass by. */
export type RecordedEvent = {
  readonly kind: string;
  readonly atSeconds: number;
  readonly position?: string;
  readonly kiloohm?: number | null;
  readonly samples?: readonly (readonly [number, number])[];
  readonly impedance?: readonly (readonly [string, number])[];
  readonly sensation?: string;
  readonly strength?: number;
  readonly flag?: string;
  readonly reason?: string;
  readonly onSeconds?: number;
  readonly chargeCoulomb?: number;
};
export type ContactSummary = { position: string; worstKiloohm: number | null; lastKiloohm: number | null };
export type SessionSummary = {
  curve: [number, number][];
  contact: ContactSummary[];
  pauses: { atSeconds: number; lengthSeconds: number }[];
  sensations: { atSeconds: number; sensation: string; strength: number }[];
  gaps: { fromSeconds: number; toSeconds: number }[];
  conflicts: number;
  gapSeconds: number;
};
export type SessionAmounts = {
  /** False: the record shows that no current ever flowed. */
  readonly hasRun: boolean;
  readonly delivered: Delivered;
  readonly completeness: Completeness;
  readonly endReason: string | null;
  readonly endedAtSeconds: number;
  readonly deviceOnSeconds: number;
  readonly deviceChargeCoulomb: number;
};

const words: readonly SessionEventWord[] = ['contact_lost', 'contact_back', 'pause', 'resume', 'stop'];

export function wordsOf(events: readonly RecordedEvent[]): SessionEventFact[] {
  return events.flatMap(({ kind, atSeconds }): SessionEventFact[] => {
    const word = words.find((each) => each === kind);
    return word === undefined ? [] : [[atSeconds, word]];
  });
}

export function samplesOf(events: readonly RecordedEvent[]): Sample[] {
  return events.flatMap(({ samples = [] }) => samples.map(([seconds, milliamp]): Sample => [seconds, milliamp]));
}

/** True for an event that tells of current: then the session has begun. */
export function tellsOfCurrent(event: RecordedEvent): boolean {
  return event.kind === 'started' || event.kind === 'samples' || (event.kind === 'ended' && (event.onSeconds ?? 0) > 0);
}

/** Time with current on of the dose as permitted. */
export function plannedSecondsOf(dose: Omit<TrapezoidFacts, 'intensityMilliamp'>): number {
  return dose.rampUpSeconds + dose.holdSeconds + dose.rampDownSeconds;
}

/** The latest second that an event tells of. */
export function latestSecondsOf(event: RecordedEvent): number {
  return (event.samples ?? []).reduce((latest, [seconds]) => Math.max(latest, seconds), event.atSeconds);
}

/** Times from the start of a ramp down to the start of the next ramp up. */
function pausesOf(
  dose: TrapezoidFacts,
  events: readonly RecordedEvent[],
  endSeconds: number,
): SessionSummary['pauses'] {
  const points = runCurve(dose, wordsOf(events), endSeconds);
  const pauses: SessionSummary['pauses'] = [];
  let downFrom: number | undefined;
  for (const [index, point] of points.entries()) {
    const before = points[index - 1];
    if (before !== undefined && before.milliamp > 0 && point.milliamp === 0) downFrom = before.seconds;
    if (before !== undefined && before.milliamp === 0 && point.milliamp > 0 && downFrom !== undefined) {
      pauses.push({ atSeconds: downFrom, lengthSeconds: before.seconds - downFrom });
      downFrom = undefined;
    }
  }
  return pauses;
}

/** An open circuit has no number: it is the worst there is, and told as null. */
function contactOf(events: readonly RecordedEvent[]): ContactSummary[] {
  const byPosition = new Map<string, ContactSummary & { isOpen: boolean }>();
  const see = (position: string, kiloohm: number | null) => {
    const known = byPosition.get(position);
    const isOpen = known?.isOpen === true || kiloohm === null;
    const worst = isOpen ? null : Math.max(known?.worstKiloohm ?? 0, kiloohm ?? 0);
    byPosition.set(position, { position, worstKiloohm: worst, lastKiloohm: kiloohm, isOpen });
  };
  for (const { kind, position, kiloohm, impedance = [] } of [...events].sort((a, b) => a.atSeconds - b.atSeconds)) {
    if (kind === 'contact' && position !== undefined) see(position, kiloohm ?? null);
    for (const [at, value] of impedance) see(at, value);
  }
  return [...byPosition.values()].map(({ position, worstKiloohm, lastKiloohm }) => ({
    position,
    worstKiloohm,
    lastKiloohm,
  }));
}

/** Every so many samples, the largest of each stretch and the last of all. */
function thinned(samples: readonly Sample[]): [number, number][] {
  const points = samples.flatMap(([seconds, milliamp]): [number, number][] =>
    milliamp === null ? [] : [[seconds, milliamp]],
  );
  points.sort((a, b) => a[0] - b[0]);
  const stretch = Math.ceil(points.length / (mostCurvePoints - 1));
  if (stretch <= 1) return points;
  const kept: [number, number][] = [];
  for (let from = 0; from < points.length; from += stretch) {
    const largest = points
      .slice(from, from + stretch)
      .reduce((best, point) => (Math.abs(point[1]) > Math.abs(best[1]) ? point : best));
    kept.push(largest);
  }
  const last = points.at(-1);
  return last === undefined || kept.at(-1) === last ? kept : [...kept, last];
}

/** What was delivered; the tail up to the device's own end counts as a gap if no sample covers it. */
export function amountsOf(
  dose: TrapezoidFacts & { readonly chargeCoulomb: number },
  events: readonly RecordedEvent[],
): SessionAmounts {
  const ended = events.find(({ kind }) => kind === 'ended');
  const samples = samplesOf(events);
  const last = samples.reduce((latest, [seconds]) => Math.max(latest, seconds), 0);
  const endedAtSeconds = Math.max(ended?.atSeconds ?? last, last);
  const delivered = deliveredFrom(samples, {
    intensityMilliamp: dose.intensityMilliamp,
    chargeCoulomb: dose.chargeCoulomb,
    startSeconds: 0,
    plannedEndSeconds: endedAtSeconds,
    isFinal: !isAbove(endedAtSeconds - last, longestStepSeconds),
  });
  return {
    hasRun: events.some(tellsOfCurrent),
    delivered,
    // Begun, and not one sample: nothing is known to have been delivered, though the limits count it whole.
    completeness: completenessOf(delivered) ?? 'not_delivered',
    endReason: ended?.reason ?? null,
    endedAtSeconds,
    deviceOnSeconds: ended?.onSeconds ?? 0,
    deviceChargeCoulomb: ended?.chargeCoulomb ?? 0,
  };
}

export function summaryOf(
  dose: TrapezoidFacts,
  events: readonly RecordedEvent[],
  amounts: SessionAmounts,
): SessionSummary {
  const { delivered, endedAtSeconds } = amounts;
  return {
    curve: thinned(samplesOf(events)),
    contact: contactOf(events),
    pauses: pausesOf(dose, events, endedAtSeconds),
    sensations: events.flatMap(({ kind, atSeconds, sensation, strength }) =>
      kind === 'sensation' && sensation !== undefined && strength !== undefined
        ? [{ atSeconds, sensation, strength }]
        : [],
    ),
    gaps: delivered.gaps.map(({ fromSeconds, toSeconds }) => ({ fromSeconds, toSeconds })),
    conflicts: delivered.conflicts.length,
    gapSeconds: delivered.gapSeconds ?? 0,
  };
}
