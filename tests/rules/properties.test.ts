// What holds of the rules whatever is given to them, each property with a name of its own. A few hundred tries in `npm test`, 100 000 with
// RAMPWELL_FULL=1; a failure prints its seed and the smallest case.

import fc from 'fast-check';
import { adherence } from '@/shared/rules/adherence';
import { ceilings } from '@/shared/rules/ceilings';
import { clearance, earliestStart, type ClearanceFacts } from '@/shared/rules/clearance';
import { deliveredFrom, overCurrent, type Sample } from '@/shared/rules/delivered';
import { chargeOf, densityOf, halfCycleCharge, judgeDose, minutesOn, type DoseFacts } from '@/shared/rules/dose';
import { currentSplit } from '@/shared/rules/dose/arithmetic';
import { holdUntilTomorrow } from '@/shared/rules/hold';
import { openHoursAt } from '@/shared/rules/hours';
import { lockoutsAfterDiary, type LockoutFacts } from '@/shared/rules/lockout';
import { mayStartWithPermit, permitExpiry, permitState, releaseOf } from '@/shared/rules/permit';
import { judgePrecheck, type PrecheckAnswers } from '@/shared/rules/precheck';
import { fitsUnder, rollingSum } from '@/shared/rules/rolling';
import { plannedWindows } from '@/shared/rules/schedule';
import { judgeEvents } from '@/shared/rules/session-record';
import { rollingLimitsOf, siteLimitsAllowed, withDefaults } from '@/shared/rules/site-limits';
import { wilson } from '@/shared/rules/wilson';
import { canonicalJson } from '@/shared/values/canonical';
import { effectGrades, lockoutLevels, precheckOutcomes, redFlags, tiers, waveforms } from '@/shared/values/codes';
import { hourMilliseconds, microampOf, microcoulombOf, milliampOf, minuteMilliseconds } from '@/shared/values/units';
import { addDays, isoOf, localDate, nextMidnight } from '@/shared/values/zone';
import { clearedAt, clearedFacts, withFacts } from '@/tests/support/clearance-facts';
import { patience, tried } from '@/tests/support/runs';

const near = (a: number, b: number, by = 1e-9) => Math.abs(a - b) <= by * Math.max(1, Math.abs(a), Math.abs(b));
const zones = ['Europe/London', 'America/New_York', 'Australia/Lord_Howe', 'Asia/Kathmandu', 'Pacific/Apia'];
const amount = (max: number) => fc.double({ min: 0, max, noNaN: true });

const plan = fc.record({
  intensityMilliamp: amount(4),
  rampUpSeconds: fc.integer({ min: 1, max: 120 }),
  holdSeconds: fc.integer({ min: 0, max: 2400 }),
  rampDownSeconds: fc.integer({ min: 1, max: 120 }),
});
const dose: fc.Arbitrary<DoseFacts> = fc
  .record({
    waveform: fc.constantFrom(...waveforms),
    valueMilliamp: amount(5),
    offsetMilliamp: fc.constantFrom(0, 0, 0.5, -0.5),
    holdSeconds: fc.integer({ min: 0, max: 2600 }),
    rampUpSeconds: fc.integer({ min: 5, max: 130 }),
    rampDownSeconds: fc.integer({ min: 5, max: 130 }),
    frequencyHertz: fc.constantFrom(0.4, 1, 10, 40, 201),
    bandHertz: fc.constantFrom<readonly [number, number]>([100, 640], [0.1, 1000], [0.05, 100]),
    sessionsPerDay: fc.integer({ min: 1, max: 3 }),
    minGapHours: fc.constantFrom(3, 4, 12, 20, 24),
    areas: fc.array(fc.constantFrom(1, 9, 16, 25, 35), { minLength: 2, maxLength: 4 }),
    shape: fc.constantFrom<'pad' | 'ring'>('pad', 'pad', 'ring'),
  })
  .map(({ valueMilliamp, areas, shape, ...rest }) => ({
    ...rest,
    amplitude: { valueMilliamp, meaning: 'peak' as const },
    electrodes: areas.map((areaSquareCentimetre, index) => ({
      ...{
        position: `E${index}`,
        polarity: index === 0 ? ('anode' as const) : ('cathode' as const),
        shape,
        areaSquareCentimetre,
      },
      share: index === 0 ? 1 : 1 / (areas.length - 1),
    })),
  }));
const limits = fc.record({
  mostCurrentMilliamp: fc.constantFrom(1, 2, 3, 4),
  mostMinutes: fc.constantFrom(10, 20, 40),
  mostChargeCoulomb: fc.constantFrom(1, 3.6, 7.2),
  mostDensityMilliampPerSquareCentimetre: fc.constantFrom(0.05, 0.1, 0.16),
  mostMinutesPerDay: fc.constantFrom(20, 40, 60),
  minorCurrentMilliamp: fc.constantFrom(null, 0.5, 1, 2),
  allowsRings: fc.boolean(),
});
const age = fc.integer({ min: 5, max: 90 });
const rank = (facts: DoseFacts, years: number, of = {}) => tiers.indexOf(judgeDose(facts, years, of).verdict);

const samples: fc.Arbitrary<Sample[]> = fc.array(
  fc.tuple(
    fc.integer({ min: 0, max: 600 }),
    fc.integer({ min: -40, max: 40 }).map((tenths) => tenths / 10),
  ),
  { maxLength: 50 },
);

const now = Date.parse(clearedAt);
const session = fc
  .record({
    hoursAgo: fc.integer({ min: 1, max: 200 }),
    minutes: fc.integer({ min: 1, max: 40 }),
    chargeCoulomb: amount(7),
    hasDiary: fc.boolean(),
  })
  .map(({ hoursAgo, minutes, ...rest }) => ({
    ...{ ...rest, minutes, state: 'closed' as const },
    startedAt: isoOf(now - hoursAgo * hourMilliseconds - minutes * minuteMilliseconds),
    endedAt: isoOf(now - hoursAgo * hourMilliseconds),
  }));
const facts: fc.Arbitrary<ClearanceFacts> = fc
  .record({
    sessions: fc.array(session, { maxLength: 5 }),
    zone: fc.constantFrom(...zones, 'UTC'),
    prescription: fc.record({
      minGapHours: fc.integer({ min: 0, max: 48 }),
      maxPerDay: fc.integer({ min: 0, max: 3 }),
      maxPer7Days: fc.integer({ min: 0, max: 7 }),
      isPaused: fc.boolean(),
    }),
    lockouts: fc.array(
      fc.record({
        level: fc.constantFrom(...lockoutLevels),
        code: fc.constantFrom(...redFlags),
        until: fc.constantFrom('2026-05-12T15:00:00Z', '2026-05-13T00:00:00Z'),
      }),
      { maxLength: 2 },
    ),
  })
  .map(({ zone, ...rest }) => withFacts(clearedFacts, { ...rest, participant: { zone } }));
const codesOf = (of: ClearanceFacts, at = clearedAt) => clearance(of, at).reasons.map(({ code }) => code);

const event = fc.record({
  id: fc.integer({ min: 0, max: 30 }).map(String),
  sequence: fc.nat(30),
  latestSeconds: fc.nat(2000),
  contentHash: fc.constantFrom('a', 'b'),
});
const diary: fc.Arbitrary<LockoutFacts> = fc.record({
  diary: fc.record({
    redFlags: fc.subarray([...redFlags]),
    effects: fc.array(
      fc.record({ kind: fc.constantFrom('itching', 'headache'), grade: fc.constantFrom(...effectGrades) }),
      { maxLength: 4 },
    ),
    headache: fc.integer({ min: 0, max: 10 }),
    rednessNextDay: fc.boolean(),
  }),
  headacheBefore: fc.array(fc.integer({ min: 0, max: 10 }), { maxLength: 3 }),
  worstGradeBefore: fc.array(fc.constantFrom(...effectGrades), { maxLength: 5 }),
  endReasons: fc.array(fc.constantFrom('complete', 'lost_contact'), { maxLength: 3 }),
  planned: fc.array(fc.constantFrom('done', 'missed'), { maxLength: 5 }),
});
const answers: fc.Arbitrary<PrecheckAnswers> = fc.record(
  {
    ...{ seizure: fc.constantFrom('no', 'today', 'earlier'), faint: fc.constantFrom('no', 'today', 'earlier') },
    headInjury: fc.constantFrom('no', 'today', 'earlier'),
    ...{
      implantOrMetal: fc.boolean(),
      skin: fc.constantFrom('ok', 'sore', 'broken', 'shaved_raw'),
      pregnancyChance: fc.boolean(),
    },
    mood: fc.subarray(['very_low', 'agitated', 'racing', 'self_harm_thoughts'] as const),
    ...{
      headache: fc.integer({ min: 0, max: 10 }),
      sleptHours: fc.integer({ min: 0, max: 12 }),
      drinksLast12h: fc.integer({ min: 0, max: 5 }),
    },
    ...{ drinks12To24h: fc.integer({ min: 0, max: 5 }), feelsAlcohol: fc.boolean(), drugs24h: fc.boolean() },
    newMedicine: fc.constantFrom('none', 'other', 'threshold_list'),
    ...{ unwell: fc.boolean(), temperatureCelsius: fc.integer({ min: 36, max: 40 }), ready: fc.boolean() },
  },
  { requiredKeys: [] },
);
const present = fc.record({
  precheckAnsweredAt: fc.integer({ min: 0, max: 60 }).map((minutes) => isoOf(now - minutes * minuteMilliseconds)),
  zone: fc.constantFrom(...zones),
  hoursFrom: fc.constantFrom('00:00', '07:00', '18:00', '22:00'),
  hoursTo: fc.constantFrom('02:00', '12:00', '18:15', '23:59'),
  prescriptionExpiresAt: fc.integer({ min: -60, max: 600 }).map((minutes) => isoOf(now + minutes * minuteMilliseconds)),
});
const counted = fc.array(
  fc.record({
    endedAt: fc.integer({ min: 0, max: 300 }).map((hours) => now - hours * hourMilliseconds),
    amount: amount(5),
  }),
  { maxLength: 8 },
);
const mixed = <T>(list: readonly T[], seed: number): T[] =>
  list
    .map((item, index) => [item, Math.sin(seed + index * 12.9898)] as const)
    .sort((a, b) => a[1] - b[1])
    .map(([item]) => item);

/** Each property: its name, and how it is tried. */
const properties: Readonly<Record<string, fc.IProperty<unknown[]> | fc.IRawProperty<unknown>>> = {
  'charge is never negative, and none only without current or time': fc.property(plan, (of) => {
    const charge = chargeOf(of);
    return charge >= 0 && (charge > 0 || of.intensityMilliamp === 0 || of.intensityMilliamp < 1e-300);
  }),
  'charge grows with the current in proportion': fc.property(plan, fc.integer({ min: 2, max: 9 }), (of, times) =>
    near(chargeOf({ ...of, intensityMilliamp: of.intensityMilliamp * times }), chargeOf(of) * times),
  ),
  'charge is the same with the ramps changed about': fc.property(plan, (of) =>
    near(chargeOf({ ...of, rampUpSeconds: of.rampDownSeconds, rampDownSeconds: of.rampUpSeconds }), chargeOf(of)),
  ),
  'the trapezoid rule is exact for ramps and hold, however finely they are sampled': fc.property(
    plan,
    fc.integer({ min: 1, max: 5 }),
    (of, parts) => {
      const { intensityMilliamp: top, rampUpSeconds: up, holdSeconds: hold, rampDownSeconds: down } = of;
      const corners: readonly (readonly [number, number])[] = [
        [0, 0],
        [up, top],
        [up + hold, top],
        [up + hold + down, 0],
      ];
      const fine = corners.flatMap(([at, current], index): Sample[] => {
        const [next, then] = corners[index + 1] ?? [at, current];
        return Array.from({ length: parts }, (_, part): Sample => [
          at + ((next - at) * part) / parts,
          current + ((then - current) * part) / parts,
        ]);
      });
      const whole = deliveredFrom([...fine, [up + hold + down, 0]], { intensityMilliamp: top, maxGapSeconds: null });
      return near(whole.chargeCoulomb ?? Number.NaN, chargeOf(of));
    },
  ),
  'time with current on is the sum of its parts': fc.property(plan, (of) =>
    near(minutesOn(of) * 60, of.rampUpSeconds + of.holdSeconds + of.rampDownSeconds),
  ),
  'density falls as the area grows': fc.property(
    amount(4),
    fc.integer({ min: 1, max: 50 }),
    (current, area) => densityOf(current, area + 1) <= densityOf(current, area),
  ),
  'a half cycle at twice the frequency has half the charge': fc.property(
    amount(4),
    fc.integer({ min: 1, max: 100 }),
    (peak, hertz) => near(halfCycleCharge(peak, hertz), 2 * halfCycleCharge(peak, 2 * hertz)),
  ),
  'shares of the returns sum to one where the currents sum to none': fc.property(
    fc.array(fc.integer({ min: 1, max: 1000 }), { minLength: 1, maxLength: 5 }),
    (returns) => {
      const centre = {
        position: 'C',
        milliamp: returns.reduce((sum, each) => sum + each, 0) / 1000,
        areaSquareCentimetre: 35,
      };
      const around = returns.map((each, index) => ({
        position: `R${index}`,
        milliamp: -each / 1000,
        areaSquareCentimetre: 10,
      }));
      const split = currentSplit([centre, ...around]);
      return (
        !split.refused &&
        near(
          Object.values(split.shares).reduce((sum, share) => sum + share, 0),
          1,
        )
      );
    },
  ),
  'a sine is judged alike however its amplitude is entered': fc.property(dose, age, limits, (of, years, site) => {
    const sine = { ...of, waveform: 'tACS' as const };
    const peak = sine.amplitude?.valueMilliamp ?? 0;
    const entered = [
      { valueMilliamp: peak * 2, meaning: 'peak_to_peak' as const },
      { valueMilliamp: peak / Math.SQRT2, meaning: 'rms' as const },
    ];
    return entered.every((amplitude) => rank({ ...sine, amplitude }, years, site) === rank(sine, years, site));
  }),
  'stricter limits of a site never allow more': fc.property(dose, age, limits, limits, (of, years, one, other) => {
    const strict = {
      mostCurrentMilliamp: Math.min(one.mostCurrentMilliamp, other.mostCurrentMilliamp),
      mostMinutes: Math.min(one.mostMinutes, other.mostMinutes),
      mostChargeCoulomb: Math.min(one.mostChargeCoulomb, other.mostChargeCoulomb),
      mostDensityMilliampPerSquareCentimetre: Math.min(
        one.mostDensityMilliampPerSquareCentimetre,
        other.mostDensityMilliampPerSquareCentimetre,
      ),
      mostMinutesPerDay: Math.min(one.mostMinutesPerDay, other.mostMinutesPerDay),
      minorCurrentMilliamp:
        one.minorCurrentMilliamp === null || other.minorCurrentMilliamp === null
          ? null
          : Math.min(one.minorCurrentMilliamp, other.minorCurrentMilliamp),
      allowsRings: one.allowsRings && other.allowsRings,
    };
    return rank(of, years, strict) >= rank(of, years, { ...one, allowsRings: strict.allowsRings });
  }),
  'a minor is never judged milder than an adult': fc.property(
    dose,
    fc.integer({ min: 5, max: 17 }),
    limits,
    (of, years, site) => rank(of, years, site) >= rank(of, 40, site),
  ),
  'nobody is accepted above a ceiling, whatever the site has set': fc.property(dose, age, limits, (of, years, site) => {
    const { computed, verdict } = judgeDose(of, years, site);
    const isAbove =
      (computed.peakMilliamp ?? 0) > ceilings.currentMilliamp.value * (1 + 1e-8) ||
      (computed.minutes ?? 0) > ceilings.minutes.value * (1 + 1e-8) ||
      (computed.chargeCoulomb ?? 0) > ceilings.chargeCoulomb.value * (1 + 1e-8);
    return !isAbove || verdict === 'refuse';
  }),
  'a verdict is its worst row, and every row tells its source': fc.property(dose, age, limits, (of, years, site) => {
    const { rows, verdict } = judgeDose(of, years, site);
    const worst = Math.max(0, ...rows.map(({ tier }) => tiers.indexOf(tier)));
    return (
      tiers.indexOf(verdict) === worst &&
      rows.every(
        ({ source, tier, layer, quantity }) =>
          source !== '' && (tier === 'accept' || layer !== undefined || quantity === 'unknown_fact'),
      )
    );
  }),
  'the order of electrodes changes no verdict': fc.property(
    dose,
    age,
    limits,
    fc.integer(),
    (of, years, site, seed) =>
      rank({ ...of, electrodes: mixed(of.electrodes ?? [], seed) }, years, site) === rank(of, years, site),
  ),
  'a lockout more never allows': fc.property(facts, fc.constantFrom(...lockoutLevels), (of, level) => {
    const more = { ...of, lockouts: [...(of.lockouts ?? []), { level, code: 'faint', until: '2026-05-14T00:00:00Z' }] };
    return clearance(of, clearedAt).allowed || !clearance(more, clearedAt).allowed;
  }),
  'the order of lists changes no reason': fc.property(facts, fc.integer(), (of, seed) => {
    const turned = { ...of, sessions: mixed(of.sessions ?? [], seed), supplies: mixed(of.supplies ?? [], seed) };
    return JSON.stringify(codesOf(turned)) === JSON.stringify(codesOf(of));
  }),
  'a dose reserved is never worth less than the same dose delivered': fc.property(facts, (of) => {
    const reserved = of.sessions?.map((each) => ({ ...each, state: 'running' as const, endedAt: undefined }));
    return clearance(of, clearedAt).allowed || !clearance({ ...of, sessions: reserved }, clearedAt).allowed;
  }),
  'time moved by whole weeks changes no reason where clocks never change': fc.property(
    facts,
    fc.integer({ min: -3, max: 3 }),
    (of, weeks) => {
      const by = weeks * 7 * 24 * hourMilliseconds;
      const moved = JSON.parse(JSON.stringify(of), (_key, value) =>
        typeof value === 'string' && /T.*Z$/.test(value) ? isoOf(Date.parse(value) + by) : value,
      );
      const inUtc = (each: ClearanceFacts) => withFacts(each, { participant: { zone: 'Asia/Kathmandu' } });
      return JSON.stringify(codesOf(inUtc(moved), isoOf(now + by))) === JSON.stringify(codesOf(inUtc(of)));
    },
  ),
  'the earliest start is as late as every reason that ends': fc.property(facts, (of) => {
    const { reasons } = clearance(of, clearedAt);
    const start = earliestStart(reasons);
    return reasons.every(
      ({ until }) => until === undefined || (start !== null && Date.parse(until) <= Date.parse(start)),
    );
  }),
  'every reason names its code, its source and who resolves it, in the order of the codes': fc.property(facts, (of) => {
    const { reasons } = clearance(of, clearedAt);
    return reasons.every(
      ({ code, source, resolvedBy, until }) =>
        code.length > 0 && source !== '' && resolvedBy.length > 0 && (until === undefined || Date.parse(until) > now),
    );
  }),
  'a rolling sum fits when it says so, and not a moment before': fc.property(
    counted,
    amount(5),
    amount(12),
    (list, planned, limit) => {
      const fit = fitsUnder(list, planned, limit, now, 24 * hourMilliseconds);
      if (fit.fits || fit.at === undefined) return fit.fits || planned > limit * (1 - 1e-9) || list.length === 0;
      return (
        fitsUnder(list, planned, limit, fit.at, 24 * hourMilliseconds).fits &&
        !fitsUnder(list, planned, limit, fit.at - 1, 24 * hourMilliseconds).fits
      );
    },
  ),
  'a rolling sum never grows by waiting': fc.property(
    counted,
    fc.nat(400),
    (list, hours) =>
      rollingSum(list, now + hours * hourMilliseconds, 24 * hourMilliseconds) <=
      rollingSum(list, now, 24 * hourMilliseconds) + 1e-9,
  ),
  'a permit ends within 30 min, 45 min of the answers, its hours and its prescription': fc.property(present, (of) => {
    const expiry = permitExpiry(of, clearedAt);
    if (!expiry.known) return false;
    const end = Date.parse(expiry.expiresAt);
    const closes = openHoursAt(now, of)?.closesAt ?? now;
    const bounds = [
      now + 30 * minuteMilliseconds,
      Date.parse(of.precheckAnsweredAt) + 45 * minuteMilliseconds,
      closes,
      Date.parse(of.prescriptionExpiresAt),
    ];
    return end === Math.min(...bounds);
  }),
  'a permit that is over stays over': fc.property(fc.integer({ min: -60, max: 60 }), fc.nat(600), (end, later) => {
    const permit = { prescriptionVersion: 1, expiresAt: isoOf(now + end * minuteMilliseconds) };
    const of = { prescriptionVersion: 1, isPaused: false, isLocked: false };
    const then = permitState(permit, of, isoOf(now + later * minuteMilliseconds));
    return permitState(permit, of, clearedAt).valid || !then.valid;
  }),
  'a counter that a device has seen never starts it': fc.property(
    fc.nat(50),
    fc.nat(50),
    fc.nat(50),
    (own, asked, last) => {
      const permit = { deviceId: 'd', counter: own, prescriptionVersion: 1, expiresAt: isoOf(now + hourMilliseconds) };
      const { valid } = mayStartWithPermit(
        permit,
        { prescriptionVersion: 1, isPaused: false, isLocked: false, deviceLastCounter: last },
        { deviceId: 'd', counter: asked },
        clearedAt,
      );
      return valid === (asked === own && asked > last);
    },
  ),
  'only a final record or a read-out frees a reserved dose': fc.property(
    amount(7),
    amount(40),
    fc.option(amount(7), { nil: undefined }),
    fc.boolean(),
    (charge, minutes, told, isFinal) => {
      const permit = { chargeCoulomb: charge, minutes };
      const record = releaseOf(permit, { type: 'record', isFinal, upperChargeCoulomb: told, minutes });
      const kept = [
        releaseOf(permit),
        releaseOf(permit, { type: 'statement' }),
        releaseOf(permit, { type: 'readout', showsUse: true }),
      ];
      return (
        kept.every(({ state, chargeCoulomb }) => state === 'reserved' && chargeCoulomb === charge) &&
        record.chargeCoulomb === (isFinal && told !== undefined ? told : charge)
      );
    },
  ),
  'delivered charge knows no clock: all times moved, it is the same': fc.property(
    samples,
    fc.integer({ min: -500, max: 500 }),
    (list, by) => {
      const of = { intensityMilliamp: 2 };
      const moved = deliveredFrom(
        list.map(([at, current]): Sample => [at + by, current]),
        of,
      );
      return (
        near(moved.chargeCoulomb ?? 0, deliveredFrom(list, of).chargeCoulomb ?? 0) &&
        near(moved.upperChargeCoulomb ?? 0, deliveredFrom(list, of).upperChargeCoulomb ?? 0)
      );
    },
  ),
  'two seconds above the permit are always found': fc.property(
    samples,
    fc.integer({ min: 700, max: 900 }),
    amount(3),
    (list, at, more) => {
      const over = 2.11 + more;
      return overCurrent([...list, [at, over], [at + 1, over], [at + 2, over]], 2) !== null;
    },
  ),
  'a red flag more never opens less': fc.property(diary, fc.constantFrom(...redFlags), (of, flag) => {
    const more = { ...of, diary: { ...of.diary, redFlags: [...(of.diary?.redFlags ?? []), flag] } };
    const codes = lockoutsAfterDiary(more).effects.map(({ code }) => code);
    return (
      lockoutsAfterDiary(of).effects.every(({ code }) => codes.includes(code)) &&
      codes.includes(flag) &&
      !lockoutsAfterDiary(more).mayStart
    );
  }),
  'whatever a diary opens stops the next start, but for flags': fc.property(diary, (of) => {
    const { effects, mayStart, pageStaff } = lockoutsAfterDiary(of);
    const isSafety = effects.some(({ level }) => level === 'safety');
    return mayStart === effects.every(({ level }) => level === 'flag') && (!isSafety || pageStaff);
  }),
  'an answer more never makes a pre-check milder': fc.property(answers, answers, (some, others) => {
    const context = {
      waveform: 'tDCS' as const,
      hasSeizureHistory: false,
      excludesPregnancy: true,
      zone: 'Europe/London',
    };
    const worst = (of: PrecheckAnswers) =>
      Math.max(
        0,
        ...judgePrecheck(of, context, clearedAt).findings.map(({ outcome }) => precheckOutcomes.indexOf(outcome)),
      );
    // The temperature belongs to being unwell: it is taken with it.
    return worst({ ...others, ...some }) >= worst({ ...some, temperatureCelsius: undefined, unwell: undefined });
  }),
  'an emergency answer acts however much is open': fc.property(answers, (of) => {
    const judged = judgePrecheck({ ...of, seizure: 'today' }, {}, clearedAt);
    return judged.emergencyAdvice && judged.pageStaff && judged.lockouts.some(({ level }) => level === 'safety');
  }),
  'a hold until tomorrow lasts 8 h and past midnight, and no longer than it must': fc.property(
    fc.nat(20_000),
    fc.constantFrom(...zones),
    (hours, zone) => {
      const answered = now + hours * hourMilliseconds + 17 * minuteMilliseconds;
      const until = holdUntilTomorrow(answered, zone);
      return (
        until - answered >= 8 * hourMilliseconds &&
        localDate(until, zone) > localDate(answered, zone) &&
        (until === nextMidnight(answered, zone) || until - answered === 8 * hourMilliseconds)
      );
    },
  ),
  'planned windows follow each other and never overlap': fc.property(
    fc.subarray([1, 2, 3, 4, 5, 6, 7], { minLength: 1 }),
    fc.constantFrom(...zones),
    fc.nat(3000),
    (days, zone, day) => {
      const windows = plannedWindows({
        startsOn: addDays('2024-01-01', day),
        days,
        hoursFrom: '20:00',
        hoursTo: '01:30',
        zone,
        sessionsTotal: 8,
      });
      return (
        windows.length === 8 &&
        windows.every(
          ({ windowFrom, windowTo, number }, index) =>
            windowFrom < windowTo && number === index + 1 && (windows[index - 1]?.windowTo ?? '') <= windowFrom,
        )
      );
    },
  ),
  'adherence is a fraction inside its own interval, the same in any order': fc.property(
    fc.array(fc.constantFrom('complete', 'partial', 'not_delivered', 'missed', 'excused', 'cancelled', 'future'), {
      maxLength: 30,
    }),
    fc.integer(),
    (states, seed) => {
      const sessions = states.map((state, index) => ({
        state,
        windowFrom: isoOf(now - index * 24 * hourMilliseconds),
        windowTo: isoOf(now - index * 24 * hourMilliseconds + hourMilliseconds),
      }));
      const answer = adherence({ sessions, holds: [] }, clearedAt);
      const turned = adherence({ sessions: mixed(sessions, seed), holds: [] }, clearedAt);
      const inside =
        answer.fraction === null ||
        answer.interval === null ||
        (answer.interval.low <= answer.fraction &&
          answer.fraction <= answer.interval.high &&
          answer.fraction >= 0 &&
          answer.fraction <= 1);
      return inside && JSON.stringify(turned) === JSON.stringify(answer);
    },
  ),
  'an interval narrows as more is tried': fc.property(
    fc.nat(50),
    fc.integer({ min: 1, max: 50 }),
    fc.integer({ min: 2, max: 20 }),
    (some, more, times) => {
      const [one, many] = [wilson(some, some + more), wilson(some * times, (some + more) * times)];
      return one !== null && many !== null && many.high - many.low <= one.high - one.low + 1e-12;
    },
  ),
  'events sent twice are known the second time, and none is kept twice': fc.property(
    fc.array(event, { maxLength: 20 }),
    (events) => {
      const first = judgeEvents(events, [], 3000, null);
      const kept = events.filter((_event, index) => first[index]?.verdict === 'store');
      const again = judgeEvents(kept, kept, 3000, null);
      return (
        again.every(({ verdict }) => verdict === 'known') &&
        new Set(kept.map(({ sequence }) => sequence)).size === kept.length &&
        new Set(kept.map(({ id }) => id)).size === kept.length
      );
    },
  ),
  'limits that a site may sign stay under the ceilings in every tier': fc.property(
    limits,
    fc.constantFrom(...tiers),
    (of, tier) => {
      const whole = withDefaults(of);
      const rolling = rollingLimitsOf(whole, tier);
      return (
        siteLimitsAllowed(of).length === 0 &&
        rolling.maxCharge24hCoulomb <= ceilings.charge24hCoulomb.value &&
        rolling.maxCharge7dCoulomb <= ceilings.charge7dCoulomb.value &&
        rolling.maxMinutes24h <= ceilings.minutesPerDay.value
      );
    },
  ),
  'whole parts never understate, and come back as they were': fc.property(
    amount(100),
    fc.nat(100_000),
    (value, whole) =>
      microampOf(milliampOf(whole)) === whole &&
      microampOf(value) >= value * 1000 - 1e-8 * Math.max(1, value * 1000) &&
      microcoulombOf(value) < value * 1_000_000 + 1 + value,
  ),
  'one content has one text, whatever the order of its fields': fc.property(
    fc.dictionary(fc.string(), fc.oneof(fc.integer(), fc.string(), fc.boolean())),
    fc.integer(),
    (of, seed) => canonicalJson(Object.fromEntries(mixed(Object.entries(of), seed))) === canonicalJson(of),
  ),
  'days added and taken away again leave the day': fc.property(
    fc.nat(20_000),
    fc.integer({ min: -4000, max: 4000 }),
    (from, days) => {
      const date = addDays('1990-01-01', from);
      return addDays(addDays(date, days), -days) === date;
    },
  ),
};

describe('it always holds that', () => {
  it.each(Object.entries(properties))(
    '%s',
    async (_name, property) => {
      await fc.assert(property, tried('T6'));
    },
    patience,
  );
});

it('is asked by 41 properties of their own names', () => {
  expect(Object.keys(properties)).toHaveLength(41);
});
