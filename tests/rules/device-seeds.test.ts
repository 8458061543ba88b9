// The simulated stimulator under chance: pads that come off, pauses, stops, pages that freeze and reload, clocks that jump, permits that come
// again, an output that gives too much. What flows never exceeds the permit, never steps to 0 from above 0.5 mA, holds no longer; the contact
// rules hold to a tenth of a second.

import fc from 'fast-check';
import type { StopWhy } from '@/components/runtime/device/stimulator';
import { chargeOf } from '@/shared/rules/dose';
import { deliveredFrom } from '@/shared/rules/delivered';
import { runCurve, type CurvePoint } from '@/shared/rules/session';
import { coulombOf, microcoulombOf, milliampOf } from '@/shared/values/units';
import { claimsOf, otherDeviceId, signer, type Signer } from '@/tests/support/device/permits';
import { rested, SeededDevice } from '@/tests/support/device/seeded';
import { patience, tried } from '@/tests/support/runs';

let house: Signer;
beforeAll(async () => {
  house = await signer();
});

const slack = 1e-6;
const sessionId = claimsOf().session;
const whole = { entry: 0, sample: 0 };

type Dose = { intensityMicroamp: number; rampUpMs: number; holdMs: number; rampDownMs: number };
const secondsOf = (dose: Dose) => ({
  intensityMilliamp: milliampOf(dose.intensityMicroamp),
  rampUpSeconds: dose.rampUpMs / 1000,
  holdSeconds: dose.holdMs / 1000,
  rampDownSeconds: dose.rampDownMs / 1000,
});
const someDose: fc.Arbitrary<Dose> = fc.record({
  intensityMicroamp: fc.integer({ min: 500, max: 4000 }),
  rampUpMs: fc.integer({ min: 10, max: 30 }).map((seconds) => seconds * 1000),
  holdMs: fc.integer({ min: 30, max: 180 }).map((seconds) => seconds * 1000),
  rampDownMs: fc.integer({ min: 10, max: 30 }).map((seconds) => seconds * 1000),
});

const stopWords: readonly StopWhy[] = ['button', 'red_flag', 'pain_high', 'permit_void'];
type Act =
  | { readonly kind: 'lift' | 'attend'; readonly pad: 'F3' | 'Fp2' }
  | { readonly kind: 'pause' | 'resume' | 'replay' | 'foreign' }
  | { readonly kind: 'stop'; readonly why: StopWhy }
  | { readonly kind: 'freeze' | 'reload'; readonly seconds: number }
  | { readonly kind: 'clock'; readonly byMs: number };
const somePad = fc.constantFrom<'F3' | 'Fp2'>('F3', 'Fp2');
const someAct: fc.Arbitrary<Act> = fc.oneof(
  { weight: 4, arbitrary: fc.record({ kind: fc.constantFrom<'lift' | 'attend'>('lift', 'attend'), pad: somePad }) },
  { weight: 3, arbitrary: fc.record({ kind: fc.constantFrom<'pause' | 'resume'>('pause', 'resume') }) },
  { weight: 1, arbitrary: fc.record({ kind: fc.constantFrom<'replay' | 'foreign'>('replay', 'foreign') }) },
  { weight: 1, arbitrary: fc.record({ kind: fc.constant<'stop'>('stop'), why: fc.constantFrom(...stopWords) }) },
  {
    weight: 1,
    arbitrary: fc.record({ kind: fc.constant<'freeze'>('freeze'), seconds: fc.integer({ min: 1, max: 300 }) }),
  },
  {
    weight: 1,
    arbitrary: fc.record({ kind: fc.constant<'reload'>('reload'), seconds: fc.integer({ min: -3, max: 400 }) }),
  },
  {
    weight: 1,
    arbitrary: fc.record({
      kind: fc.constant<'clock'>('clock'),
      byMs: fc.constantFrom(-31_536_000_000, -60_000, 60_000, 31_536_000_000),
    }),
  },
);
const someStory = fc.array(
  fc.tuple(
    fc.integer({ min: 0, max: 600 }).map((tenths) => tenths / 10),
    someAct,
  ),
  { maxLength: 12 },
);

async function begun(dose: Dose, extra: Parameters<typeof SeededDevice.ready>[1] = {}) {
  const bench = await SeededDevice.ready(house, extra);
  const charge = microcoulombOf(chargeOf(secondsOf(dose)));
  const token = await house.sign(claimsOf({ ...dose, chargeMicrocoulomb: charge }));
  expect(await bench.device.start(token)).toEqual({ started: true });
  return { bench, token, charge: coulombOf(charge) };
}

async function live(bench: SeededDevice, token: string, act: Act): Promise<void> {
  const { device } = bench;
  switch (act.kind) {
    case 'lift':
      return device.lift(act.pad);
    case 'attend':
      return device.attend(act.pad);
    case 'pause':
      return device.pause();
    case 'resume':
      return void device.resume();
    case 'stop':
      return device.stop(act.why);
    case 'freeze':
      return bench.freeze(act.seconds);
    case 'clock':
      return bench.setClock(act.byMs);
    case 'reload':
      return bench.reload(act.seconds);
    case 'replay':
      // The same permit once more, while its session runs or after it: never a second dose.
      expect((await device.start(token)).started).toBe(false);
      return;
    case 'foreign':
      expect(
        (await device.start(await house.sign(claimsOf({ aud: otherDeviceId, device: otherDeviceId, counter: 99 }))))
          .started,
      ).toBe(false);
  }
}

/** What was commanded, as the corner points of its current. */
function commanded(bench: SeededDevice): readonly CurvePoint[] {
  const session = bench.device.status().session;
  return session === null ? [] : runCurve(session.dose, session.events, session.seconds);
}

function checkCurve(points: readonly CurvePoint[], dose: Dose): void {
  const { intensityMilliamp, rampUpSeconds, holdSeconds, rampDownSeconds } = secondsOf(dose);
  let held = 0;
  const steepest = intensityMilliamp / Math.min(rampUpSeconds, rampDownSeconds, 10);
  for (const [index, { seconds, milliamp }] of points.entries()) {
    expect(milliamp).toBeLessThanOrEqual(intensityMilliamp + slack);
    const before = points[index - 1];
    if (before === undefined) continue;
    const length = seconds - before.seconds;
    // No step at all, so none to 0 from above 0.5 mA.
    expect(Math.abs(milliamp - before.milliamp)).toBeLessThanOrEqual(steepest * length + slack);
    if (before.milliamp === intensityMilliamp && milliamp === intensityMilliamp) held += length;
  }
  expect(held).toBeLessThanOrEqual(holdSeconds + slack);
}

describe('the simulated stimulator', () => {
  it(
    'never gives more, steeper or longer than its permit, whatever happens to it',
    async () => {
      const ends = new Set<string>();
      await fc.assert(
        fc.asyncProperty(someDose, someStory, async (dose, story) => {
          const { bench, token, charge } = await begun(dose);
          for (const [after, act] of story) {
            bench.pass(after);
            await live(bench, token, act);
          }
          bench.pass(700);
          await rested();
          const status = bench.device.status();
          expect(status.session?.endedWhy).not.toBeNull();
          ends.add(status.session?.endedWhy ?? '');
          checkCurve(commanded(bench), dose);
          const { entries, samples } = bench.device.record(sessionId, whole);
          const most = milliampOf(dose.intensityMicroamp);
          expect(samples.every(([, milliamp]) => (milliamp ?? 0) <= most + slack && (milliamp ?? 0) >= 0)).toBe(true);
          expect(deliveredFrom(samples, { intensityMilliamp: most }).chargeCoulomb ?? 0).toBeLessThanOrEqual(
            charge * (1 + 1e-9),
          );
          // Its record is whole: every line and every sample has its number, the start comes first and one end last.
          expect(entries.map(({ index }) => index)).toEqual(entries.map((_entry, index) => index));
          expect(samples.map(([, , number]) => number)).toEqual(samples.map((_sample, index) => index));
          expect(samples.every(([seconds], index) => seconds > (samples[index - 1]?.[0] ?? -1))).toBe(true);
          expect(entries.filter(({ kind }) => kind === 'started' || kind === 'ended').map(({ kind }) => kind)).toEqual([
            'started',
            'ended',
          ]);
          expect(entries.at(-1)?.kind).toBe('ended');
        }),
        tried('F23'),
      );
      // The stories reach many ends, or they proved little.
      expect(ends.size).toBeGreaterThanOrEqual(5);
    },
    patience,
  );

  it(
    'begins its pause 3 s after contact went, ends it with contact, and the session after 120 s, each to a tenth of a second',
    async () => {
      const dose = { intensityMicroamp: 2000, rampUpMs: 20_000, holdMs: 240_000, rampDownMs: 20_000 };
      const someLoss = fc.record({
        pad: somePad,
        at: fc.integer({ min: 2500, max: 18_000 }).map((hundredths) => hundredths / 100),
        goneFor: fc.oneof(
          fc.integer({ min: 10, max: 290 }).map((hundredths) => hundredths / 100),
          fc.integer({ min: 320, max: 12_000 }).map((hundredths) => hundredths / 100),
          fc.constant(200),
        ),
      });
      await fc.assert(
        fc.asyncProperty(someLoss, async ({ pad, at, goneFor }) => {
          const { bench } = await begun(dose);
          bench.pass(at);
          bench.device.lift(pad);
          bench.pass(goneFor);
          bench.device.attend(pad);
          bench.pass(600);
          const points = commanded(bench);
          const down = points.find(
            ({ seconds, milliamp }, index) => milliamp === 2 && seconds > 20 && (points[index + 1]?.milliamp ?? 2) < 2,
          );
          const isNear = (value: number | undefined, wanted: number) =>
            Math.abs((value ?? Number.NaN) - wanted) <= 0.1 + slack;
          const { endedWhy, snapshot } = bench.device.status().session ?? { endedWhy: null, snapshot: null };
          if (goneFor < 3) {
            expect([snapshot?.pauses, endedWhy]).toEqual([0, 'complete']);
            return;
          }
          expect([at + 3, down?.seconds, isNear(down?.seconds, at + 3)]).toEqual([at + 3, down?.seconds, true]);
          if (goneFor >= 123.1) {
            expect([endedWhy, isNear(snapshot?.endedAtSeconds ?? undefined, at + 123)]).toEqual(['lost_contact', true]);
            return;
          }
          // Up again when contact is back, but not before its ramp down has come to its end.
          const up = points.find(
            ({ seconds, milliamp }, index) =>
              seconds > at + 3 && milliamp <= slack && (points[index + 1]?.milliamp ?? 0) > slack,
          );
          expect([endedWhy, isNear(up?.seconds, Math.max(at + goneFor, at + 13))]).toEqual(['complete', true]);
        }),
        tried('F23'),
      );
    },
    patience,
  );

  it('pauses three times and no fourth, whether contact or the person is the cause', async () => {
    const dose = { intensityMicroamp: 2000, rampUpMs: 10_000, holdMs: 600_000, rampDownMs: 10_000 };
    const { bench } = await begun(dose);
    bench.pass(20);
    for (let round = 0; round < 3; round += 1) {
      bench.device.lift('F3');
      bench.pass(15);
      bench.device.attend('F3');
      bench.pass(15);
      expect(bench.device.status().session?.snapshot).toMatchObject({ state: 'hold', pauses: round + 1 });
    }
    bench.device.lift('F3');
    bench.pass(13.2);
    expect(bench.device.status().session).toMatchObject({ endedWhy: 'lost_contact', snapshot: { pauses: 3 } });
  });

  it(
    'stops itself within 2 s of an output above its permit, and starts nothing again',
    async () => {
      const someFault = fc.record({
        from: fc.integer({ min: 0, max: 150 }),
        milliamp: fc.double({ min: 0.15, max: 3, noNaN: true }),
        seconds: fc.integer({ min: 2, max: 30 }),
      });
      await fc.assert(
        fc.asyncProperty(someFault, async ({ from, milliamp, seconds }) => {
          const dose = { intensityMicroamp: 2000, rampUpMs: 10_000, holdMs: 200_000, rampDownMs: 10_000 };
          const faultMilliamp = (at: number) => (at >= from + 10 && at <= from + 10 + seconds ? milliamp : 0);
          const { bench } = await begun(dose, { faultMilliamp });
          bench.pass(300);
          await rested();
          const { entries } = bench.device.record(sessionId, whole);
          const stop = entries.find((entry) => entry.kind === 'stop');
          expect(stop).toMatchObject({ why: 'over_current' });
          expect((stop?.atSeconds ?? Number.NaN) - (from + 10)).toBeLessThanOrEqual(2);
          expect(bench.device.status()).toMatchObject({ isFaulty: true, session: { endedWhy: 'over_current' } });
          const next = await house.sign(claimsOf({ ...dose, counter: 8 }));
          expect(await bench.device.start(next)).toEqual({ started: false, why: 'faulty' });
        }),
        tried('F23'),
      );
    },
    patience,
  );
});
