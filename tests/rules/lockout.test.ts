// Lockouts beside the published cases: each code fires and just misses, answers become facts, and a worse report
// never leads to less.

import fc from 'fast-check';
import {
  diaryAnswersSchema,
  diaryFactsOf,
  gradeOf,
  levelOf,
  lockoutsAfterDiary,
  nextDayFactsOf,
  worstGradeOf,
  type DiaryAnswers,
  type LockoutFacts,
} from '@/shared/rules/lockout';
import { effectGrades, lockoutCodes, redFlags, type LockoutCode } from '@/shared/values/codes';

const quiet: LockoutFacts = { diary: { redFlags: [], effects: [], headache: 0, rednessNextDay: false } };
const codesOf = (facts: LockoutFacts) => lockoutsAfterDiary(facts).effects.map(({ code }) => code);

const pairs: Readonly<Partial<Record<LockoutCode, readonly [fires: LockoutFacts, misses: LockoutFacts]>>> = {
  scores_worse_twice: [
    { scale: { baseline: 12, scores: [17, 17], worseBy: 5 } },
    { scale: { baseline: 12, scores: [17, 16], worseBy: 5 } },
  ],
  self_harm_item: [{ scale: { selfHarmItem: 1 } }, { scale: { selfHarmItem: 0 } }],
  severe_effect: [{ diary: { effects: [{ grade: 'severe' }] } }, { diary: { effects: [{ grade: 'moderate' }] } }],
  headache_high: [{ diary: { headache: 7 } }, { diary: { headache: 6 } }],
  headache_rising: [
    { diary: { headache: 3 }, headacheBefore: [1, 2] },
    { diary: { headache: 3 }, headacheBefore: [2, 2] },
  ],
  pain_high: [{ during: { painAtPad: 7 } }, { during: { painAtPad: 6 } }],
  skin_next_day: [{ diary: { rednessNextDay: true } }, { diary: { rednessNextDay: false } }],
  photo_missing: [{ isPhotoAsked: true }, { isPhotoAsked: true, isPhotoSent: true }],
  over_current: [
    {
      during: {
        permittedMilliamp: 2,
        samples: [
          [0, 2.2],
          [1, 2.2],
        ],
      },
    },
    {
      during: {
        permittedMilliamp: 2,
        samples: [
          [0, 2.2],
          [0.9, 2.2],
        ],
      },
    },
  ],
  lost_contact_twice: [
    { endReasons: ['lost_contact', 'lost_contact'] },
    { endReasons: ['lost_contact', 'complete', 'lost_contact'] },
  ],
  moderate_3_of_5: [
    { diary: { effects: [{ grade: 'moderate' }] }, worstGradeBefore: ['moderate', 'none', 'moderate', 'none'] },
    { diary: { effects: [{ grade: 'mild' }] }, worstGradeBefore: ['moderate', 'none', 'moderate', 'none'] },
  ],
  missed_three: [{ planned: ['missed', 'missed', 'missed'] }, { planned: ['missed', 'missed', 'done'] }],
  adherence_low: [{ last14Days: { planned: 5, done: 3 } }, { last14Days: { planned: 5, done: 4 } }],
};
const flagPairs = redFlags.map(
  (flag) =>
    [flag, [{ diary: { redFlags: [flag] } }, quiet]] as const satisfies readonly [string, readonly LockoutFacts[]],
);
const table = [
  ...flagPairs,
  ...lockoutCodes.flatMap((code) => {
    const pair = pairs[code];
    return pair === undefined ? [] : [[code, pair] as const];
  }),
];

describe('lockoutsAfterDiary', () => {
  it('has a pair of cases for each code', () => {
    expect(table.map(([code]) => code)).toEqual([...lockoutCodes]);
  });

  it.each(table)('opens %s, and does not one step before it', (code, [fires, misses]) => {
    expect(codesOf(fires)).toContain(code);
    expect(codesOf(misses)).not.toContain(code);
  });

  it('lets nobody start again with any level but a flag, and lifts by time nothing', () => {
    for (const [code, [fires]] of table) {
      const { mayStart, effects, pageStaff, emergencyAdvice } = lockoutsAfterDiary(fires);
      const levels = effects.map(({ level }) => level);
      expect([code, mayStart]).toEqual([code, levels.every((level) => level === 'flag')]);
      expect([code, emergencyAdvice]).toEqual([code, levels.includes('safety')]);
      expect([code, pageStaff]).toEqual([code, levels.includes('safety') || code === 'over_current']);
      expect(effects.map(({ liftBy }) => liftBy)).toEqual(
        levels.map(
          (level) => ({ safety: 'clinician', review: 'clinician', device: 'coordinator', flag: 'none' })[level],
        ),
      );
    }
    expect(redFlags.map((flag) => levelOf[flag])).toEqual(redFlags.map(() => 'safety'));
  });

  it('finds nothing where nothing was asked', () => {
    expect(lockoutsAfterDiary({})).toEqual({
      effects: [],
      pageStaff: false,
      emergencyAdvice: false,
      deviceAction: 'none',
      deviceQuarantined: false,
      mayStart: true,
    });
    expect(
      codesOf({ diary: { effects: [{ kind: 'tingling' }] }, worstGradeBefore: ['moderate', 'moderate', 'moderate'] }),
    ).toEqual(['moderate_3_of_5']);
    expect(codesOf({ worstGradeBefore: ['moderate', 'moderate', 'moderate'] })).toEqual([]);
    expect(
      codesOf({
        during: {
          samples: [
            [0, 9],
            [5, 9],
          ],
        },
        scale: { baseline: 3, scores: [9, 9] },
      }),
    ).toEqual([]);
  });

  it('never opens less for a worse report', () => {
    const some = fc.record({
      headache: fc.integer({ min: 0, max: 9 }),
      grade: fc.constantFrom(...effectGrades),
      before: fc.array(fc.constantFrom(...effectGrades), { maxLength: 6 }),
      pain: fc.integer({ min: 0, max: 9 }),
      flags: fc.subarray([...redFlags]),
      done: fc.integer({ min: 1, max: 10 }),
    });
    const rank = { safety: 3, review: 2, device: 1, flag: 0 } as const;
    fc.assert(
      fc.property(some, (each) => {
        const facts = {
          diary: { redFlags: each.flags, effects: [{ grade: each.grade }], headache: each.headache },
          worstGradeBefore: each.before,
          during: { painAtPad: each.pain },
          last14Days: { planned: 10, done: each.done },
        };
        const worstOf = (of: LockoutFacts) =>
          Math.max(-1, ...lockoutsAfterDiary(of).effects.map(({ level }) => rank[level]));
        const worseGrade = effectGrades[Math.min(3, effectGrades.indexOf(each.grade) + 1)];
        return [
          { ...facts, diary: { ...facts.diary, headache: each.headache + 1 } },
          { ...facts, diary: { ...facts.diary, effects: [{ grade: worseGrade }] } },
          { ...facts, diary: { ...facts.diary, redFlags: [...each.flags, 'faint' as const] } },
          { ...facts, during: { painAtPad: each.pain + 1 } },
          { ...facts, last14Days: { planned: 10, done: each.done - 1 } },
          { ...facts, isPhotoAsked: true },
        ].every(
          (worse) => worstOf(facts) <= worstOf(worse) && codesOf(facts).every((code) => codesOf(worse).includes(code)),
        );
      }),
      { numRuns: 500 },
    );
  });
});

describe('the diary’s answers as facts', () => {
  const answers: DiaryAnswers = {
    nothingFelt: false,
    effects: [
      { kind: 'tingling', strength: 3, stillThere: false },
      { kind: 'burning', strength: 7, stillThere: true },
    ],
    headacheAfter: 2,
    skin: 'ok',
    redFlags: [],
  };

  it.each([
    [0, 'none'],
    [1, 'mild'],
    [3, 'mild'],
    [4, 'moderate'],
    [6, 'moderate'],
    [7, 'severe'],
    [10, 'severe'],
  ])('grades a strength of %d as %s', (strength, grade) => {
    expect(gradeOf(strength)).toBe(grade);
  });

  it('takes the grade from the strength, and the worst of all for later', () => {
    expect(diaryFactsOf(answers).effects).toEqual([
      { kind: 'tingling', grade: 'mild' },
      { kind: 'burning', grade: 'severe' },
    ]);
    expect(worstGradeOf(answers)).toBe('severe');
    expect(worstGradeOf({ effects: [] })).toBe('none');
  });

  it('reads broken or blistered skin as the red flag that it is', () => {
    const facts = diaryFactsOf({ ...answers, skin: 'broken_or_blistered' });
    expect(codesOf({ diary: facts })).toContain('burn_or_blister');
    expect(codesOf({ diary: diaryFactsOf({ ...answers, skin: 'red' }) })).not.toContain('burn_or_blister');
  });

  it('takes the worse headache of after and next day', () => {
    const next = { rednessStillThere: true, headacheNextDay: 1 };
    expect(nextDayFactsOf(next, { ...answers, headacheAfter: 7 })).toMatchObject({ headache: 7, rednessNextDay: true });
    expect(nextDayFactsOf({ ...next, headacheNextDay: 8 }, answers)).toMatchObject({ headache: 8 });
    expect(nextDayFactsOf({ ...next, redFlags: ['faint'] }, undefined)).toMatchObject({
      headache: 1,
      redFlags: ['faint'],
    });
  });

  it('wants "nothing felt" chosen, or an effect, and not both', () => {
    const parse = (changes: object) => diaryAnswersSchema.safeParse({ ...answers, ...changes }).success;
    expect(parse({})).toBe(true);
    expect(parse({ nothingFelt: true, effects: [] })).toBe(true);
    expect(parse({ nothingFelt: true })).toBe(false);
    expect(parse({ effects: [] })).toBe(false);
    expect(parse({ effects: [answers.effects[0], answers.effects[0]] })).toBe(false);
    expect(parse({ freeText: 'x'.repeat(2001) })).toBe(false);
    expect(parse({ mood: 3 })).toBe(false);
  });
});
