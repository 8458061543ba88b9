// A refused dose points at the field behind each limit, with value, limit, layer and source.

import { doseFactsOf, judgeDose } from '@/shared/rules/dose';
import { overLimitFields } from '@/shared/rules/prescription-fields';

const dose = {
  waveform: 'tDCS' as const,
  intensityMilliamp: 2,
  rampUpSeconds: 30,
  holdSeconds: 1200,
  rampDownSeconds: 30,
  electrodes: [
    { position: 'F3', polarity: 'anode' as const, shape: 'pad' as const, areaSquareCentimetre: 35, share: 1 },
    { position: 'Fp2', polarity: 'cathode' as const, shape: 'pad' as const, areaSquareCentimetre: 35, share: 1 },
  ],
};
type Dose = typeof dose & { sessionsPerDay?: number; minGapHours?: number };

function fieldsOf(change: Partial<Dose>, ageYears = 40, limits: Parameters<typeof judgeDose>[2] = undefined) {
  const changed = { sessionsPerDay: 1, minGapHours: 20, ...dose, ...change };
  return overLimitFields(judgeDose(doseFactsOf(changed), ageYears, limits), changed);
}

describe('a refused dose', () => {
  it('names nothing when nothing is above a limit', () => {
    expect(fieldsOf({})).toEqual([]);
  });

  it('points at the current, and at the density that comes with it', () => {
    const fields = fieldsOf({ intensityMilliamp: 6 });
    expect(fields).toContainEqual({
      path: 'dose.intensityMilliamp',
      code: 'current',
      facts: {
        value: 6,
        limit: 4,
        unit: 'mA',
        layer: 'ceiling',
        source: 'Bikson et al. 2016; Antal et al. 2017, 2026',
      },
    });
    expect(fields.map(({ path }) => path)).toContain('dose.electrodes.0.areaSquareCentimetre');
  });

  it('names the site where its limit is the tighter one', () => {
    const [field] = fieldsOf({ intensityMilliamp: 3.5 }, 40, { mostCurrentMilliamp: 3 });
    expect(field).toMatchObject({
      code: 'current',
      facts: { value: 3.5, limit: 3, layer: 'site', source: 'site protocol' },
    });
  });

  it('points at the electrode that is too small', () => {
    const [anode, cathode] = dose.electrodes;
    const electrodes = anode && cathode ? [anode, { ...cathode, areaSquareCentimetre: 10 }] : [];
    expect(fieldsOf({ electrodes }).map(({ path, code }) => [path, code])).toEqual([
      ['dose.electrodes.1.areaSquareCentimetre', 'density'],
    ]);
  });

  it('points at the ramp that is out of bounds, with the bound that it misses', () => {
    expect(fieldsOf({ rampDownSeconds: 5 })).toMatchObject([
      { path: 'dose.rampDownSeconds', code: 'ramp', facts: { value: 5, limit: 10 } },
    ]);
    expect(fieldsOf({ rampUpSeconds: 5 })).toMatchObject([
      { path: 'dose.rampUpSeconds', code: 'ramp', facts: { value: 5, limit: 10 } },
    ]);
    expect(fieldsOf({ rampUpSeconds: 150 })).toMatchObject([
      { path: 'dose.rampUpSeconds', code: 'ramp', facts: { value: 150, limit: 120 } },
    ]);
  });

  it('tells amounts without the noise of a product', () => {
    const [field] = fieldsOf({ intensityMilliamp: 3.3, holdSeconds: 2310.1 });
    expect(field).toMatchObject({ code: 'charge', facts: { value: 7.72233, limit: 7.2, unit: 'C' } });
  });

  it('points at hold, gap and sessions a day', () => {
    expect(fieldsOf({ holdSeconds: 2400, intensityMilliamp: 1 }).map(({ path, code }) => [path, code])).toEqual([
      ['dose.holdSeconds', 'minutes'],
    ]);
    expect(fieldsOf({ minGapHours: 3 })).toMatchObject([
      { path: 'schedule.minGapHours', code: 'gap', facts: { limit: 4 } },
    ]);
    expect(fieldsOf({ sessionsPerDay: 3, minGapHours: 4 })).toMatchObject([
      { path: 'schedule.maxPerDay', code: 'day_minutes' },
    ]);
  });

  it('points at the current for a minor whose site treats none', () => {
    expect(fieldsOf({}, 15)).toMatchObject([{ path: 'dose.intensityMilliamp', code: 'minor' }]);
  });

  it('has facts that JSON can carry, whatever the area', () => {
    const electrodes = dose.electrodes.map((electrode) => ({ ...electrode, areaSquareCentimetre: 0 }));
    const fields = fieldsOf({ electrodes });
    expect(fields.length).toBeGreaterThan(0);
    for (const { facts } of fields)
      for (const fact of Object.values(facts)) expect(typeof fact === 'string' || Number.isFinite(fact)).toBe(true);
  });
});
