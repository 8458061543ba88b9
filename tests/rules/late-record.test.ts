// A record that comes late, doubled, out of order, in pieces, after its permit was revoked, or with a part lost: what is kept is what was made,
// each event once; what was delivered is the same for any order; what is lost shows as a gap and counts at the planned current.

import fc from 'fast-check';
import { chargeOf } from '@/shared/rules/dose';
import { lockoutsAfterDiary } from '@/shared/rules/lockout';
import { permitState } from '@/shared/rules/permit';
import { closingOf } from '@/shared/rules/session-closing';
import { judgeEvents, missingSequences, startedAtOf, endedAtOf } from '@/shared/rules/session-record';
import { runFactsOf } from '@/shared/rules/session-run-facts';
import { sessionStateAt, type SessionEventFact } from '@/shared/rules/session';
import { amountsOf, samplesOf, wordsOf } from '@/shared/rules/session-summary';
import { incomingOf, permitted, recordOf, type RunPlan, type SentEvent } from '@/tests/support/record-of-run';
import { patience, tried } from '@/tests/support/runs';

const dayseconds = 86_400;

/** What a server keeps of what arrives, batch by batch. */
class Kept {
  private readonly byId = new Map<string, SentEvent>();
  private end: number | null = null;
  readonly refused: string[] = [];
  readonly codes = new Set<string>();

  constructor(private readonly permittedMilliamp: number) {}

  get events(): SentEvent[] {
    return [...this.byId.values()];
  }
  get missing(): number[] {
    return missingSequences(this.events, this.end);
  }
  get isWhole(): boolean {
    return this.end !== null && this.missing.length === 0;
  }

  receive(batch: readonly SentEvent[], elapsedSeconds: number): void {
    const kept = this.events.map((event) => ({ ...event, contentHash: incomingOf(event).contentHash }));
    const accepted: SentEvent[] = [];
    for (const [index, verdict] of judgeEvents(batch.map(incomingOf), kept, elapsedSeconds, this.end).entries()) {
      const event = batch[index];
      if (verdict.verdict === 'refused') this.refused.push(`${verdict.id} ${verdict.code}`);
      if (event === undefined || verdict.verdict !== 'store') continue;
      this.byId.set(event.id, event);
      accepted.push(event);
      if (event.lastSequence !== undefined) this.end = event.lastSequence;
    }
    // As the server does at each batch: what came, beside all samples that are kept.
    const samples = this.events.filter(({ kind }) => kind === 'samples');
    const { effects } = lockoutsAfterDiary({ during: runFactsOf(accepted, samples, this.permittedMilliamp) });
    for (const { code } of effects) this.codes.add(code);
  }
}

const somePlan: fc.Arbitrary<RunPlan> = fc.record({
  dose: fc
    .record({
      intensityMilliamp: fc.integer({ min: 1, max: 40 }).map((tenths) => tenths / 10),
      rampUpSeconds: fc.integer({ min: 10, max: 30 }),
      holdSeconds: fc.integer({ min: 0, max: 120 }),
      rampDownSeconds: fc.integer({ min: 10, max: 30 }),
    })
    .map(permitted),
  words: fc.array(
    fc.tuple(
      fc.integer({ min: 0, max: 1800 }).map((tenths) => tenths / 10),
      fc.constantFrom<SessionEventFact[1]>('contact_lost', 'contact_back', 'pause', 'resume', 'stop'),
    ),
    { maxLength: 6 },
  ),
  batch: fc.integer({ min: 1, max: 30 }),
});

/** The events of a record as a bad network brings them: every one at least once, some again, in any order, cut into batches. */
const someDelivery = (events: readonly SentEvent[]) =>
  fc
    .tuple(
      fc.shuffledSubarray([...events], { minLength: events.length, maxLength: events.length }),
      fc.shuffledSubarray([...events]),
      fc.integer({ min: 1, max: 12 }),
    )
    .map(([once, again, size]) => {
      const all = [...once, ...again];
      return Array.from({ length: Math.ceil(all.length / size) }, (_, index) =>
        all.slice(index * size, index * size + size),
      );
    });
const someLate = fc.constantFrom(300, 3600, dayseconds, 30 * dayseconds);
const delivered = somePlan.chain((plan) => {
  const events = recordOf(plan);
  return fc.record({
    plan: fc.constant(plan),
    events: fc.constant(events),
    batches: someDelivery(events),
    late: someLate,
  });
});

describe('a record that arrives somehow', () => {
  it(
    'is kept as it was made: each event once, none refused, whatever its order and however late',
    () => {
      fc.assert(
        fc.property(delivered, ({ plan, events, batches, late }) => {
          const kept = new Kept(plan.dose.intensityMilliamp);
          // The permit is over, its prescription amended and the person locked by then: what was delivered is delivered.
          batches.forEach((batch) => kept.receive(batch, late));
          expect(kept.refused).toEqual([]);
          expect(kept.events.map(({ sequence }) => sequence).sort((a, b) => a - b)).toEqual(
            events.map(({ sequence }) => sequence),
          );
          expect(kept.isWhole).toBe(true);
        }),
        tried('F17'),
      );
    },
    patience,
  );

  it(
    'has delivered the same in any order, and never more than was permitted',
    () => {
      fc.assert(
        fc.property(delivered, ({ plan, events, batches, late }) => {
          const kept = new Kept(plan.dose.intensityMilliamp);
          batches.forEach((batch) => kept.receive(batch, late));
          const { row, amounts } = closingOf(plan.dose, kept.events);
          const straight = closingOf(plan.dose, events);
          expect({ ...row, summary: { ...row.summary, sensations: [] } }).toEqual(straight.row);
          expect(amounts).toEqual(straight.amounts);
          expect(amounts.delivered.upperChargeCoulomb ?? 0).toBeLessThanOrEqual(
            chargeOf(plan.dose) * (1 + 1e-9) + 1e-9,
          );
          expect(sessionStateAt(plan.dose, wordsOf(kept.events), 3000)).toEqual(
            sessionStateAt(plan.dose, plan.words, 3000),
          );
        }),
        tried('F17'),
      );
    },
    patience,
  );

  it(
    'shows what is lost as missing numbers and as a gap at the planned current, until it comes',
    () => {
      const withLoss = delivered.chain((one) =>
        fc.record({
          one: fc.constant(one),
          lost: fc.subarray(one.events.map(({ sequence }) => sequence).slice(1, -1)),
        }),
      );
      let lossy = 0;
      fc.assert(
        fc.property(withLoss, ({ one: { plan, events, batches, late }, lost }) => {
          const kept = new Kept(plan.dose.intensityMilliamp);
          const isLost = ({ sequence }: SentEvent) => lost.includes(sequence);
          batches.forEach((batch) =>
            kept.receive(
              batch.filter((event) => !isLost(event)),
              late,
            ),
          );
          expect(kept.missing).toEqual([...lost].sort((a, b) => a - b));
          expect(kept.isWhole).toBe(lost.length === 0);
          const whole = amountsOf(plan.dose, events).delivered;
          const part = amountsOf(plan.dose, kept.events).delivered;
          if (samplesOf(kept.events).length > 0) {
            if (lost.length > 0) lossy += 1;
            // Less is known to have been delivered, and as much or more counts; a lost corner is cut, its neighbours being near enough.
            const cut = lost.length * shortGap(plan);
            expect(part.chargeCoulomb ?? 0).toBeLessThanOrEqual((whole.chargeCoulomb ?? 0) + cut + 1e-9);
            expect(part.upperChargeCoulomb ?? 0).toBeGreaterThanOrEqual((whole.upperChargeCoulomb ?? 0) - cut - 1e-9);
          }
          kept.receive(events.filter(isLost), late + dayseconds);
          expect(closingOf(plan.dose, kept.events).amounts).toEqual(closingOf(plan.dose, events).amounts);
        }),
        tried('F17'),
      );
      expect(lossy).toBeGreaterThan(20);
    },
    patience,
  );

  it(
    'opens the same lockouts in any order: a late red flag, pain, or current above the permit acts when it comes',
    () => {
      const told = fc.subarray([
        { kind: 'red_flag', atSeconds: 5, flag: 'faint' },
        { kind: 'sensation', atSeconds: 6, sensation: 'pain_at_pad', strength: 8 },
        { kind: 'sensation', atSeconds: 7, sensation: 'tingling', strength: 3 },
      ]);
      const faulty = fc.record({ from: fc.integer({ min: 0, max: 60 }), length: fc.integer({ min: 0, max: 4 }) });
      const withFindings = fc.tuple(somePlan, told, faulty).chain(([plan, tellings, { from, length }]) => {
        const fault = (at: number) => (at >= from && at < from + length ? 0.5 + plan.dose.intensityMilliamp : 0);
        const events = recordOf({ ...plan, told: tellings, fault });
        return fc.record({ plan: fc.constant(plan), events: fc.constant(events), batches: someDelivery(events) });
      });
      fc.assert(
        fc.property(withFindings, ({ plan, events, batches }) => {
          const kept = new Kept(plan.dose.intensityMilliamp);
          batches.forEach((batch) => kept.receive(batch, 30 * dayseconds));
          const { effects } = lockoutsAfterDiary({ during: runFactsOf(events, [], plan.dose.intensityMilliamp) });
          for (const { code } of effects) expect([...kept.codes]).toContain(code);
        }),
        tried('F17'),
      );
    },
    patience,
  );
});

/** A lost sample between two that are at most 2 s apart cuts a corner of the curve: less than what flows in that time. */
function shortGap({ dose }: RunPlan): number {
  return (dose.intensityMilliamp * 2) / 1000;
}

it('keeps its own time though it comes 30 days later: it ended when the device says, and never ahead of now', () => {
  const permit = { issuedAt: '2026-05-12T16:00:00Z', expiresAt: '2026-05-12T16:30:00Z' };
  const now = '2026-06-11T16:00:00Z';
  // Known only by its permit: it began while that lived.
  expect(startedAtOf(permit, 1260, now)).toBe('2026-05-12T16:30:00Z');
  expect(endedAtOf('2026-05-12T16:30:00Z', 1260, now)).toBe('2026-05-12T16:51:00Z');
  const over = { id: 'k', prescriptionVersion: 1, expiresAt: permit.expiresAt, isUsed: true };
  const present = { prescriptionVersion: 2, isPaused: false, isLocked: true };
  expect(permitState(over, present, now).reasons).toEqual(['permit_expired', 'permit_revoked', 'permit_used']);
});
