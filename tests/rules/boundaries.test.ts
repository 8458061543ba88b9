// Every limit, just below it, at it and just above it, in each layer that has it, at each moment at which it is asked: when a protocol or a
// prescription is written, and when a permit is to be issued. Made from tables; the count is asserted, so that a new limit needs its row.

import { ceilings } from '@/shared/rules/ceilings';
import { ageYearsOn } from '@/shared/rules/age';
import { clearance, type ClearanceFacts } from '@/shared/rules/clearance';
import { gatherFacts, type Gathered } from '@/shared/rules/clearance/gather';
import { judgeDose, type DoseFacts, type ElectrodeFacts } from '@/shared/rules/dose';
import { scheduleFindings, type PrescribedSchedule } from '@/shared/rules/prescription-schedule';
import { defaultSiteLimits, siteLimitsAllowed } from '@/shared/rules/site-limits';
import type { LimitLayer } from '@/shared/values/codes';
import type { SiteLimits } from '@/shared/values/protocol-settings';
import { isoOf } from '@/shared/values/zone';
import { clearedAt, clearedFacts, withFacts } from '@/tests/support/clearance-facts';
import { recorded, recordedSession, withLimits, withPerson, withPrescription } from '@/tests/support/recorded';

type Moment = 'protocol' | 'prescription' | 'issue';
/** One limit in one layer at one moment. `ask` answers what is told at a value; `fine` and `beyond` are what must be told. */
type Boundary = {
  readonly name: string;
  readonly layer: LimitLayer;
  readonly moment: Moment;
  readonly limit: number;
  /** The least step that counts: well above the tolerance of 1e-9, or one whole part of what is stored. */
  readonly step: number;
  readonly direction: 'at_most' | 'at_least';
  readonly fine: string;
  readonly beyond: string;
  readonly ask: (value: number) => string;
};

const near = 1e-7;
const pad = (polarity: 'anode' | 'cathode', more: Partial<ElectrodeFacts> = {}): ElectrodeFacts => ({
  position: polarity === 'anode' ? 'F3' : 'Fp2',
  ...{ polarity, shape: 'pad', areaSquareCentimetre: 100, share: 1 },
  ...more,
});
const pads = (more: Partial<ElectrodeFacts>) => [pad('anode', more), pad('cathode', more)];
const peak = (valueMilliamp: number) => ({ valueMilliamp, meaning: 'peak' }) as const;
/** Far from every limit. */
const gentle: DoseFacts = {
  ...{ waveform: 'tDCS', amplitude: peak(0.5), holdSeconds: 600, rampUpSeconds: 30, rampDownSeconds: 30 },
  ...{ sessionsPerDay: 1, minGapHours: 24, electrodes: pads({}) },
};

/** The verdict of a dose with the rows and layers that made it. */
function toldOf(dose: DoseFacts, limits: Partial<SiteLimits> = {}, age = 40): string {
  const { verdict, rows } = judgeDose({ ...gentle, ...dose }, age, limits);
  if (verdict === 'accept') return 'accept';
  return rows
    .filter(({ tier }) => tier === verdict)
    .map(({ quantity, layer }) => `${verdict} ${quantity} ${layer}`)
    .join();
}
const notRefused = (told: string) => (told.startsWith('refuse') ? told : 'not refused');

type DoseLimit = {
  readonly quantity: string;
  readonly limit: number;
  readonly dose: (value: number) => DoseFacts;
  readonly direction?: 'at_least';
  readonly age?: number;
  readonly with?: Partial<SiteLimits>;
};
const c = ceilings;
const ring = (area: number) => ({ electrodes: pads({ shape: 'ring', areaSquareCentimetre: area }) });
const rings = { allowsRings: true };
const sine = (frequencyHertz: number): DoseFacts => ({ waveform: 'tACS', frequencyHertz });
const noise = (low: number, high: number): DoseFacts => ({ waveform: 'tRNS', bandHertz: [low, high] });
const holdFor = (seconds: number) => ({ holdSeconds: seconds - 60 });

/** What a prescription is refused by, whatever the site has set. */
const ceilingLimits: readonly DoseLimit[] = [
  { quantity: 'current', limit: c.currentMilliamp.value, dose: (value) => ({ amplitude: peak(value) }) },
  { quantity: 'minutes', limit: c.minutes.value, dose: (value) => holdFor(value * 60) },
  {
    quantity: 'charge',
    limit: c.chargeCoulomb.value,
    dose: (value) => ({ amplitude: peak(4), holdSeconds: (value * 1000) / 4 - 30 }),
  },
  {
    quantity: 'density',
    limit: c.densityMilliampPerSquareCentimetre.value,
    dose: (value) => ({ amplitude: peak(2), electrodes: pads({ areaSquareCentimetre: 2 / value }) }),
  },
  {
    quantity: 'day_minutes',
    limit: c.minutesPerDay.value,
    dose: (value) => ({ ...holdFor(value * 30), sessionsPerDay: 2 }),
  },
  { quantity: 'gap', limit: c.leastGapHours.value, direction: 'at_least', dose: (value) => ({ minGapHours: value }) },
  {
    quantity: 'ramp',
    limit: c.leastRampSeconds.value,
    direction: 'at_least',
    dose: (value) => ({ rampUpSeconds: value }),
  },
  {
    quantity: 'ramp',
    limit: c.leastRampSeconds.value,
    direction: 'at_least',
    dose: (value) => ({ rampDownSeconds: value }),
  },
  { quantity: 'ramp', limit: c.mostRampSeconds.value, dose: (value) => ({ rampUpSeconds: value }) },
  { quantity: 'ramp', limit: c.mostRampSeconds.value, dose: (value) => ({ rampDownSeconds: value }) },
  { quantity: 'frequency', limit: c.leastFrequencyHertz.value, direction: 'at_least', dose: sine },
  { quantity: 'frequency', limit: c.mostFrequencyHertz.value, dose: sine },
  { quantity: 'frequency', limit: c.leastBandHertz.value, direction: 'at_least', dose: (value) => noise(value, 640) },
  { quantity: 'frequency', limit: c.mostBandHertz.value, dose: (value) => noise(100, value) },
  {
    quantity: 'minor',
    limit: c.minorCurrentMilliamp.value,
    age: 15,
    with: { minorCurrentMilliamp: 2 },
    dose: (value) => ({ amplitude: peak(value) }),
  },
  { quantity: 'ring', limit: c.ringLeastAreaSquareCentimetre.value, direction: 'at_least', with: rings, dose: ring },
  {
    quantity: 'ring',
    limit: c.ringMostCurrentMilliamp.value,
    with: rings,
    dose: (value) => ({ ...ring(100), amplitude: peak(value) }),
  },
  {
    quantity: 'ring',
    limit: c.ringMostMinutes.value,
    with: rings,
    dose: (value) => ({ ...ring(100), ...holdFor(value * 60) }),
  },
  {
    quantity: 'shares',
    limit: 0.99,
    direction: 'at_least',
    dose: (value) => ({ electrodes: [pad('anode'), pad('cathode', { share: value })] }),
  },
  {
    quantity: 'shares',
    limit: 1.01,
    dose: (value) => ({ electrodes: [pad('anode', { share: value }), pad('cathode')] }),
  },
];

/** What a site sets within the ceilings: with two signatures up to here. */
const siteLimits: readonly (DoseLimit & { readonly field: keyof SiteLimits })[] = [
  { quantity: 'current', field: 'mostCurrentMilliamp', limit: 3, dose: (value) => ({ amplitude: peak(value) }) },
  { quantity: 'minutes', field: 'mostMinutes', limit: 35, dose: (value) => holdFor(value * 60) },
  {
    quantity: 'charge',
    field: 'mostChargeCoulomb',
    limit: 5,
    dose: (value) => ({ amplitude: peak(4), holdSeconds: (value * 1000) / 4 - 30 }),
  },
  {
    quantity: 'density',
    field: 'mostDensityMilliampPerSquareCentimetre',
    limit: 0.1,
    dose: (value) => ({ amplitude: peak(2), electrodes: pads({ areaSquareCentimetre: 2 / value }) }),
  },
  {
    quantity: 'day_minutes',
    field: 'mostMinutesPerDay',
    limit: 45,
    dose: (value) => ({ ...holdFor(value * 30), sessionsPerDay: 2 }),
  },
  {
    quantity: 'gap',
    field: 'leastGapHours',
    limit: 6,
    direction: 'at_least',
    dose: (value) => ({ minGapHours: value }),
  },
  {
    quantity: 'minor',
    field: 'minorCurrentMilliamp',
    limit: 1.5,
    age: 15,
    dose: (value) => ({ amplitude: peak(value) }),
  },
];

/** One signature up to here: shipped rows, and the same row set by a site. */
const routineLimits: readonly (DoseLimit & { readonly field: keyof SiteLimits; readonly own: number })[] = [
  {
    quantity: 'current',
    field: 'routineCurrentMilliamp',
    limit: 2,
    own: 1.5,
    dose: (value) => ({ amplitude: peak(value) }),
  },
  { quantity: 'minutes', field: 'routineMinutes', limit: 30, own: 20, dose: (value) => holdFor(value * 60) },
  {
    quantity: 'charge',
    field: 'routineChargeCoulomb',
    with: { routineMinutes: 40 },
    limit: 3.6,
    own: 2.4,
    dose: (value) => ({
      amplitude: peak(2),
      holdSeconds: (value * 1000) / 2 - 30,
      rampUpSeconds: 10,
      rampDownSeconds: 50,
    }),
  },
  {
    quantity: 'density',
    field: 'routineDensityMilliampPerSquareCentimetre',
    with: { routineAreaSquareCentimetre: 10 },
    limit: 0.08,
    own: 0.06,
    dose: (value) => ({ amplitude: peak(2), electrodes: pads({ areaSquareCentimetre: 2 / value }) }),
  },
  {
    quantity: 'area',
    field: 'routineAreaSquareCentimetre',
    limit: 25,
    own: 30,
    direction: 'at_least',
    dose: (value) => ({ electrodes: pads({ areaSquareCentimetre: value }) }),
  },
  {
    quantity: 'gap',
    field: 'routineGapHours',
    limit: 20,
    own: 12,
    direction: 'at_least',
    dose: (value) => ({ minGapHours: value }),
  },
];

function ofDose(one: DoseLimit, layer: LimitLayer, limits: Partial<SiteLimits>): Boundary {
  const { quantity, limit, direction = 'at_most', age } = one;
  return {
    ...{ name: quantity, layer, moment: 'prescription', limit, step: limit * near, direction },
    ...{ fine: 'not refused', beyond: `refuse ${quantity} ${layer}` },
    ask: (value) => notRefused(toldOf(one.dose(value), { ...one.with, ...limits }, age)),
  };
}
function ofRoutine(one: (typeof routineLimits)[number], layer: 'default' | 'site'): Boundary {
  const { quantity, field, direction = 'at_most' } = one;
  const limit = layer === 'site' ? one.own : one.limit;
  return {
    ...{ name: `${quantity} with one signature`, layer, moment: 'prescription', limit, step: limit * near, direction },
    ...{ fine: 'accept', beyond: `second_signature ${quantity} ${layer}` },
    ask: (value) => toldOf(one.dose(value), { ...one.with, ...(layer === 'site' ? { [field]: limit } : {}) }),
  };
}

const wholeSteps: readonly Boundary[] = [
  {
    ...{ name: 'per_day with one signature', layer: 'default', moment: 'prescription', limit: 1, step: 1 },
    ...{ direction: 'at_most', fine: 'accept', beyond: 'second_signature per_day default' },
    // No session a day is no answer, and asked of the one below: two days with one each are as few as can be.
    ask: (value) => toldOf({ sessionsPerDay: Math.max(1, value) }),
  },
  {
    ...{ name: 'per_day with one signature', layer: 'site', moment: 'prescription', limit: 2, step: 1 },
    ...{ direction: 'at_most', fine: 'accept', beyond: 'second_signature per_day site' },
    ask: (value) => toldOf({ sessionsPerDay: value }, { routineSessionsPerDay: 2 }),
  },
  {
    ...{ name: 'minor with one signature', layer: 'default', moment: 'prescription', limit: 1, step: near },
    ...{ direction: 'at_most', fine: 'accept', beyond: 'second_signature minor default' },
    ask: (value) => toldOf({ amplitude: peak(value) }, { minorCurrentMilliamp: 2 }, 15),
  },
  {
    ...{ name: 'least age', layer: 'ceiling', moment: 'prescription', limit: c.leastAgeYears.value, step: 1 },
    ...{ direction: 'at_least', fine: 'accept', beyond: 'refuse minor ceiling' },
    ask: (value) => toldOf({}, { minorCurrentMilliamp: 2 }, value),
  },
  {
    ...{ name: 'adult age', layer: 'default', moment: 'prescription', limit: c.adultAgeYears.value, step: 1 },
    ...{ direction: 'at_least', fine: 'accept', beyond: 'refuse minor default' },
    ask: (value) => toldOf({}, {}, value),
  },
  {
    // Days before the birthday: on the day itself a person is older.
    ...{ name: 'adult age by the day', layer: 'default', moment: 'prescription', limit: 2, step: 1 },
    ...{ direction: 'at_least', fine: 'accept', beyond: 'refuse minor default' },
    ask: (day) => toldOf({}, {}, ageYearsOn('2008-03-02', `2026-03-0${day}`)),
  },
];

const ofProtocol: readonly Boundary[] = [
  ...(
    [
      ['mostCurrentMilliamp', c.currentMilliamp],
      ['mostMinutes', c.minutes],
      ['mostChargeCoulomb', c.chargeCoulomb],
      ['mostDensityMilliampPerSquareCentimetre', c.densityMilliampPerSquareCentimetre],
      ['mostMinutesPerDay', c.minutesPerDay],
      ['mostCharge24hCoulomb', c.charge24hCoulomb],
      ['mostCharge7dCoulomb', c.charge7dCoulomb],
      ['minorCurrentMilliamp', c.minorCurrentMilliamp],
      ['leastGapHours', c.leastGapHours],
    ] as const
  ).map(([field, { value: limit }]): Boundary => ({
    ...{ name: field, layer: 'ceiling', moment: 'protocol', limit, step: limit * near },
    ...{ direction: field === 'leastGapHours' ? 'at_least' : 'at_most', fine: '' },
    beyond: field === 'leastGapHours' ? `${field} below_ceiling ceiling` : `${field} above_ceiling ceiling`,
    ask: (value) => protocolTold({ [field]: value }),
  })),
  ...(
    [
      ['routineCurrentMilliamp', { mostCurrentMilliamp: 3 }, 3],
      ['routineMinutes', { mostMinutes: 35 }, 35],
      ['routineChargeCoulomb', { mostChargeCoulomb: 5 }, 5],
      ['routineDensityMilliampPerSquareCentimetre', { mostDensityMilliampPerSquareCentimetre: 0.1 }, 0.1],
      ['routineCharge24hCoulomb', { mostCharge24hCoulomb: 10 }, 10],
      ['routineCharge7dCoulomb', { mostCharge7dCoulomb: 40 }, 40],
      ['routineGapHours', { leastGapHours: 6 }, 6],
    ] as const
  ).map(([field, most, limit]): Boundary => ({
    ...{ name: field, layer: 'site', moment: 'protocol', limit, step: limit * near },
    ...{ direction: field === 'routineGapHours' ? 'at_least' : 'at_most', fine: '' },
    beyond: `${field} routine_above_most site`,
    ask: (value) => protocolTold({ ...most, [field]: value }),
  })),
];
function protocolTold(limits: Partial<SiteLimits>): string {
  return siteLimitsAllowed(limits)
    .map(({ field, code, layer }) => `${field} ${code} ${layer}`)
    .join();
}

/** At the issue the record is asked, in whole µA and ms: current, times and areas as signed, the limits as they are now. */
const issueTold = (of: Gathered) =>
  clearance(gatherFacts(of, clearedAt, 80), clearedAt)
    .reasons.map(({ code, subject, layer }) => [code, subject, layer].filter((part) => part !== undefined).join(' '))
    .join();
const areaOf = (areaSquareCentimetre: number) => pads({ areaSquareCentimetre }).map((each) => ({ ...each }));
const child = (of: Gathered) =>
  withPerson(
    {
      participant: { ...recorded.person.participant, bornOn: '2009-03-02' },
      ...{ guardianConsent: '3', assent: '3' },
      precheck: recorded.person.precheck && { ...recorded.person.precheck, helperPresent: true },
    },
    of,
  );
/** The stored sums follow the stored curve. */
function curve(changes: {
  intensityUa?: number;
  holdMs?: number;
  rampUpMs?: number;
  rampDownMs?: number;
  maxPerDay?: number;
}) {
  const whole = { intensityUa: 500, holdMs: 600_000, rampUpMs: 30_000, rampDownMs: 30_000, maxPerDay: 1, ...changes };
  const onMs = whole.rampUpMs + whole.holdMs + whole.rampDownMs;
  const chargeUc = Math.ceil(
    (whole.intensityUa * (whole.holdMs + (whole.rampUpMs + whole.rampDownMs) / 2)) / 1_000_000,
  );
  return withPrescription({ ...whole, onMs, chargeUc });
}
const doseAtIssue: readonly (readonly [
  string,
  number,
  number,
  'at_most' | 'at_least',
  (value: number) => Gathered,
  Partial<SiteLimits> | null,
])[] = [
  ['current', 4000, 1, 'at_most', (intensityUa) => curve({ intensityUa }), null],
  ['current', 3000, 1, 'at_most', (intensityUa) => curve({ intensityUa }), { mostCurrentMilliamp: 3 }],
  ['minutes', 2_400_000, 1, 'at_most', (onMs) => curve({ holdMs: onMs - 60_000 }), null],
  ['minutes', 2_100_000, 1, 'at_most', (onMs) => curve({ holdMs: onMs - 60_000 }), { mostMinutes: 35 }],
  ['charge', 1_770_000, 1, 'at_most', (holdMs) => curve({ intensityUa: 4000, holdMs }), null],
  ['charge', 1_220_000, 1, 'at_most', (holdMs) => curve({ intensityUa: 4000, holdMs }), { mostChargeCoulomb: 5 }],
  ['gap', 4 * 3_600_000, 1, 'at_least', (minGapMs) => withPrescription({ minGapMs }), null],
  ['gap', 6 * 3_600_000, 1, 'at_least', (minGapMs) => withPrescription({ minGapMs }), { leastGapHours: 6 }],
  ['density', 12.5, 12.5 * near, 'at_least', (area) => withPrescription({ electrodes: areaOf(area) }), null],
  [
    'density',
    20,
    20 * near,
    'at_least',
    (area) => withPrescription({ electrodes: areaOf(area) }),
    { mostDensityMilliampPerSquareCentimetre: 0.1 },
  ],
  ['day_minutes', 1_800_000, 1, 'at_most', (onMs) => curve({ holdMs: onMs - 60_000, maxPerDay: 2 }), null],
  [
    'day_minutes',
    1_350_000,
    1,
    'at_most',
    (onMs) => curve({ holdMs: onMs - 60_000, maxPerDay: 2 }),
    { mostMinutesPerDay: 45 },
  ],
  ['ramp', 10_000, 1, 'at_least', (rampUpMs) => curve({ rampUpMs }), null],
  ['ramp', 120_000, 1, 'at_most', (rampUpMs) => curve({ rampUpMs }), null],
  ['ramp', 10_000, 1, 'at_least', (rampDownMs) => curve({ rampDownMs }), null],
  ['ramp', 120_000, 1, 'at_most', (rampDownMs) => curve({ rampDownMs }), null],
  [
    'minor',
    2000,
    1,
    'at_most',
    (intensityUa) => child(withLimits({ minorCurrentMilliamp: 2 }, curve({ intensityUa }))),
    null,
  ],
  ['minor', 1500, 1, 'at_most', (intensityUa) => child(curve({ intensityUa })), { minorCurrentMilliamp: 1.5 }],
];
const ofDoseAtIssue = doseAtIssue.map(([name, limit, step, direction, of, limits]): Boundary => ({
  ...{ name, layer: limits === null ? 'ceiling' : 'site', moment: 'issue', limit, step, direction, fine: '' },
  beyond: `dose_above_limit ${name} ${limits === null ? 'ceiling' : 'site'}`,
  ask: (value) => issueTold(withLimits(limits ?? {}, of(value))),
}));

/** A session of this many hours ago, told by its end; its diary is written. */
const before = (hours: number, upperUc: number, upperMs: number): Gathered['sessions'][number] => {
  const end = Date.parse(clearedAt) - hours * 3_600_000;
  return { ...recordedSession, startedAt: isoOf(end - upperMs), endedAt: isoOf(end), upperUc, upperMs };
};
const withPast = (of: Gathered, ...sessions: Gathered['sessions']): Gathered => ({ ...of, sessions });
const plenty = { maxPerDay: 2, maxPer7Days: 30, minGapMs: 4 * 3_600_000 };
const roomy = withPrescription(plenty);
const twoSignatures = { routineCharge24hCoulomb: 1, routineCharge7dCoulomb: 1 };
const routine = (of: Gathered) => ({
  ...of,
  person: {
    ...of.person,
    prescription: of.person.prescription && {
      ...of.person.prescription,
      tier: 'accept' as const,
      minGapMs: 72_000_000,
      maxPerDay: 1,
    },
  },
});
/** Beside the 2.46 C and 21 min that are planned. */
const rolling: readonly (readonly [string, LimitLayer, number, (value: number) => Gathered])[] = [
  [
    'charge_24h',
    'ceiling',
    14_400_000,
    (sum) => withPast(withLimits(twoSignatures, roomy), before(10, sum - 2_460_000, 60_000)),
  ],
  [
    'charge_24h',
    'site',
    9_000_000,
    (sum) => withPast(withLimits({ mostCharge24hCoulomb: 9 }, roomy), before(10, sum - 2_460_000, 60_000)),
  ],
  ['charge_24h', 'site', 7_200_000, (sum) => withPast(routine(roomy), before(21, sum - 2_460_000, 60_000))],
  [
    'charge_7d',
    'ceiling',
    50_400_000,
    (sum) => withPast(withLimits(twoSignatures, roomy), before(100, sum - 2_460_000, 60_000)),
  ],
  [
    'charge_7d',
    'site',
    30_000_000,
    (sum) => withPast(withLimits({ mostCharge7dCoulomb: 30 }, roomy), before(100, sum - 2_460_000, 60_000)),
  ],
  ['charge_7d', 'site', 25_200_000, (sum) => withPast(routine(roomy), before(100, sum - 2_460_000, 60_000))],
  ['minutes_24h', 'ceiling', 3_600_000, (sum) => withPast(roomy, before(10, 1_000_000, sum - 1_260_000))],
  [
    'minutes_24h',
    'site',
    2_700_000,
    (sum) =>
      withPast(
        withLimits({ mostMinutesPerDay: 45 }, withPrescription({ ...plenty, maxPerDay: 2 })),
        before(10, 1_000_000, sum - 1_260_000),
      ),
  ],
];
const ofRolling = rolling.map(([name, layer, limit, of]): Boundary => ({
  ...{ name, layer, moment: 'issue', limit, step: 1, direction: 'at_most', fine: '', beyond: `${name} ${layer}` },
  ask: (value) => issueTold(of(value)),
}));

/** What the prescription itself bounds, by the facts of a person who may start. */
const past = clearedFacts.sessions?.[0];
const startTold = (changes: ClearanceFacts, now = clearedAt) =>
  clearance(withFacts(clearedFacts, changes), now)
    .reasons.map(({ code, layer }) => [code, layer].filter((part) => part !== undefined).join(' '))
    .join();
const endedAgo = (milliseconds: number) => ({
  ...past,
  startedAt: '2026-05-11T09:00:00Z',
  endedAt: isoOf(Date.parse(clearedAt) - milliseconds),
});
const at = (instant: string, milliseconds = 0) => isoOf(Date.parse(instant) + milliseconds);
type Own = readonly [
  name: string,
  limit: number,
  direction: 'at_most' | 'at_least',
  beyond: string,
  ask: (value: number) => string,
];
/** 11 May and the days before it. */
const dayOf = (index: number) => String(11 - index).padStart(2, '0');
const owns: readonly Own[] = [
  ['gap', 72_000_000, 'at_least', 'gap_too_short prescription', (gap) => startTold({ sessions: [endedAgo(gap)] })],
  [
    'sessions a day',
    1,
    'at_most',
    'day_count_reached prescription',
    (count) =>
      startTold({
        prescription: { maxPerDay: 1, minGapHours: 1, maxPer7Days: 9 },
        sessions: Array.from({ length: count - 1 }, (_, index) => ({
          ...past,
          minutes: 1,
          chargeCoulomb: 0.1,
          startedAt: `2026-05-12T0${6 + index}:00:00Z`,
          endedAt: `2026-05-12T0${6 + index}:10:00Z`,
        })),
      }),
  ],
  [
    'sessions a week',
    5,
    'at_most',
    'week_count_reached prescription',
    (count) =>
      startTold({
        sessions: Array.from({ length: count - 1 }, (_, index) => ({
          ...past,
          startedAt: `2026-05-${dayOf(index)}T09:00:00Z`,
          endedAt: `2026-05-${dayOf(index)}T09:21:00Z`,
        })),
      }),
  ],
  [
    'sessions of the course',
    20,
    'at_most',
    'course_complete prescription',
    (count) => startTold({ prescription: { sessionsTotal: 20, sessionsDone: count - 1 } }),
  ],
  // Half open: at T it is open, at the other T it is over.
  [
    'hours open',
    0,
    'at_least',
    'outside_hours prescription',
    (late) => startTold({ prescription: { hoursFrom: '18:00' } }, at(clearedAt, late)),
  ],
  [
    'hours close',
    -1,
    'at_most',
    'outside_hours prescription',
    (late) =>
      startTold(
        { prescription: { hoursTo: '18:00' }, precheck: { answeredAt: at(clearedAt, -60_000) } },
        at(clearedAt, late),
      ),
  ],
  [
    'end of the prescription',
    -1,
    'at_most',
    'prescription_expired',
    (late) => startTold({ prescription: { expiresAt: clearedAt } }, at(clearedAt, late)),
  ],
];
const ofOwn = owns.map(([name, limit, direction, beyond, ask]): Boundary => ({
  ...{ name, layer: 'prescription', moment: 'issue', limit, step: 1, direction, fine: '', beyond, ask },
}));

/** What the prescription bounds when it is written: a schedule that can be lived. */
const lived: PrescribedSchedule = {
  ...{ startsOn: '2026-05-12', expiresOn: '2026-08-01', days: [1, 2, 3, 4, 5], hoursFrom: '07:00', hoursTo: '22:00' },
  ...{ sessionsTotal: 20, maxPerDay: 1, maxPer7Days: 5, minGapHours: 20 },
};
const scheduleTold = (changes: Partial<PrescribedSchedule>, sessionMinutes = 21) =>
  scheduleFindings(
    { ...lived, ...changes },
    { zone: 'Europe/Berlin', sessionMinutes, takenDays: [], mayHaveBegun: false },
    '2026-05-12T04:00:00Z',
  )
    .map(({ code }) => code)
    .join();
const owned: readonly Own[] = [
  [
    'the window holds a session',
    21,
    'at_least',
    'hours_too_short',
    (minutes) => scheduleTold({ hoursFrom: '07:00', hoursTo: `07:${minutes}` }),
  ],
  [
    'the window holds two and their gap',
    282,
    'at_least',
    'per_day_too_many',
    (minutes) =>
      scheduleTold({
        maxPerDay: 2,
        minGapHours: 4,
        hoursFrom: '07:00',
        hoursTo: `${7 + Math.floor(minutes / 60)}:${minutes % 60}`,
      }),
  ],
  ['the gap fits between days', 24, 'at_most', 'gap_longer_than_days', (hours) => scheduleTold({ minGapHours: hours })],
  ['the week holds the days', 5, 'at_least', 'per_week_too_few', (count) => scheduleTold({ maxPer7Days: count })],
  ['a first day', 12, 'at_least', 'starts_in_past', (day) => scheduleTold({ startsOn: `2026-05-${day}` })],
  [
    'a last day',
    12,
    'at_least',
    'expires_before_start',
    (day) =>
      scheduleTold({
        startsOn: '2026-05-12',
        days: [2],
        sessionsTotal: 1,
        maxPer7Days: 1,
        expiresOn: `2026-05-${day}`,
      }),
  ],
  [
    'windows for all',
    4,
    'at_most',
    'too_few_windows',
    (count) => scheduleTold({ sessionsTotal: count, expiresOn: '2026-05-15' }),
  ],
];
const ofOwned = owned.map(([name, limit, direction, beyond, ask]): Boundary => ({
  ...{ name, layer: 'prescription', moment: 'prescription', limit, step: 1, direction, fine: '', beyond, ask },
}));

const boundaries: readonly Boundary[] = [
  ...ofProtocol,
  ...ceilingLimits.map((one) => ofDose(one, 'ceiling', {})),
  ...siteLimits.map((one) => ofDose(one, 'site', { [one.field]: one.limit })),
  ...routineLimits.flatMap((one) => [ofRoutine(one, 'default'), ofRoutine(one, 'site')]),
  ...wholeSteps,
  ...ofOwned,
  ...ofDoseAtIssue,
  ...ofRolling,
  ...ofOwn,
];

const rows = boundaries.map((each) => [`${each.name} (${each.layer}, ${each.moment})`, each] as const);

describe('every limit', () => {
  it.each(rows)(
    'holds on both sides and at the value itself: %s',
    (_name, { limit, step, direction, fine, beyond, ask }) => {
      const inside = direction === 'at_most' ? limit - step : limit + step;
      const outside = direction === 'at_most' ? limit + step : limit - step;
      expect([ask(inside), ask(limit), ask(outside)]).toEqual([fine, fine, beyond]);
    },
  );

  it('is in the tables: so many boundaries of each layer at each moment', () => {
    const counts: Record<string, number> = {};
    for (const { layer, moment } of boundaries) counts[`${moment} ${layer}`] = (counts[`${moment} ${layer}`] ?? 0) + 1;
    expect(counts).toEqual({
      ...{ 'protocol ceiling': 9, 'protocol site': 7 },
      ...{
        'prescription ceiling': 21,
        'prescription site': 14,
        'prescription default': 10,
        'prescription prescription': 7,
      },
      ...{ 'issue ceiling': 14, 'issue site': 12, 'issue prescription': 7 },
    });
    expect(boundaries.length * 3).toBe(303);
  });

  it('has a row for every ceiling and for every field that a site may set', () => {
    const seen = new Set(boundaries.map(({ limit }) => limit));
    const ofCeilings = Object.values(ceilings).filter(({ value }) => !seen.has(value));
    expect(ofCeilings.map(({ value }) => value)).toEqual([]);
    const asked = [...siteLimits, ...routineLimits].map(({ field }) => field);
    const elsewhere = [
      'allowsRings',
      'routineSessionsPerDay',
      'routineCharge24hCoulomb',
      'mostCharge24hCoulomb',
      'routineCharge7dCoulomb',
      'mostCharge7dCoulomb',
    ];
    expect([...asked, ...elsewhere].sort()).toEqual(Object.keys(defaultSiteLimits).sort());
  });
});
