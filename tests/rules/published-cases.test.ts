// Every published case through the engine, in the form in which it stands in the file. A case whose facts the engine
// does not know by name fails too.

import dose from '@/tests/published/dose.json';
import rules from '@/tests/published/rules.json';
import scales from '@/tests/published/scales.json';
import { answerNumberCase, answerRuleCase, mergePatch, type WorkedAnswer } from '@/shared/rules/worked-cases';
import { scales as scaleDefinitions } from '@/shared/rules/scales';
import { scaleNames } from '@/shared/values/codes';

type Tolerance = { readonly abs: number; readonly rel: number };
const ruleTolerance: Tolerance = { abs: 1e-6, rel: 0 };

function isRecord(value: unknown): value is Record<string, unknown> {
  return typeof value === 'object' && value !== null && !Array.isArray(value);
}

/** Where two outcomes differ; lists of findings are sets, tuples of numbers are in order. */
function differences(got: unknown, wanted: unknown, tolerance: Tolerance, path = ''): string[] {
  if (typeof wanted === 'number') {
    const isNear =
      typeof got === 'number' && Math.abs(got - wanted) <= tolerance.abs + tolerance.rel * Math.abs(wanted);
    return isNear ? [] : [`${path}: ${JSON.stringify(got)} is not ${wanted}`];
  }
  if (Array.isArray(wanted)) {
    if (!Array.isArray(got) || got.length !== wanted.length) {
      return [`${path}: ${JSON.stringify(got)} is not ${JSON.stringify(wanted)}`];
    }
    const isTuple = wanted.every((each) => typeof each === 'number');
    const rest = [...got];
    return wanted.flatMap((each, index) => {
      const at = isTuple ? 0 : rest.findIndex((candidate) => differences(candidate, each, tolerance).length === 0);
      const [candidate] = at < 0 ? [] : rest.splice(at, 1);
      const found = differences(candidate, each, tolerance, `${path}[${index}]`);
      return at < 0 ? [`${path}: ${JSON.stringify(each)} is missing in ${JSON.stringify(got)}`] : found;
    });
  }
  if (isRecord(wanted)) {
    if (!isRecord(got)) return [`${path}: ${JSON.stringify(got)} is not ${JSON.stringify(wanted)}`];
    const isPartial = path === '' || path === '.computed';
    const extra = isPartial ? [] : Object.keys(got).filter((key) => !(key in wanted));
    return [
      ...extra.map((key) => `${path}.${key}: ${JSON.stringify(got[key])} is not in the case`),
      ...Object.entries(wanted).flatMap(([key, each]) => differences(got[key], each, tolerance, `${path}.${key}`)),
    ];
  }
  return got === wanted ? [] : [`${path}: ${JSON.stringify(got)} is not ${JSON.stringify(wanted)}`];
}

function problemsOf(answer: WorkedAnswer, wanted: unknown, tolerance: Tolerance): readonly string[] {
  return answer.known ? differences(answer.outcome, wanted, tolerance) : answer.problems;
}

const baselines = new Map<string, unknown>(Object.entries(rules.baseline));

describe('rules.json', () => {
  it('holds the 265 cases that were received', () => {
    expect(rules.cases).toHaveLength(265);
  });

  it.each(rules.cases.map((each) => [each.id, each.title, each] as const))('%s: %s', (_id, _title, each) => {
    const given = mergePatch(baselines.get(each.kind), each.given);
    expect(problemsOf(answerRuleCase(each.kind, given, each.now), each.expect, ruleTolerance)).toEqual([]);
  });
});

describe('scales.json', () => {
  it.each(scales.cases.map((each) => [each.id, `${each.scale} ${each.title}`, each] as const))(
    '%s: %s',
    (_id, _title, { scale, answers, before, after, expect: wanted }) => {
      const given = answers === undefined ? { scale, before, after } : { scale, answers };
      expect(problemsOf(answerRuleCase('scale', given), wanted, ruleTolerance)).toEqual([]);
    },
  );

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

describe('dose.json', () => {
  it.each(dose.cases.map((each) => [each.id, each.method, each] as const))('%s: %s', (_id, _method, each) => {
    expect(problemsOf(answerNumberCase(each.kind, each.input), each.expected, each.tolerance)).toEqual([]);
  });
});

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
