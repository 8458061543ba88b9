// Screening and training: nothing is clear that is open, and no reason overrides an absolute item.

import {
  capabilityItems,
  judgeScreening,
  judgeTraining,
  screeningAnswersSchema,
  screeningItems,
  trainingSkills,
  type ScreeningAnswers,
} from '@/shared/rules/screening';

const idsOf = (of: 'absolute' | 'relative') => screeningItems.filter((item) => item.class === of).map(({ id }) => id);
const clear: ScreeningAnswers = Object.fromEntries(screeningItems.map(({ id }) => [id, { answer: 'no' }]));

describe('judgeScreening', () => {
  it('is clear when every item is answered no', () => {
    expect(judgeScreening(clear)).toEqual({
      complete: true,
      outcome: 'clear',
      open: [],
      needsReason: [],
      reasoned: [],
      excludedBy: [],
      unknown: [],
    });
  });

  it.each(screeningItems.map(({ id }) => id))('is incomplete while %s is not answered or not known', (id) => {
    const { [id]: _gone, ...rest } = clear;
    expect(judgeScreening(rest)).toMatchObject({ complete: false, outcome: 'incomplete', open: [id] });
    expect(judgeScreening({ ...clear, [id]: { answer: 'not_known' } })).toMatchObject({ complete: false, open: [id] });
  });

  it.each(idsOf('absolute'))('excludes by %s, whatever reason is given', (id) => {
    const answers = { ...clear, [id]: { answer: 'yes', reason: 'all the same' } } as const;
    expect(judgeScreening(answers)).toMatchObject({ complete: true, outcome: 'excluded', excludedBy: [id] });
  });

  it.each(idsOf('relative'))('goes on over %s with a reason only', (id) => {
    expect(judgeScreening({ ...clear, [id]: { answer: 'yes' } })).toMatchObject({
      outcome: 'incomplete',
      needsReason: [id],
    });
    expect(judgeScreening({ ...clear, [id]: { answer: 'yes', reason: '  ' } })).toMatchObject({
      outcome: 'incomplete',
    });
    expect(judgeScreening({ ...clear, [id]: { answer: 'yes', reason: 'seen by neurology' } })).toMatchObject({
      outcome: 'clear',
      reasoned: [id],
    });
  });

  it('excludes although other items are open', () => {
    const [absolute = ''] = idsOf('absolute');
    expect(judgeScreening({ [absolute]: { answer: 'yes' } })).toMatchObject({ complete: false, outcome: 'excluded' });
  });

  it('names an item that is not on the list', () => {
    expect(judgeScreening({ ...clear, star_sign: { answer: 'no' } })).toMatchObject({
      outcome: 'incomplete',
      unknown: ['star_sign'],
    });
  });

  it('has no id twice, and answers of one strict form', () => {
    expect(new Set(screeningItems.map(({ id }) => id)).size).toBe(screeningItems.length);
    expect(screeningAnswersSchema.safeParse({ pregnancy: { answer: 'maybe' } }).success).toBe(false);
    expect(screeningAnswersSchema.safeParse({ pregnancy: { answer: 'no', by: 'me' } }).success).toBe(false);
  });
});

describe('judgeTraining', () => {
  const all = (ids: readonly string[], value = true) => Object.fromEntries(ids.map((id) => [id, value]));
  const skills = all(trainingSkills);
  const capability = all(capabilityItems);

  it('signs off when every skill was seen and every item is there', () => {
    expect(judgeTraining({ skills, capability, hasHelper: false })).toEqual({ complete: true, open: [], unknown: [] });
  });

  it.each([...trainingSkills])('stays open without %s', (id) => {
    expect(judgeTraining({ skills: { ...skills, [id]: false }, capability, hasHelper: true }).open).toEqual([id]);
  });

  it('lets a named helper stand in for the person’s own, not for the home', () => {
    const lacking = { ...capability, hand_use: false };
    expect(judgeTraining({ skills, capability: lacking, hasHelper: false }).open).toEqual(['hand_use']);
    expect(judgeTraining({ skills, capability: lacking, hasHelper: true }).complete).toBe(true);
    expect(judgeTraining({ skills, capability: { ...capability, water: false }, hasHelper: true }).open).toEqual([
      'water',
    ]);
  });

  it('lets nobody stand in for what was not looked at', () => {
    const { hand_use: _gone, ...unseen } = capability;
    expect(judgeTraining({ skills, capability: unseen, hasHelper: true }).open).toEqual(['hand_use']);
  });

  it('names what is not on the lists', () => {
    const { complete, unknown } = judgeTraining({
      skills: { ...skills, juggling: true },
      capability: { ...capability, balcony: true },
      hasHelper: false,
    });
    expect([complete, unknown]).toEqual([false, ['juggling', 'balcony']]);
  });
});
