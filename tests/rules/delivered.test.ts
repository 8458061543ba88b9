// Delivered charge beside the published cases: on-time, completeness, current above the permit, and what must hold of
// any samples.

import fc from 'fast-check';
import { completenessOf, deliveredFrom, overCurrent, type Sample } from '@/shared/rules/delivered';
import { runCurve, sessionStateAt } from '@/shared/rules/session';

const plan = { intensityMilliamp: 2, chargeCoulomb: 2.46, startSeconds: 0, plannedEndSeconds: 1260, isFinal: true };

const someSamples = fc.array(
  fc.tuple(
    fc.integer({ min: 0, max: 600 }).map((tenths) => tenths / 10),
    fc.option(fc.integer({ min: -40, max: 40 }).map((tenths) => tenths / 10)),
    fc.integer({ min: 0, max: 60 }),
  ),
  { maxLength: 60 },
);

describe('deliveredFrom', () => {
  it('never measures more than its upper figure', () => {
    fc.assert(
      fc.property(someSamples, fc.boolean(), (samples, isFinal) => {
        const { chargeCoulomb, upperChargeCoulomb, onSeconds, upperOnSeconds } = deliveredFrom(samples, {
          ...plan,
          isFinal,
        });
        return (chargeCoulomb ?? 0) <= (upperChargeCoulomb ?? 0) && (onSeconds ?? 0) <= (upperOnSeconds ?? 0);
      }),
      { numRuns: 1000 },
    );
  });

  it('is the same in any order of arrival and with every sample twice', () => {
    fc.assert(
      fc.property(someSamples, fc.integer(), (samples, seed) => {
        const mixed = [...samples, ...samples]
          .map((sample, index) => ({ sample, key: Math.sin(seed + index * 78.233) }))
          .sort((a, b) => a.key - b.key)
          .map(({ sample }) => sample);
        expect(deliveredFrom(mixed, plan)).toEqual(deliveredFrom(samples, plan));
      }),
      { numRuns: 1000 },
    );
  });

  it('measures what the run of a session planned, sampled at its corners', () => {
    const permit = { intensityMilliamp: 2, rampUpSeconds: 30, holdSeconds: 1200, rampDownSeconds: 30 };
    const events = [
      [630, 'pause'],
      [660, 'resume'],
    ] as const;
    const corners = runCurve(permit, events, 2000).map(({ seconds, milliamp }): Sample => [seconds, milliamp]);
    const { chargeCoulomb, onSeconds } = deliveredFrom(corners, { ...plan, maxGapSeconds: null });
    const planned = sessionStateAt(permit, events, 2000);
    expect(chargeCoulomb).toBeCloseTo(planned.chargeCoulomb, 9);
    expect(onSeconds).toBeCloseTo(planned.onSeconds, 9);
  });

  it('names where each gap is, at the head, inside and at the tail', () => {
    const samples: Sample[] = [
      [5, 2],
      [6, 2],
      [16, 2],
      [17, 2],
    ];
    const { gaps, gapSeconds, fraction } = deliveredFrom(samples, { ...plan, isFinal: false, plannedEndSeconds: 20 });
    expect(gaps).toEqual([
      { fromSeconds: 0, toSeconds: 5 },
      { fromSeconds: 6, toSeconds: 16 },
      { fromSeconds: 17, toSeconds: 20 },
    ]);
    expect(gapSeconds).toBe(18);
    expect(fraction).toBeCloseTo(0.004 / 2.46, 12);
  });

  it('takes the time for the number of a sample that has none', () => {
    expect(
      deliveredFrom(
        [
          [0, 1],
          [1, 1],
          [1, 2],
        ],
        plan,
      ),
    ).toMatchObject({ conflicts: [1], chargeCoulomb: 0.0015 });
  });

  it('keeps the earlier time of two equal currents under one number, whichever came first', () => {
    const a: Sample = [1, 2, 7];
    const b: Sample = [3, -2, 7];
    const rest: Sample = [4, 2, 8];
    expect(deliveredFrom([a, b, rest], plan).gaps).toEqual([{ fromSeconds: 1, toSeconds: 4 }]);
    expect(deliveredFrom([b, a, rest], plan).gaps).toEqual([{ fromSeconds: 1, toSeconds: 4 }]);
  });

  it('leaves a sample out that is no number', () => {
    expect(
      deliveredFrom(
        [
          [Number.NaN, 2],
          [1, Number.POSITIVE_INFINITY],
        ],
        plan,
      ).chargeCoulomb,
    ).toBeNull();
  });

  it('does not count the noise of a device at rest as time with current on', () => {
    const rest: Sample[] = [0, 1, 2, 3].map((seconds) => [seconds, 0.005]);
    expect(deliveredFrom(rest, plan).onSeconds).toBe(0);
    expect(deliveredFrom([...rest, [4, 0.01]], plan).onSeconds).toBe(1);
  });

  it('gives no fraction of a plan that is not known', () => {
    const samples: Sample[] = [[0, 2]];
    expect(deliveredFrom(samples, { intensityMilliamp: 2 }).fraction).toBeNull();
    expect(deliveredFrom(samples, { intensityMilliamp: 2, chargeCoulomb: 0 }).fraction).toBeNull();
  });
});

describe('completenessOf', () => {
  it.each([
    [0.9, 1200, 'complete'],
    [0.899, 1200, 'partial'],
    [0.1, 120, 'partial'],
    [0.099, 1200, 'not_delivered'],
    [0.5, 119, 'not_delivered'],
  ])('calls %d of the charge in %d s %s', (fraction, onSeconds, word) => {
    expect(completenessOf({ fraction, onSeconds })).toBe(word);
  });

  it('calls nothing by a name that is not known', () => {
    expect(completenessOf({ fraction: null, onSeconds: 10 })).toBeNull();
    expect(completenessOf({ fraction: 0.5, onSeconds: null })).toBeNull();
  });

  it('takes the bounds of a protocol', () => {
    const bounds = { complete: 0.95, partial: 0.5, leastSeconds: 300 };
    expect(completenessOf({ fraction: 0.94, onSeconds: 1200 }, bounds)).toBe('partial');
    expect(completenessOf({ fraction: 0.4, onSeconds: 1200 }, bounds)).toBe('not_delivered');
  });
});

describe('overCurrent', () => {
  it('tells from when to when, and the largest', () => {
    const samples: Sample[] = [
      [0, 2],
      [1, 2.2],
      [2, 2.5],
      [3, 2.3],
      [4, 2],
      [9, 9],
    ];
    expect(overCurrent(samples, 2)).toEqual({ fromSeconds: 1, toSeconds: 3, largestMilliamp: 2.5 });
  });

  it('begins anew after a sample that is not above', () => {
    const samples: Sample[] = [
      [0, 2.5],
      [0.9, 2],
      [1, 2.5],
      [1.9, 2.5],
    ];
    expect(overCurrent(samples, 2)).toBeNull();
  });

  it('takes the larger of two samples of one instant', () => {
    const samples: Sample[] = [
      [0, 2.5],
      [1, 2],
      [1, 2.5],
    ];
    expect(overCurrent(samples, 2)).toMatchObject({ toSeconds: 1 });
  });

  it('never finds anything in samples within 0.1 mA of the permit', () => {
    fc.assert(
      fc.property(fc.array(fc.tuple(fc.nat(100), fc.double({ min: -2.1, max: 2.1, noNaN: true }))), (samples) => {
        return overCurrent(samples, 2) === null;
      }),
    );
  });
});
