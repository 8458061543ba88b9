// Every published case through the engine, in the form in which it stands in the file. A case whose facts the engine
// does not know by name fails too.

import dose from '@/tests/published/dose.json';
import hotp from '@/tests/published/hotp.json';
import rules from '@/tests/published/rules.json';
import scales from '@/tests/published/scales.json';
import { readCaseFile, runCase } from '@/shared/rules/qualify';
import { answerNumberCase, answerRuleCase, mergePatch, type WorkedAnswer } from '@/shared/rules/worked-cases';
import { scales as scaleDefinitions } from '@/shared/rules/scales';
import { scaleNames } from '@/shared/values/codes';

function casesOf(content: unknown) {
  const file = readCaseFile(content);
  if (!file.read) throw new Error(file.problems.join());
  return file.cases.map((each) => [each.id, each] as const);
}

describe.each([
  ['rules.json', rules, 265],
  ['scales.json', scales, 42],
  ['dose.json', dose, 68],
  ['hotp.json', hotp, 10],
])('%s', (_name, content, count) => {
  it('holds the cases that were received', () => {
    expect(content.cases).toHaveLength(count);
  });

  it.each(casesOf(content))('answers %s as the case expects', (_id, each) => {
    const { pass, expected, actual, error } = runCase(each);
    expect({ pass, actual, error }).toEqual({ pass: true, actual: pass ? actual : expected, error: undefined });
  });
});

describe('scales.json', () => {
  it.each(scaleNames)('scores %s with the items, bands and bounds of the file', (name) => {
    const file = scales.scales[name];
    const own = scaleDefinitions[name];
    expect(own.items).toBe(file.items.length);
    expect(own.bands.map((band) => [...band])).toEqual(file.bands);
    expect([own.positiveAt, own.maxMissing, own.selfHarmItem, own.worseBy]).toEqual([
      file.positive_at,
      file.max_missing,
      file.self_harm_item,
      file.worse_by_default,
    ]);
  });
});

const baselines = new Map<string, unknown>(Object.entries(rules.baseline));

describe('the form of a case', () => {
  it('names a fact that the engine does not know', () => {
    const given = mergePatch(baselines.get('clearance'), { participant: { shoe_size: 43 } });
    const answer = answerRuleCase('clearance', given, '2026-05-12T16:00:00Z');
    expect(answer.known ? '' : answer.problems.join()).toContain('shoe_size');
  });

  it('answers a case of which nothing is given, as refused or open', () => {
    const outcomeOf = (answer: WorkedAnswer) => (answer.known ? answer.outcome : {});
    expect(outcomeOf(answerRuleCase('dose', {}))).toMatchObject({ verdict: 'refuse' });
    expect(outcomeOf(answerRuleCase('clearance', {}, '2026-05-12T16:00:00Z'))).toMatchObject({ allowed: false });
    expect(outcomeOf(answerRuleCase('precheck', {}))).toMatchObject({ complete: false, outcome: null });
    expect(outcomeOf(answerRuleCase('permit', { ask: { type: 'start' } }))).toMatchObject({ valid: false });
    expect(outcomeOf(answerRuleCase('permit', { ask: { type: 'release' } }))).toEqual({ state: 'reserved' });
    expect(outcomeOf(answerRuleCase('lockout', {}))).toMatchObject({ effects: [] });
  });

  it('merges a patch as RFC 7396 says: objects into anything, null away, lists whole', () => {
    expect(mergePatch({ a: 'b', c: { d: 'e', f: 'g' } }, { a: 'z', c: { f: null } })).toEqual({
      a: 'z',
      c: { d: 'e' },
    });
    expect(mergePatch({ a: [1, 2] }, { a: [3] })).toEqual({ a: [3] });
    expect(mergePatch(['a'], { b: 1 })).toEqual({ b: 1 });
    expect(mergePatch({ a: 1 }, ['c'])).toEqual(['c']);
    expect(mergePatch({}, { a: { bb: { ccc: null } } })).toEqual({ a: { bb: {} } });
  });

  it('names a kind that the engine does not know', () => {
    expect(answerRuleCase('horoscope', {})).toEqual({ known: false, problems: ['kind: horoscope is not known'] });
    expect(answerNumberCase('horoscope', {})).toEqual({ known: false, problems: ['kind: horoscope is not known'] });
  });
});
