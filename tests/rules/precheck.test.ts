// The pre-check beside the published cases: which questions are asked, what one answer means at once, and that an
// answer for the worse never leads to a milder outcome.

import fc from 'fast-check';
import {
  consequenceOf,
  judgePrecheck,
  precheckAnswersSchema,
  precheckQuestions,
  type PrecheckAnswers,
} from '@/shared/rules/precheck';
import { precheckFindingCodes, precheckLockoutCodes, precheckOutcomes } from '@/shared/values/codes';

const answeredAt = '2026-05-12T15:55:00Z';
const context = {
  waveform: 'tDCS',
  hasSeizureHistory: false,
  excludesPregnancy: false,
  zone: 'Europe/Berlin',
} as const;
const well: PrecheckAnswers = {
  seizure: 'no',
  faint: 'no',
  headInjury: 'no',
  implantOrMetal: false,
  skin: 'ok',
  mood: [],
  headache: 0,
  sleptHours: 7,
  drinksLast12h: 0,
  drinks12To24h: 0,
  feelsAlcohol: false,
  drugs24h: false,
  newMedicine: 'none',
  unwell: false,
  ready: true,
};
/** For each finding the answer that leads to it, and the one next to it that does not. */
const pairs: Readonly<Record<string, readonly [fires: PrecheckAnswers, misses: PrecheckAnswers]>> = {
  seizure: [{ seizure: 'earlier' }, { seizure: 'no' }],
  faint: [{ faint: 'today' }, { faint: 'no' }],
  head_injury: [{ headInjury: 'earlier' }, { headInjury: 'no' }],
  self_harm_thoughts: [{ mood: ['self_harm_thoughts'] }, { mood: [] }],
  new_implant: [{ implantOrMetal: true }, { implantOrMetal: false }],
  skin_not_ok: [{ skin: 'sore' }, { skin: 'ok' }],
  pregnancy_possible: [{ pregnancyChance: true }, { pregnancyChance: false }],
  mood_very_low: [{ mood: ['very_low'] }, { mood: [] }],
  mood_agitated: [{ mood: ['agitated'] }, { mood: [] }],
  mood_racing: [{ mood: ['racing'] }, { mood: [] }],
  drugs: [{ drugs24h: true }, { drugs24h: false }],
  threshold_medicine: [{ newMedicine: 'threshold_list' }, { newMedicine: 'none' }],
  headache: [{ headache: 4 }, { headache: 3 }],
  slept_little: [{ sleptHours: 3.5 }, { sleptHours: 4 }],
  alcohol: [{ drinks12To24h: 1 }, { drinks12To24h: 0 }],
  fever: [{ temperatureCelsius: 38 }, { temperatureCelsius: 37.9 }],
  unwell: [{ unwell: true }, { unwell: false }],
  new_medicine: [{ newMedicine: 'other' }, { newMedicine: 'none' }],
};
const strict = { ...context, excludesPregnancy: true };

describe('judgePrecheck', () => {
  it.each(precheckFindingCodes)('finds %s, and does not one step before it', (code) => {
    const [fires, misses] = pairs[code] ?? [{}, {}];
    const found = (answers: PrecheckAnswers) =>
      judgePrecheck({ ...well, pregnancyChance: false, ...answers }, strict, answeredAt).findings.map(
        (each) => each.code,
      );
    expect(found(fires)).toEqual([code]);
    expect(found(misses)).toEqual([]);
  });

  it('leaves each question open that has no answer, and then has no outcome', () => {
    for (const { id, field, isOptional } of precheckQuestions({ excludesPregnancy: true, assistedOrMinor: false })) {
      const { [field]: _gone, ...rest } = { ...well, pregnancyChance: false };
      const { open, outcome } = judgePrecheck(rest, strict, answeredAt);
      expect([id, open, outcome]).toEqual(isOptional ? [id, [], 'go_on'] : [id, [id], null]);
    }
  });

  it('reads an unknown waveform, history or protocol the strict way', () => {
    const little = { ...well, sleptHours: 3 };
    expect(judgePrecheck(little, context, answeredAt).outcome).toBe('caution');
    expect(judgePrecheck(little, { ...context, waveform: undefined }, answeredAt).outcome).toBe('hold_tomorrow');
    expect(judgePrecheck(little, { ...context, hasSeizureHistory: undefined }, answeredAt).outcome).toBe(
      'hold_tomorrow',
    );
    expect(judgePrecheck(well, { ...context, excludesPregnancy: undefined }, answeredAt).open).toEqual([
      'pregnancy_chance',
    ]);
  });

  it('ignores a chance of pregnancy where the protocol does not ask', () => {
    expect(judgePrecheck({ ...well, pregnancyChance: true }, context, answeredAt).outcome).toBe('go_on');
  });

  it('names each stored lockout after its first finding', () => {
    const answers: PrecheckAnswers = {
      ...well,
      mood: ['self_harm_thoughts', 'racing'],
      headache: 8,
      temperatureCelsius: 39,
    };
    expect(judgePrecheck(answers, context, answeredAt).lockouts).toEqual([
      { level: 'safety', code: 'precheck_self_harm_thoughts' },
      { level: 'review', code: 'precheck_mood_racing' },
      { level: 'hold', code: 'precheck_fever', until: '2026-05-12T23:55:00Z' },
    ]);
    expect(precheckLockoutCodes).toContain('precheck_mood_racing');
  });

  it('holds for the longest local day where the zone is not known, and without an end where the time is not', () => {
    const fever = { ...well, temperatureCelsius: 39 };
    const untilOf = (zone: string | undefined, at: string) =>
      judgePrecheck(fever, { ...context, zone }, at).lockouts[0]?.until;
    expect(untilOf(undefined, answeredAt)).toBe('2026-05-13T16:55:00Z');
    expect(untilOf('Nowhere/Land', answeredAt)).toBe('2026-05-13T16:55:00Z');
    expect(untilOf('Europe/Berlin', 'just now')).toBeUndefined();
  });

  it('never gives a milder outcome for a worse answer', () => {
    const some = fc.record({
      headache: fc.integer({ min: 0, max: 9 }),
      sleptHours: fc.integer({ min: 1, max: 8 }),
      drinksLast12h: fc.nat(4),
      mood: fc.subarray(['very_low', 'agitated', 'racing'] as const),
      unwell: fc.boolean(),
      waveform: fc.constantFrom('tDCS', 'tACS', 'tRNS'),
    });
    fc.assert(
      fc.property(some, ({ waveform, ...answers }) => {
        const rank = (changes: PrecheckAnswers) =>
          precheckOutcomes.indexOf(
            judgePrecheck({ ...well, ...answers, ...changes }, { ...context, waveform }, answeredAt).outcome ??
              'emergency',
          );
        const before = rank({});
        return [
          { headache: answers.headache + 1 },
          { sleptHours: answers.sleptHours - 1 },
          { drinksLast12h: answers.drinksLast12h + 1 },
          { feelsAlcohol: true },
          { mood: [...answers.mood, 'self_harm_thoughts' as const] },
          { unwell: true },
          { temperatureCelsius: 38.2 },
          { seizure: 'today' as const },
        ].every((worse) => before <= rank(worse));
      }),
      { numRuns: 500 },
    );
  });
});

describe('precheckQuestions', () => {
  it('asks about pregnancy and the helper only where that is known not to be needed otherwise', () => {
    const ids = (facts: Parameters<typeof precheckQuestions>[0]) => precheckQuestions(facts).map(({ id }) => id);
    const plain = ids({ excludesPregnancy: false, assistedOrMinor: false });
    expect(plain).not.toContain('pregnancy_chance');
    expect(plain).not.toContain('helper_present');
    expect(ids({})).toEqual(expect.arrayContaining(['pregnancy_chance', 'helper_present']));
  });

  it('has a field of the answers for each question, and a question for each field', () => {
    const fields = precheckQuestions({}).map(({ field }) => field);
    expect([...fields].sort()).toEqual(Object.keys(precheckAnswersSchema.shape).sort());
  });

  it('fixes the starred questions of the safety rules', () => {
    const fixed = precheckQuestions({}).filter(({ isFixed }) => isFixed);
    expect(fixed.map(({ id }) => id)).toEqual([
      'seizure',
      'faint',
      'head_injury',
      'implant_or_metal',
      'skin',
      'pregnancy_chance',
      'mood',
      'helper_present',
    ]);
  });
});

describe('consequenceOf', () => {
  it('tells what one answer means by itself', () => {
    expect(consequenceOf('headache', 7, context)).toEqual({
      outcome: 'hold_review',
      findings: [{ code: 'headache', outcome: 'hold_review' }],
    });
    expect(consequenceOf('mood', ['racing'], context).outcome).toBe('hold_review');
    expect(consequenceOf('skin', 'ok', context)).toEqual({ outcome: 'go_on', findings: [] });
  });

  it('finds nothing in what is no answer', () => {
    expect(consequenceOf('headache', 'very', context).findings).toEqual([]);
    expect(consequenceOf('weather', 3, context).findings).toEqual([]);
  });
});

describe('precheckAnswersSchema', () => {
  it('takes partial answers and refuses an unknown field by name', () => {
    expect(precheckAnswersSchema.safeParse({ headache: 3 }).success).toBe(true);
    expect(precheckAnswersSchema.safeParse({ headache: 11 }).success).toBe(false);
    expect(precheckAnswersSchema.safeParse({ ...well, outcome: 'go_on' }).error?.issues[0]?.message).toContain(
      'outcome',
    );
  });
});
