// A sham never gives more than its plan, takes as long, and is judged as the plan: an arm is no fact of a dose.

import fc from 'fast-check';
import { deliveredFrom, type Sample } from '@/shared/rules/delivered';
import { chargeOf, judgeDose, peakOf, type DoseFacts } from '@/shared/rules/dose';
import { plannedCurve } from '@/shared/rules/session';
import { shamChargeOf, shamCurve } from '@/shared/rules/sham';
import { waveforms } from '@/shared/values/codes';
import { tried } from '@/tests/support/runs';

const electrodes = (['anode', 'cathode'] as const).map((polarity) => ({
  ...{ position: polarity, polarity, shape: 'pad' as const, areaSquareCentimetre: 35, share: 1 },
}));
const someDose = fc.record({
  waveform: fc.constantFrom(...waveforms),
  valueMilliamp: fc.double({ min: 0.1, max: 2, noNaN: true }),
  offsetMilliamp: fc.constantFrom(0, 0.2),
  rampUpSeconds: fc.integer({ min: 10, max: 120 }),
  holdSeconds: fc.integer({ min: 0, max: 1500 }),
  rampDownSeconds: fc.integer({ min: 10, max: 120 }),
});

describe.each(waveforms)('the sham of a %s plan', (waveform) => {
  it('stays under the plan, ends with it and gives the charge of two ramps', () => {
    fc.assert(
      fc.property(someDose, ({ valueMilliamp, offsetMilliamp, ...times }) => {
        const dose: DoseFacts = {
          ...times,
          ...{ waveform, offsetMilliamp, frequencyHertz: 10, bandHertz: [100, 640], electrodes },
          amplitude: { valueMilliamp, meaning: 'peak' },
          ...{ sessionsPerDay: 1, minGapHours: 20 },
        };
        const plan = { ...times, intensityMilliamp: peakOf(dose) ?? Number.NaN };
        const curve = shamCurve(plan);
        const corners = curve.map(({ seconds, milliamp }): Sample => [seconds, milliamp]);
        const { chargeCoulomb } = deliveredFrom(corners, { intensityMilliamp: 0, maxGapSeconds: null });
        return (
          judgeDose(dose, 40).verdict !== 'refuse' &&
          Math.abs((chargeCoulomb ?? Number.NaN) - shamChargeOf(plan)) <= 1e-12 + shamChargeOf(plan) * 1e-9 &&
          shamChargeOf(plan) <= chargeOf(plan) * (1 + 1e-12) &&
          Math.max(...curve.map(({ milliamp }) => milliamp)) === plan.intensityMilliamp &&
          curve.at(-1)?.seconds === plannedCurve(plan).at(-1)?.seconds &&
          curve.every(({ seconds }, index) => seconds >= (curve[index - 1]?.seconds ?? 0))
        );
      }),
      tried('T6'),
    );
  });
});

it('gives 0.06 C where the plan of 2 mA and two ramps of 30 s gives 2.46 C', () => {
  const plan = { intensityMilliamp: 2, rampUpSeconds: 30, holdSeconds: 1200, rampDownSeconds: 30 };
  expect([shamChargeOf(plan), chargeOf(plan)]).toEqual([0.06, 2.46]);
  expect(shamCurve(plan).map(({ seconds, milliamp }) => [seconds, milliamp])).toEqual([
    [0, 0],
    [30, 2],
    [60, 0],
    [1260, 0],
  ]);
});
