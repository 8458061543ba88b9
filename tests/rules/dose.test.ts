// Judging a dose beside the published cases: what each row carries for a limit bar, each unknown fact by name, the
// site's own rows, and that a stronger dose is never judged milder.

import fc from 'fast-check';
import { ageYearsOn } from '@/shared/rules/age';
import { chargeOf, doseFactsOf, judgeDose, peakOf, rmsOf, worstTier, type DoseFacts } from '@/shared/rules/dose';
import { chargeDensityOf, currentSplit } from '@/shared/rules/dose/arithmetic';
import { tiers } from '@/shared/values/codes';

const pad = (position: string, polarity: 'anode' | 'cathode', areaSquareCentimetre = 35) =>
  ({ position, polarity, shape: 'pad', areaSquareCentimetre, share: 1 }) as const;
const dose: DoseFacts = {
  waveform: 'tDCS',
  amplitude: { valueMilliamp: 2, meaning: 'peak' },
  holdSeconds: 1200,
  rampUpSeconds: 30,
  rampDownSeconds: 30,
  sessionsPerDay: 1,
  minGapHours: 20,
  electrodes: [pad('F3', 'anode'), pad('F4', 'cathode')],
};
const rowOf = (quantity: string, changes: DoseFacts = {}, site = {}, age = 42) =>
  judgeDose({ ...dose, ...changes }, age, site).rows.find((row) => row.quantity === quantity);
const missingOf = (changes: DoseFacts) =>
  judgeDose({ ...dose, ...changes }, 42).rows.flatMap(({ fact }) => (fact === undefined ? [] : [fact]));

describe('judgeDose', () => {
  it('lists every row of a direct current, accepted ones too, in the order of the codes', () => {
    expect(judgeDose(dose, 42).rows.map(({ quantity }) => quantity)).toEqual([
      'current',
      'minutes',
      'charge',
      'density',
      'area',
      'per_day',
      'day_minutes',
      'gap',
      'ramp',
      'shares',
    ]);
  });

  it('carries value, the three limits, layer and source', () => {
    expect(rowOf('current')).toEqual({
      quantity: 'current',
      tier: 'accept',
      value: 2,
      unit: 'mA',
      routineLimit: 2,
      siteLimit: 4,
      ceiling: 4,
      direction: 'at_most',
      layer: 'default',
      source: 'own choice',
    });
    expect(rowOf('current', { amplitude: { valueMilliamp: 4.5, meaning: 'peak' } })).toMatchObject({
      tier: 'refuse',
      layer: 'ceiling',
      source: 'Bikson et al. 2016; Antal et al. 2017, 2026',
    });
    expect(rowOf('gap', { minGapHours: 6 })).toMatchObject({ direction: 'at_least', routineLimit: 20, siteLimit: 4 });
  });

  it('names the electrode that decides', () => {
    const electrodes = [pad('F3', 'anode', 30), pad('F4', 'cathode', 26)];
    expect(rowOf('density', { electrodes })?.electrode).toBe('F4');
    expect(rowOf('area', { electrodes })).toMatchObject({ electrode: 'F4', value: 26 });
  });

  it('puts the site in the place of the shipped row where the site has set its own', () => {
    expect(rowOf('current', {}, { mostCurrentMilliamp: 1.5 })).toMatchObject({
      tier: 'refuse',
      layer: 'site',
      source: 'site protocol',
      routineLimit: 1.5,
      siteLimit: 1.5,
    });
    expect(rowOf('current', {}, { routineCurrentMilliamp: 1.5 })).toMatchObject({
      tier: 'second_signature',
      layer: 'site',
    });
    expect(rowOf('minutes', { holdSeconds: 2100 }, { routineMinutes: 40 })).toMatchObject({
      tier: 'accept',
      layer: 'site',
    });
    expect(rowOf('area', {}, { routineAreaSquareCentimetre: 36 })).toMatchObject({
      tier: 'second_signature',
      layer: 'site',
    });
    expect(rowOf('per_day', { sessionsPerDay: 2 }, { routineSessionsPerDay: 2 })).toMatchObject({
      tier: 'accept',
      layer: 'site',
    });
    expect(rowOf('day_minutes', {}, { mostMinutesPerDay: 20 })).toMatchObject({ tier: 'refuse', layer: 'site' });
    expect(rowOf('gap', { minGapHours: 8 }, { leastGapHours: 12 })).toMatchObject({ tier: 'refuse', layer: 'site' });
    expect(rowOf('gap', {}, { routineGapHours: 24 })).toMatchObject({ tier: 'second_signature', layer: 'site' });
  });

  it('cites the site’s protocol for the site’s own rows, and a paper or an own choice for the shipped ones', () => {
    expect(rowOf('area')?.source).toBe('Bikson, Datta, Elwassif 2009');
    expect(rowOf('area', {}, { routineAreaSquareCentimetre: 30 })?.source).toBe('site protocol');
    expect(rowOf('day_minutes')?.source).toBe('Antal et al. 2017, 2026');
    expect(rowOf('day_minutes', {}, { mostMinutesPerDay: 50 })?.source).toBe('site protocol');
    expect(rowOf('gap')?.source).toBe('own choice');
  });

  it('never lets a site raise what is compiled in', () => {
    const strong = { amplitude: { valueMilliamp: 4.2, meaning: 'peak' } } as const;
    expect(rowOf('current', strong, { mostCurrentMilliamp: 9 })).toMatchObject({
      tier: 'refuse',
      ceiling: 4,
      siteLimit: 4,
    });
    expect(rowOf('gap', { minGapHours: 3 }, { leastGapHours: 1 })).toMatchObject({ tier: 'refuse', layer: 'ceiling' });
    expect(rowOf('day_minutes', { sessionsPerDay: 3 }, { mostMinutesPerDay: 90 })).toMatchObject({
      tier: 'refuse',
      ceiling: 60,
    });
    expect(judgeDose(dose, 42, { mostMinutesPerDay: 90, leastGapHours: 1 }).over.map(({ field }) => field)).toEqual([
      'mostMinutesPerDay',
      'leastGapHours',
    ]);
  });

  it('reads the layers of the minors’ row', () => {
    const child = { amplitude: { valueMilliamp: 1.2, meaning: 'peak' } } as const;
    expect(rowOf('minor', child, {}, 15)).toMatchObject({ layer: 'default', fact: 'site.minor_limit_mA' });
    expect(rowOf('minor', child, { minorCurrentMilliamp: 1.1 }, 15)).toMatchObject({ layer: 'site', siteLimit: 1.1 });
    expect(rowOf('minor', child, { minorCurrentMilliamp: 2 }, 15)).toMatchObject({ tier: 'second_signature' });
    expect(rowOf('minor', {}, { minorCurrentMilliamp: 2 }, 11.9)).toMatchObject({ tier: 'refuse', layer: 'ceiling' });
    expect(rowOf('minor', { amplitude: undefined }, { minorCurrentMilliamp: 2 }, 15)).toBeUndefined();
  });

  it('shows the ramp and the band edge that is out of bounds', () => {
    expect(rowOf('ramp', { rampUpSeconds: 20, rampDownSeconds: 130 })).toMatchObject({ tier: 'refuse', value: 130 });
    expect(rowOf('ramp', { rampUpSeconds: 40 })).toMatchObject({ tier: 'accept', value: 30, floor: 10, ceiling: 120 });
    const noise: DoseFacts = { waveform: 'tRNS', amplitude: { valueMilliamp: 1.5, meaning: 'peak' } };
    expect(rowOf('frequency', { ...noise, bandHertz: [100, 1001] })).toMatchObject({ tier: 'refuse', value: 1001 });
    expect(rowOf('frequency', { ...noise, bandHertz: [0.05, 640] })).toMatchObject({ tier: 'refuse', value: 0.05 });
    expect(rowOf('frequency', { ...noise, bandHertz: [100, 100] })).toMatchObject({ tier: 'refuse' });
  });

  it('refuses a montage of which one polarity is missing', () => {
    expect(rowOf('shares', { electrodes: [pad('F3', 'anode')] })).toMatchObject({ tier: 'refuse', value: 0 });
    expect(rowOf('shares', { electrodes: [] })).toMatchObject({ tier: 'refuse' });
    const thirds = [0.33, 0.33, 0.33].map((share) => ({ ...pad('P4', 'cathode'), share }));
    expect(rowOf('shares', { electrodes: [pad('F3', 'anode'), ...thirds] })).toMatchObject({ tier: 'accept' });
  });

  it.each<[string, DoseFacts]>([
    ['dose.waveform', { waveform: undefined }],
    ['dose.amplitude', { amplitude: undefined }],
    ['dose.amplitude.value_mA', { amplitude: { meaning: 'peak' } }],
    ['dose.amplitude.value_mA', { amplitude: { valueMilliamp: Number.NaN, meaning: 'peak' } }],
    ['dose.amplitude.meaning', { amplitude: { valueMilliamp: 2 } }],
    ['dose.amplitude.meaning', { amplitude: { valueMilliamp: 2, meaning: 'rms' } }],
    ['dose.offset_mA', { offsetMilliamp: Number.NaN }],
    ['dose.hold_s', { holdSeconds: undefined }],
    ['dose.hold_s', { holdSeconds: -1 }],
    ['dose.ramp_up_s', { rampUpSeconds: undefined }],
    ['dose.ramp_down_s', { rampDownSeconds: undefined }],
    ['dose.sessions_per_day', { sessionsPerDay: undefined }],
    ['dose.sessions_per_day', { sessionsPerDay: 0 }],
    ['dose.min_gap_h', { minGapHours: undefined }],
    ['dose.electrodes', { electrodes: undefined }],
    ['dose.electrodes.0.polarity', { electrodes: [{ ...pad('F3', 'anode'), polarity: undefined }] }],
    ['dose.electrodes.0.shape', { electrodes: [{ ...pad('F3', 'anode'), shape: undefined }] }],
    ['dose.electrodes.0.area_cm2', { electrodes: [{ ...pad('F3', 'anode'), areaSquareCentimetre: 0 }] }],
    ['dose.electrodes.0.share', { electrodes: [{ ...pad('F3', 'anode'), share: undefined }] }],
    ['dose.frequency_Hz', { waveform: 'tACS' }],
    ['dose.band_Hz', { waveform: 'tRNS', amplitude: { valueMilliamp: 1.5, meaning: 'peak' } }],
    // A peak below the r.m.s. cannot be meant.
    [
      'dose.amplitude.peak_mA',
      { waveform: 'tRNS', bandHertz: [100, 640], amplitude: { valueMilliamp: 1, meaning: 'rms', peakMilliamp: 0.5 } },
    ],
  ])('refuses by name without %s (%#)', (fact, changes) => {
    expect(missingOf(changes)).toContain(fact);
    expect(judgeDose({ ...dose, ...changes }, 42).verdict).toBe('refuse');
  });

  it('refuses a dose of which nothing is known', () => {
    expect(judgeDose(undefined, undefined)).toMatchObject({ verdict: 'refuse', computed: {} });
    expect(judgeDose(undefined, 42).rows.map(({ fact }) => fact)).toEqual(['dose']);
    expect(judgeDose({}, 42).verdict).toBe('refuse');
  });

  it('judges no ring of which area or time is not known: the unknown fact refuses', () => {
    const ring = { ...pad('C3', 'anode'), shape: 'ring' } as const;
    const site = { allowsRings: true };
    expect(rowOf('ring', { electrodes: [{ ...ring, areaSquareCentimetre: undefined }] }, site)).toBeUndefined();
    expect(rowOf('ring', { electrodes: [ring], holdSeconds: undefined }, site)).toBeUndefined();
    expect(rowOf('ring', { electrodes: [ring] }, site)).toMatchObject({ tier: 'second_signature' });
  });

  it('never judges a stronger, longer, denser or more frequent dose milder', () => {
    const some = fc.record({
      milliamp: fc.double({ min: 0.1, max: 5, noNaN: true }),
      hold: fc.integer({ min: 60, max: 2600 }),
      area: fc.integer({ min: 9, max: 50 }),
      perDay: fc.integer({ min: 1, max: 3 }),
      gap: fc.integer({ min: 2, max: 30 }),
      age: fc.integer({ min: 10, max: 70 }),
      // Up to what is compiled in: above it a site's limit is refused for being set.
      minor: fc.option(fc.double({ min: 0.5, max: 2, noNaN: true })),
    });
    const judge = (each: {
      milliamp: number;
      hold: number;
      area: number;
      perDay: number;
      gap: number;
      age: number;
      minor: number | null;
    }) =>
      tiers.indexOf(
        judgeDose(
          {
            ...dose,
            amplitude: { valueMilliamp: each.milliamp, meaning: 'peak' },
            holdSeconds: each.hold,
            sessionsPerDay: each.perDay,
            minGapHours: each.gap,
            electrodes: [pad('F3', 'anode', each.area), pad('F4', 'cathode')],
          },
          each.age,
          { minorCurrentMilliamp: each.minor },
        ).verdict,
      );
    fc.assert(
      fc.property(some, fc.double({ min: 1, max: 2, noNaN: true }), (each, factor) => {
        const verdict = judge(each);
        return (
          verdict <= judge({ ...each, milliamp: each.milliamp * factor }) &&
          verdict <= judge({ ...each, hold: each.hold * factor }) &&
          verdict <= judge({ ...each, area: each.area / factor }) &&
          verdict <= judge({ ...each, perDay: each.perDay + 1 }) &&
          verdict <= judge({ ...each, gap: each.gap - 1 }) &&
          verdict <= judge({ ...each, minor: each.minor === null ? null : each.minor / factor })
        );
      }),
      { numRuns: 500 },
    );
  });
});

describe('dose arithmetic', () => {
  it('reads a form’s intensity as baseline to peak', () => {
    const form = {
      waveform: 'tDCS',
      intensityMilliamp: 2,
      rampUpSeconds: 30,
      holdSeconds: 1200,
      rampDownSeconds: 30,
      electrodes: dose.electrodes ?? [],
      sessionsPerDay: 1,
      minGapHours: 20,
    } as const;
    expect(doseFactsOf(form)).toEqual(dose);
    expect(chargeOf(form)).toBeCloseTo(2.46, 12);
  });

  it('tells peak and r.m.s. of each waveform, and neither where it cannot be told', () => {
    const of = (changes: DoseFacts) => [peakOf({ ...dose, ...changes }), rmsOf({ ...dose, ...changes })];
    expect(of({ offsetMilliamp: -0.5 })).toEqual([2.5, 2.5]);
    expect(of({ amplitude: { valueMilliamp: -2, meaning: 'peak' } })).toEqual([2, 2]);
    expect(of({ waveform: 'tRNS', amplitude: { valueMilliamp: 3, meaning: 'peak_to_peak' } })).toEqual([
      1.5,
      undefined,
    ]);
    expect(of({ waveform: 'tRNS', amplitude: { valueMilliamp: 0.5, meaning: 'rms', peakMilliamp: 1.5 } })).toEqual([
      1.5, 0.5,
    ]);
    expect(of({ waveform: undefined, amplitude: { valueMilliamp: 1, meaning: 'rms' } })).toEqual([
      undefined,
      undefined,
    ]);
    expect(of({ offsetMilliamp: Number.NaN })).toEqual([undefined, undefined]);
    expect(of({ waveform: 'tACS', amplitude: { valueMilliamp: 1 } })).toEqual([undefined, undefined]);
  });

  it('gives charge density in C/m² and names an empty split', () => {
    expect(chargeDensityOf(2.46, 25)).toBeCloseTo(984, 9);
    expect(currentSplit([])).toMatchObject({ refused: false, largest: '' });
    expect(currentSplit([{ position: 'F3', milliamp: Number.NaN, areaSquareCentimetre: 25 }])).toMatchObject({
      refused: true,
    });
  });

  it('takes the worst of tiers', () => {
    expect(worstTier([])).toBe('accept');
    expect(worstTier(['second_signature', 'refuse', 'accept'])).toBe('refuse');
  });
});

describe('ageYearsOn', () => {
  it.each([
    ['2008-05-13', '2026-05-12', 17],
    ['2008-05-13', '2026-05-13', 18],
    ['2008-02-29', '2026-02-28', 17],
    ['2008-02-29', '2026-03-01', 18],
    ['2008-02-29', '2028-02-29', 20],
    ['2026-05-12', '2026-05-12', 0],
  ])('makes who was born on %s on %s %d years old', (born, day, years) => {
    expect(ageYearsOn(born, day)).toBe(years);
  });

  it('gives no age for days that are none, or before the birth', () => {
    expect(ageYearsOn('2008-02-30', '2026-03-01')).toBeUndefined();
    expect(ageYearsOn('2008-02-28', 'today')).toBeUndefined();
    expect(ageYearsOn('2026-05-13', '2026-05-12')).toBeUndefined();
  });
});

describe('the waveforms', () => {
  const sine: DoseFacts = { ...dose, waveform: 'tACS', frequencyHertz: 10 };
  const noise: DoseFacts = { ...dose, waveform: 'tRNS', bandHertz: [100, 640] };

  it.each([
    ['peak', 1, [1, 2, Math.SQRT1_2]],
    ['peak_to_peak', 2, [1, 2, Math.SQRT1_2]],
    ['rms', Math.SQRT1_2, [1, 2, Math.SQRT1_2]],
  ] as const)('shows a sine entered as %s in all three ways', (meaning, valueMilliamp, wanted) => {
    const { computed } = judgeDose({ ...sine, amplitude: { valueMilliamp, meaning } }, 42);
    const shown = [computed.peakMilliamp, computed.peakToPeakMilliamp, computed.rmsMilliamp];
    shown.forEach((value, index) => expect(value).toBeCloseTo(wanted[index] ?? Number.NaN, 12));
  });

  it('shows noise by its r.m.s. and the peak at which it clips, and refuses one without the other', () => {
    const { computed } = judgeDose(
      { ...noise, amplitude: { valueMilliamp: 0.5, meaning: 'rms', peakMilliamp: 2 } },
      42,
    );
    expect(computed).toMatchObject({ peakMilliamp: 2, peakToPeakMilliamp: 4, rmsMilliamp: 0.5 });
    const alone = judgeDose({ ...noise, amplitude: { valueMilliamp: 0.5, meaning: 'rms' } }, 42);
    expect(alone.rows.flatMap(({ fact }) => fact ?? [])).toEqual(['dose.amplitude.peak_mA']);
  });

  it.each([
    [undefined, 0],
    [90, 90],
    [-90, 270],
    [360, 0],
    [-360, 0],
  ])('reads the phase %p of a sine as %p degrees', (phaseDegrees, wanted) => {
    const { computed, verdict } = judgeDose({ ...sine, phaseDegrees }, 42);
    expect([computed.phaseDegrees, verdict]).toEqual([wanted, 'accept']);
  });

  it('refuses a phase that cannot be meant by name, and asks none of a direct current or of noise', () => {
    const factsOf = (changes: DoseFacts) => judgeDose(changes, 42).rows.flatMap(({ fact }) => fact ?? []);
    expect(factsOf({ ...sine, phaseDegrees: 361 })).toEqual(['dose.phase_deg']);
    expect(factsOf({ ...sine, phaseDegrees: Number.NaN })).toEqual(['dose.phase_deg']);
    expect(factsOf({ ...dose, phaseDegrees: Number.NaN })).toEqual([]);
    expect(judgeDose({ ...noise, phaseDegrees: 90 }, 42).computed.phaseDegrees).toBeUndefined();
  });

  it('judges each return of one centre by its own share and its own area', () => {
    const centre = pad('Cz', 'anode', 35);
    const returns = [0.5, 0.3, 0.2].map((share, index) => ({
      ...pad(`R${index}`, 'cathode', index === 0 ? 5 : 10),
      share,
    }));
    const { rows, computed } = judgeDose({ ...dose, electrodes: [centre, ...returns] }, 42);
    // 2 mA × 0.5 on 5 cm² is 0.2 mA/cm²; the centre has 2 mA on 35 cm².
    expect(computed.maxDensityMilliampPerSquareCentimetre).toBeCloseTo(0.2, 12);
    expect(rows.find(({ quantity }) => quantity === 'density')).toMatchObject({
      ...{ tier: 'refuse', layer: 'ceiling', electrode: 'R0', ceiling: 0.16 },
    });
  });
});
