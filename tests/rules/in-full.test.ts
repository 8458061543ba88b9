// The findings of the rules in full, field by field: what a screen shows and an auditor reads is asked to the letter, not only the code.

import { clearance, earliestStart, plannedCounts } from '@/shared/rules/clearance';
import { resolverOf, sourceOf } from '@/shared/rules/clearance/reason';
import { hoursOn, nextOpening, openHoursAt } from '@/shared/rules/hours';
import { gradeOf, lockoutsAfterDiary } from '@/shared/rules/lockout';
import { judgeDose, worstTier } from '@/shared/rules/dose';
import { currentSplit } from '@/shared/rules/dose/arithmetic';
import { fitsUnder } from '@/shared/rules/rolling';
import { siteLimitsAllowed } from '@/shared/rules/site-limits';
import { cases, ended, past } from '@/tests/support/clearance-cases';
import { clearedAt, clearedFacts, withFacts } from '@/tests/support/clearance-facts';

/** What each case of the table tells beside its code, who resolves it and its source. */
const told = new Map<string, object>(
  Object.entries({
    supervision_due: { value: 4, limit: 5, layer: 'site' },
    dose_above_limit: { subject: 'current', value: 3, limit: 2, unit: 'mA', layer: 'site' },
    lockout_safety: { subject: 'faint' },
    lockout_review: { subject: 'headache_high' },
    lockout_device: { subject: 'lost_contact_twice' },
    lockout_hold: { subject: 'precheck_fever', until: '2026-05-12T16:00:01Z' },
    outside_hours: { layer: 'prescription', until: '2026-05-13T05:00:00Z' },
    gap_too_short: {
      until: '2026-05-12T16:00:01Z',
      value: 19.99972222222222,
      limit: 20,
      unit: 'h',
      layer: 'prescription',
    },
    day_count_reached: { until: '2026-05-12T22:00:00Z', value: 1, limit: 1, layer: 'prescription' },
    minutes_24h: { unit: 'min', layer: 'ceiling', value: 60.5, limit: 60, until: '2026-05-12T16:00:01Z' },
    week_count_reached: { until: '2026-05-18T15:51:00Z', value: 1, limit: 1, layer: 'prescription' },
    charge_24h: { unit: 'C', layer: 'site', value: 4.92, limit: 4.91, until: '2026-05-12T16:00:01Z' },
    charge_7d: { unit: 'C', layer: 'site', value: 4.92, limit: 4.91, until: '2026-05-18T15:51:00Z' },
    course_complete: { value: 20, limit: 20, layer: 'prescription' },
    recall_call_due: { value: 1 },
    battery_low: { value: 29, limit: 30, unit: '%', layer: 'default' },
    supply_used_up: { subject: 'sponge', value: 10, limit: 10, layer: 'default' },
    supply_expired: { subject: 'sponge', value: 14, limit: 14, unit: 'd', layer: 'default' },
    precheck_expired: { value: 30, limit: 30, unit: 'min', layer: 'default' },
    precheck_hold: { subject: 'hold_tomorrow', until: '2026-05-12T23:55:00Z' },
    live_permit: { until: '2026-05-12T16:00:01Z' },
  }),
);

it.each(Object.entries(cases))('tells of %s all that there is to tell, and nothing else', (code, { fires }) => {
  const { now = clearedAt, ...changes } = fires;
  const found = clearance(withFacts(clearedFacts, changes), now).reasons.find((each) => each.code === code);
  if (found === undefined) throw new Error(`${code} does not fire`);
  const own = { code, resolvedBy: found.code === 'precheck_hold' ? 'time' : resolverOf[found.code] };
  const source = code === 'minutes_24h' ? 'Antal et al. 2017, 2026' : sourceOf[found.code];
  expect(found).toEqual({ ...own, source, ...told.get(code) });
});

describe('a judged dose', () => {
  const electrode = (
    position: string,
    polarity: 'anode' | 'cathode',
    shape: 'pad' | 'ring',
    areaSquareCentimetre: number,
    share: number,
  ) => ({
    ...{ position, polarity, shape, areaSquareCentimetre, share },
  });
  const dose = {
    ...({ waveform: 'tACS', holdSeconds: 600, rampUpSeconds: 30, rampDownSeconds: 20, frequencyHertz: 10 } as const),
    amplitude: { valueMilliamp: 1.2, meaning: 'peak' as const },
    ...{ sessionsPerDay: 1, minGapHours: 24 },
    electrodes: [
      electrode('Cz', 'anode', 'pad', 20, 1),
      electrode('A', 'cathode', 'ring', 2, 0.5),
      electrode('B', 'cathode', 'ring', 3, 0.5),
    ],
  };
  const site = { allowsRings: true, minorCurrentMilliamp: 1.5, mostCurrentMilliamp: 9, leastGapHours: 3 };

  it('has every row in full: value, unit, limits, direction, layer, source, electrode', () => {
    expect(judgeDose(dose, 15, site).rows).toEqual([
      {
        quantity: 'current',
        tier: 'accept',
        value: 1.2,
        unit: 'mA',
        routineLimit: 2,
        siteLimit: 4,
        ceiling: 4,
        direction: 'at_most',
        layer: 'default',
        source: 'own choice',
      },
      {
        quantity: 'minutes',
        tier: 'accept',
        value: 10.833333333333334,
        unit: 'min',
        routineLimit: 30,
        siteLimit: 40,
        ceiling: 40,
        direction: 'at_most',
        layer: 'default',
        source: 'own choice',
      },
      {
        quantity: 'charge',
        tier: 'accept',
        value: 0,
        unit: 'C',
        routineLimit: 3.6,
        siteLimit: 7.2,
        ceiling: 7.2,
        direction: 'at_most',
        layer: 'default',
        source: 'own choice',
      },
      {
        quantity: 'density',
        tier: 'accept',
        value: 0.06,
        unit: 'mA/cm²',
        routineLimit: 0.08,
        siteLimit: 0.16,
        ceiling: 0.16,
        direction: 'at_most',
        layer: 'default',
        source: 'own choice',
        electrode: 'Cz',
      },
      {
        quantity: 'area',
        tier: 'second_signature',
        value: 20,
        unit: 'cm²',
        routineLimit: 25,
        direction: 'at_least',
        layer: 'default',
        source: 'Bikson, Datta, Elwassif 2009',
        electrode: 'Cz',
      },
      {
        quantity: 'per_day',
        tier: 'accept',
        value: 1,
        unit: '',
        routineLimit: 1,
        direction: 'at_most',
        layer: 'default',
        source: 'own choice',
      },
      {
        quantity: 'day_minutes',
        tier: 'accept',
        value: 10.833333333333334,
        unit: 'min',
        siteLimit: 60,
        ceiling: 60,
        direction: 'at_most',
        layer: 'ceiling',
        source: 'Antal et al. 2017, 2026',
      },
      {
        quantity: 'gap',
        tier: 'accept',
        value: 24,
        unit: 'h',
        routineLimit: 20,
        siteLimit: 4,
        ceiling: 4,
        direction: 'at_least',
        layer: 'default',
        source: 'own choice',
      },
      {
        quantity: 'ramp',
        tier: 'accept',
        value: 20,
        unit: 's',
        floor: 10,
        ceiling: 120,
        direction: 'at_most',
        layer: 'ceiling',
        source: 'common practice, number own choice',
      },
      {
        quantity: 'frequency',
        tier: 'accept',
        value: 10,
        unit: 'Hz',
        floor: 0.5,
        ceiling: 200,
        direction: 'at_most',
        layer: 'ceiling',
        source: 'own choice',
      },
      {
        quantity: 'minor',
        value: 1.2,
        unit: 'mA',
        ceiling: 2,
        direction: 'at_most',
        tier: 'second_signature',
        routineLimit: 1,
        siteLimit: 1.5,
        layer: 'default',
        source: 'own choice after Buchanan et al. 2021, Kessler et al. 2013',
      },
      {
        quantity: 'ring',
        unit: 'mA',
        ceiling: 2,
        direction: 'at_most',
        source: 'Minhas et al. 2010',
        tier: 'second_signature',
        value: 0.6,
        layer: 'ceiling',
      },
      {
        quantity: 'shares',
        tier: 'accept',
        value: 1,
        unit: '',
        floor: 0.99,
        ceiling: 1.01,
        direction: 'at_most',
        layer: 'ceiling',
        source: 'own choice',
      },
      {
        quantity: 'site_limit',
        tier: 'refuse',
        value: 9,
        unit: '',
        ceiling: 4,
        direction: 'at_most',
        layer: 'ceiling',
        source: 'Bikson et al. 2016; Antal et al. 2017, 2026',
        field: 'mostCurrentMilliamp',
      },
      {
        quantity: 'site_limit',
        tier: 'refuse',
        value: 3,
        unit: '',
        ceiling: 4,
        direction: 'at_least',
        layer: 'ceiling',
        source: 'own choice',
        field: 'leastGapHours',
      },
    ]);
  });

  it('has every computed amount', () => {
    expect(judgeDose(dose, 15, site).computed).toEqual({
      peakMilliamp: 1.2,
      peakToPeakMilliamp: 2.4,
      rmsMilliamp: 0.8485281374238569,
      minutes: 10.833333333333334,
      chargeCoulomb: 0,
      maxDensityMilliampPerSquareCentimetre: 0.3,
      halfCycleChargeMicrocoulomb: 38.19718634205488,
      phaseDegrees: 0,
    });
  });

  it('has rows of noise and of a minor without a limit in full', () => {
    const noise = { ...dose, waveform: 'tRNS' as const, frequencyHertz: undefined, bandHertz: [100, 640] as const };
    const { rows, computed } = judgeDose(noise, 11, site);
    expect(rows.find(({ quantity }) => quantity === 'frequency')).toEqual({
      ...{ quantity: 'frequency', tier: 'accept', value: 640, unit: 'Hz', floor: 0.1, ceiling: 1000 },
      ...{ direction: 'at_most', layer: 'ceiling', source: 'own choice' },
    });
    expect(rows.find(({ quantity }) => quantity === 'minor')).toMatchObject({
      tier: 'refuse',
      layer: 'ceiling',
      source: 'own choice',
    });
    expect(computed.halfCycleChargeMicrocoulomb).toBeUndefined();
    const refused = judgeDose(dose, 15, { ...site, allowsRings: false, minorCurrentMilliamp: undefined }).rows;
    expect(refused.find(({ quantity }) => quantity === 'minor')).toMatchObject({
      tier: 'refuse',
      layer: 'default',
      fact: 'site.minor_limit_mA',
    });
    expect(refused.find(({ quantity }) => quantity === 'ring')).toMatchObject({ tier: 'refuse', layer: 'default' });
    // Without the row for rings they are judged as pads too, and the smallest is one of them.
    expect(refused.find(({ quantity }) => quantity === 'area')).toMatchObject({ electrode: 'A', value: 2 });
  });

  it('names what is not known in full, and judges no row of it', () => {
    const { rows, verdict } = judgeDose({ ...dose, waveform: 'tRNS', bandHertz: [Number.NaN, 640] }, 40);
    expect(verdict).toBe('refuse');
    expect(rows.filter(({ quantity }) => quantity === 'frequency')).toEqual([]);
    expect(rows.at(-1)).toEqual({
      ...{
        quantity: 'unknown_fact',
        tier: 'refuse',
        unit: '',
        direction: 'at_most',
        source: 'own choice',
        fact: 'dose.band_Hz',
      },
    });
    for (const gone of [
      'holdSeconds',
      'rampUpSeconds',
      'rampDownSeconds',
      'sessionsPerDay',
      'minGapHours',
      'electrodes',
      'amplitude',
    ] as const) {
      const facts = judgeDose({ ...dose, [gone]: undefined }, 40).rows.flatMap(({ fact }) => fact ?? []);
      expect(facts).toHaveLength(1);
    }
    expect(
      judgeDose({ ...dose, electrodes: [] }, 40).rows.some(
        ({ quantity }) => quantity === 'area' || quantity === 'density',
      ),
    ).toBe(false);
  });

  it('is the worst of its rows', () => {
    expect([worstTier([]), worstTier(['accept', 'second_signature']), worstTier(['refuse', 'accept'])]).toEqual([
      'accept',
      'second_signature',
      'refuse',
    ]);
  });
});

describe('limits of a site', () => {
  it('that contradict themselves are told with value, limit, layer and source', () => {
    expect(
      siteLimitsAllowed({ routineCurrentMilliamp: 3, mostCurrentMilliamp: 2, routineGapHours: 5, leastGapHours: 6 }),
    ).toEqual([
      {
        field: 'routineCurrentMilliamp',
        code: 'routine_above_most',
        value: 3,
        limit: 2,
        layer: 'site',
        source: 'own choice',
      },
      { field: 'routineGapHours', code: 'routine_above_most', value: 5, limit: 6, layer: 'site', source: 'own choice' },
    ]);
  });
});

describe('currents that divide', () => {
  const at = (position: string, milliamp: number, areaSquareCentimetre = 10) => ({
    position,
    milliamp,
    areaSquareCentimetre,
  });

  it('name the first in the alphabet of equal densities, and only returns have shares', () => {
    const split = currentSplit([at('B', 1), at('A', -1), at('C', 0)]);
    expect(split).toEqual({
      ...{ refused: false, sumMilliamp: 0, shares: { A: 1 } },
      ...{ densitiesAmpPerSquareMetre: { A: 1, B: 1, C: 0 }, largest: 'A' },
    });
    expect(currentSplit([at('A', 1), at('B', -1)])).toMatchObject({ largest: 'A' });
  });

  it('may miss nothing by a billionth of a mA', () => {
    expect(currentSplit([at('A', 1e-9)]).refused).toBe(false);
    expect(currentSplit([at('A', 1.1e-9)]).refused).toBe(true);
  });
});

describe('hours', () => {
  const hours = { hoursFrom: '07:00', hoursTo: '22:00', zone: 'Europe/Berlin' };
  it('that cannot be read, or are none, are never open and open never', () => {
    for (const odd of [{ hoursFrom: '7 am' }, { hoursTo: 'late' }, { zone: 'Nowhere/Land' }, { hoursTo: '07:00' }]) {
      const of = { ...hours, ...odd };
      expect([
        openHoursAt(Date.parse(clearedAt), of),
        nextOpening(Date.parse(clearedAt), of),
        hoursOn('2026-05-12', of),
      ]).toEqual([undefined, undefined, undefined]);
    }
  });

  it('close at the last of a time that comes twice', () => {
    const night = { hoursFrom: '01:00', hoursTo: '02:30', zone: 'Europe/Berlin' };
    expect(hoursOn('2026-10-25', night)).toEqual({
      opensAt: Date.parse('2026-10-24T23:00:00Z'),
      closesAt: Date.parse('2026-10-25T01:30:00Z'),
    });
  });
});

describe('a rolling sum that does not fit', () => {
  it('tells the sum, and when enough of it is older', () => {
    const now = Date.parse(clearedAt);
    const hour = 3_600_000;
    const counted = [
      { endedAt: now - 24 * hour, amount: 9 },
      { endedAt: now - 20 * hour, amount: 3 },
      { endedAt: now - 2 * hour, amount: 2 },
    ];
    // What ended exactly a day ago is out.
    expect(fitsUnder(counted, 3, 6, now, 24 * hour)).toEqual({ fits: false, sum: 5, at: now + 4 * hour });
    expect(fitsUnder(counted, 7, 6, now, 24 * hour)).toEqual({ fits: false, sum: 5 });
    expect(fitsUnder(counted, 1, 6, now, 24 * hour)).toEqual({ fits: true });
  });
});

describe('a diary', () => {
  it('rises only if each headache is worse than the one before, and only up to 3', () => {
    const codes = (...headaches: number[]) =>
      lockoutsAfterDiary({ headacheBefore: headaches.slice(0, -1), diary: { headache: headaches.at(-1) } }).effects.map(
        ({ code }) => code,
      );
    expect([codes(1, 2, 3), codes(1, 3, 3), codes(2, 2, 3), codes(0, 1, 2), codes(2, 3)]).toEqual([
      ['headache_rising'],
      [],
      [],
      [],
      [],
    ]);
  });

  it('grades nothing felt as none', () => {
    expect([gradeOf(0), gradeOf(-1), gradeOf(Number.NaN), gradeOf(1)]).toEqual(['none', 'none', 'none', 'mild']);
  });

  it('asks nothing of anybody where nothing was found', () => {
    expect(lockoutsAfterDiary({})).toEqual({
      ...{
        effects: [],
        pageStaff: false,
        emergencyAdvice: false,
        deviceAction: 'none',
        deviceQuarantined: false,
        mayStart: true,
      },
    });
  });
});

describe('clearance', () => {
  it('says the latest of several live permits', () => {
    const permit = (id: string, expiresAt: string) => ({ id, issuedAt: '2026-05-12T15:50:00Z', expiresAt });
    for (const livePermits of [
      [permit('a', '2026-05-12T16:10:00Z'), permit('b', '2026-05-12T16:20:00Z')],
      [permit('b', '2026-05-12T16:20:00Z'), permit('a', '2026-05-12T16:10:00Z')],
    ]) {
      expect(clearance(withFacts(clearedFacts, { livePermits }), clearedAt).reasons).toMatchObject([
        { code: 'live_permit', until: '2026-05-12T16:20:00Z' },
      ]);
    }
  });

  it('says a limit that time does not lift with the sum that would be', () => {
    const [found] = clearance(
      withFacts(clearedFacts, {
        site: { maxCharge24hCoulomb: 2 },
        sessions: [ended('2026-05-12T08:00:00Z', '2026-05-12T08:21:00Z')],
        prescription: { minGapHours: 1, maxPerDay: 3 },
      }),
      clearedAt,
    ).reasons;
    expect(found).toEqual({
      code: 'charge_24h',
      resolvedBy: 'clinician',
      source: 'site protocol',
      value: 4.92,
      limit: 2,
      unit: 'C',
      layer: 'site',
    });
  });

  it('says that a check was answered while a hold ran', () => {
    const lockouts = [{ level: 'hold' as const, code: 'precheck_fever', until: '2026-05-12T15:58:00Z' }];
    expect(clearance(withFacts(clearedFacts, { lockouts }), clearedAt).reasons).toEqual([
      { code: 'precheck_hold', resolvedBy: 'participant', source: 'own choice', subject: 'answered_during_hold' },
    ]);
  });

  it('says a helper or a check that is missing beside an emergency answer, and who must look', () => {
    const [found] = clearance(withFacts(clearedFacts, { precheck: { outcome: 'emergency' } }), clearedAt).reasons;
    expect(found).toEqual({
      code: 'precheck_hold',
      resolvedBy: 'clinician',
      source: 'own choice',
      subject: 'emergency',
    });
  });

  it('tells two kinds of supplies that are too old once', () => {
    const old = { kind: 'saline', uses: 0, maxUses: null, openedAt: '2026-01-01T00:00:00Z', maxDays: 28 };
    expect(
      clearance(withFacts(clearedFacts, { supplies: [old, { ...old, kind: 'insert' }] }), clearedAt).reasons,
    ).toHaveLength(1);
  });

  it('says of a clock that cannot be read no more than that', () => {
    expect(clearance(clearedFacts, 'now')).toEqual({
      allowed: false,
      reasons: [{ code: 'unknown_fact', fact: 'now', resolvedBy: 'staff', source: 'own choice' }],
    });
  });

  it('counts today by the day on which a session began', () => {
    const yesterday = { ...past, startedAt: '2026-05-11T21:00:00Z', endedAt: '2026-05-11T21:21:00Z' };
    expect(plannedCounts(withFacts(clearedFacts, { sessions: [yesterday] }), clearedAt)).toMatchObject({
      sessionsToday: 0,
      sessionsLast7Days: 1,
    });
  });

  it('starts no earlier than the latest of two ends, whichever comes first', () => {
    const reasons = clearance(
      withFacts(clearedFacts, { sessions: [ended('2026-05-12T08:00:00Z', '2026-05-12T08:21:00Z')] }),
      clearedAt,
    ).reasons;
    expect([earliestStart(reasons), earliestStart([...reasons].reverse()), earliestStart([])]).toEqual([
      '2026-05-13T04:21:00Z',
      '2026-05-13T04:21:00Z',
      null,
    ]);
  });
});
