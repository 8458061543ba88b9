// What the qualification says of a file of worked cases: which forms it takes, what it names, and how it compares.

import { isAsExpected, type PassRule } from '@/shared/rules/qualify/compare';
import { readCaseFile, runCase, tally } from '@/shared/rules/qualify';

const adult = {
  ...{ id: 'minor-1', kind: 'dose', title: 'an adult', source: 'own', tag: 'K' },
  ...{ given: { age_years: 11 }, expect: { verdict: 'refuse' } },
};
const fraction = {
  ...{ id: 'half', kind: 'fraction', method: 'by hand', source: 'arithmetic' },
  ...{ input: { prescribed_C: 2, delivered_C: 1 }, expected: { fraction: 0.5 }, tolerance: { abs: 1e-9, rel: 0 } },
};
const code = {
  id: 'rfc',
  kind: 'hotp',
  input: { secret_hex: '3132333435363738393031323334353637383930', counter: 0, digits: 6 },
  expected: { code: '755224' },
};

/** The first result of a file with this one case. */
function resultOf(each: unknown, file: Record<string, unknown> = {}) {
  const read = readCaseFile({ ...file, cases: [each] });
  if (!read.read) throw new Error(read.problems.join());
  const [result] = read.cases.map(runCase);
  if (!result) throw new Error('There is no result.');
  return result;
}
const errorOf = (each: unknown) => (resultOf(each).error ?? []).join();

describe('a case', () => {
  it('passes with id, expected and actual, and nothing else beside them', () => {
    expect(resultOf(fraction)).toEqual({
      ...{ id: 'half', pass: true },
      ...{ expected: { fraction: 0.5 }, actual: { fraction: 0.5 } },
    });
  });

  it('fails with what was expected and what came', () => {
    expect(resultOf({ ...fraction, expected: { fraction: 0.6 } })).toEqual({
      ...{ id: 'half', pass: false },
      ...{ expected: { fraction: 0.6 }, actual: { fraction: 0.5 } },
    });
  });

  it('is laid over the baseline of its kind, and null takes a fact away', () => {
    const baseline = { delivered: { samples: [[0, 0]], planned_C: 1 } };
    const empty = { id: 'a', kind: 'delivered', given: {}, expect: { charge_C: 0 } };
    expect(resultOf(empty, { baseline })).toMatchObject({ pass: true });
    expect(resultOf({ ...empty, given: { samples: null } }, { baseline }).error?.join()).toContain('samples');
  });

  it.each([
    ['a rule case', { ...adult, kind: 'horoscope' }],
    ['a number case', { ...fraction, kind: 'horoscope' }],
    ['a number kind in a rule case', { ...adult, kind: 'hotp' }],
  ])('of a kind that is not known is an error that names it and the kinds there are: %s', (_what, each) => {
    const { pass, error } = resultOf(each);
    expect(pass).toBe(false);
    expect(error?.join()).toContain(`kind: ${each.kind} is not known; known are `);
  });

  it.each([
    ['beside the others of a rule case', { ...adult, colour: 'red' }],
    ['beside the others of a number case', { ...fraction, colour: 'red' }],
    ['among the facts', { ...adult, given: { age_years: 11, colour: 'red' } }],
    ['deep among the facts', { ...adult, given: { dose: { colour: 'red' } } }],
    ['in the input', { ...fraction, input: { ...fraction.input, colour: 'red' } }],
    ['in the tolerance', { ...fraction, tolerance: { abs: 0, rel: 0, colour: 1 } }],
    ['in what a rule case expects', { ...adult, expect: { verdict: 'refuse', colour: 'red' } }],
    ['in what a number case expects', { ...fraction, expected: { fraction: 0.5, colour: 'red' } }],
  ])('with a field that is not known is an error that names it: %s', (_where, each) => {
    expect(resultOf(each)).toMatchObject({ pass: false, error: [expect.stringContaining('colour')] });
  });

  it('that lacks a field is an error that names it', () => {
    expect(errorOf({ id: 'a', kind: 'dose', given: {} })).toContain('expect');
    expect(errorOf({ id: 'a', kind: 'fraction', input: {} })).toContain('expected');
    expect(errorOf({ ...code, input: { ...code.input, digits: undefined } })).toContain('digits');
  });

  it('without an id is named by its place', () => {
    expect(resultOf({ ...adult, id: undefined }).id).toBe('cases[0]');
    expect(resultOf('horse').id).toBe('cases[0]');
  });

  it('passes for a one-time code of RFC 4226 and fails for another code', () => {
    expect(resultOf(code).pass).toBe(true);
    expect(resultOf({ ...code, expected: { code: '755225' } }).pass).toBe(false);
  });

  it.each([
    ['a secret that is not hexadecimal', { secret_hex: '31x2' }],
    ['half a byte', { secret_hex: '313' }],
    ['no secret', { secret_hex: '' }],
    ['a counter below 0', { counter: -1 }],
    ['a counter between two', { counter: 0.5 }],
    ['five digits', { digits: 5 }],
    ['nine digits', { digits: 9 }],
  ])('of kind hotp is not judged with %s', (_what, odd) => {
    expect(errorOf({ ...code, input: { ...code.input, ...odd } })).toContain(Object.keys(odd).join());
  });

  it('takes eight digits and counters above 32 bits', () => {
    const long = { ...code, input: { ...code.input, digits: 8 }, expected: { code: '84755224' } };
    expect(resultOf(long).pass).toBe(true);
    const far = { ...code, input: { ...code.input, counter: 2 ** 40 } };
    expect(resultOf(far).actual).not.toEqual(resultOf({ ...code, input: { ...code.input, counter: 0 } }).actual);
  });
});

describe('a file', () => {
  it.each([
    ['a list', []],
    ['text', 'cases'],
    ['nothing', null],
    ['an object without cases', { about: 'nothing' }],
    ['cases that are no list', { cases: {} }],
    ['no case at all', { cases: [] }],
    ['another schema', { schema: 'rampwell-reference/9', cases: [fraction] }],
    ['a field that is not known', { cases: [fraction], colour: 'red' }],
    ['a baseline of a kind that is not known', { cases: [adult], baseline: { horoscope: {} } }],
  ])('is not read when it is %s', (_what, content) => {
    expect(readCaseFile(content)).toMatchObject({ read: false });
  });

  it('names the field that it does not know', () => {
    const read = readCaseFile({ cases: [fraction], colour: 'red' });
    expect(read.read ? '' : read.problems.join()).toContain('colour');
  });

  it('counts what passed and what failed, errors among the failed', () => {
    const read = readCaseFile({ cases: [fraction, { ...fraction, expected: { fraction: 1 } }, 'horse'] });
    expect(read.read && tally(read.cases.map(runCase))).toEqual({ passed: 1, failed: 2 });
  });
});

const rules: PassRule = { form: 'rules', tolerance: { abs: 1e-6, rel: 0 } };
const numbers: PassRule = { form: 'numbers', tolerance: { abs: 0, rel: 0.1 } };

describe('comparing by the rules form', () => {
  it('takes lists as sets: any order, nothing missing, nothing extra', () => {
    const wanted = { reasons: [{ code: 'a' }, { code: 'b', until: '2026-05-12T16:00:00Z' }] };
    const got = { reasons: [{ code: 'b', until: '2026-05-12T16:00:00.000Z' }, { code: 'a' }] };
    expect(isAsExpected(got, wanted, rules)).toBe(true);
    expect(isAsExpected({ reasons: [{ code: 'a' }] }, wanted, rules)).toBe(false);
    expect(isAsExpected({ reasons: [...got.reasons, { code: 'c' }] }, wanted, rules)).toBe(false);
    expect(isAsExpected({ reasons: [{ code: 'a' }, { code: 'a' }] }, wanted, rules)).toBe(false);
    expect(isAsExpected({ reasons: 'a' }, { reasons: [] }, rules)).toBe(false);
  });

  it('sees a key too many in a finding, but not beside the expected keys of the outcome or of computed', () => {
    expect(isAsExpected({ reasons: [{ code: 'a', until: 'b' }] }, { reasons: [{ code: 'a' }] }, rules)).toBe(false);
    expect(isAsExpected({ allowed: true, reasons: [] }, { allowed: true }, rules)).toBe(true);
    expect(isAsExpected({ computed: { a: 1, b: 2 } }, { computed: { a: 1 } }, rules)).toBe(true);
    expect(isAsExpected({ counts: { a: 1, b: 2 } }, { counts: { a: 1 } }, rules)).toBe(false);
    expect(isAsExpected({ x: { computed: { a: 1, b: 2 } } }, { x: { computed: { a: 1 } } }, rules)).toBe(false);
  });

  it('takes numbers within a millionth, intervals in order, and no number for text', () => {
    expect(isAsExpected({ a: 1.0000009 }, { a: 1 }, rules)).toBe(true);
    expect(isAsExpected({ a: 1.0000011 }, { a: 1 }, rules)).toBe(false);
    expect(isAsExpected({ a: [0.1, 0.2] }, { a: [0.2, 0.1] }, rules)).toBe(false);
    expect(isAsExpected({ a: [0.1] }, { a: [0.1, 0.2] }, rules)).toBe(false);
    expect(isAsExpected({ a: '1' }, { a: 1 }, rules)).toBe(false);
    expect(isAsExpected({ a: Number.NaN }, { a: 1 }, rules)).toBe(false);
  });

  it('keeps null, false, absent and empty apart', () => {
    expect(isAsExpected({ a: null }, { a: null }, rules)).toBe(true);
    expect(isAsExpected({}, { a: null }, rules)).toBe(false);
    expect(isAsExpected({ a: false }, { a: null }, rules)).toBe(false);
    expect(isAsExpected({ a: true }, { a: false }, rules)).toBe(false);
    expect(isAsExpected({ a: null }, { a: {} }, rules)).toBe(false);
    expect(isAsExpected(null, {}, rules)).toBe(false);
  });

  it('takes instants as the same only when they are, and other text to the letter', () => {
    const at = (until: string, wanted: string) => isAsExpected({ until }, { until: wanted }, rules);
    expect(at('2026-05-12T16:00:00.001Z', '2026-05-12T16:00:00Z')).toBe(false);
    expect(at('2026-05-12T16:00:00.0Z', '2026-05-12T16:00:00.000Z')).toBe(true);
    expect(at('v1.0Z', 'v1Z')).toBe(false);
    expect(isAsExpected({ a: 7 }, { a: '7' }, rules)).toBe(false);
  });
});

describe('comparing by the numbers form', () => {
  it('takes a number within abs + rel × |expected|, the bound included', () => {
    expect(isAsExpected({ a: -1.25 }, { a: -1.5 }, { form: 'numbers', tolerance: { abs: 0.25, rel: 0 } })).toBe(true);
    expect(isAsExpected({ a: 2.2 }, { a: 2.05 }, numbers)).toBe(true);
    expect(isAsExpected({ a: -2.2 }, { a: -2.05 }, numbers)).toBe(true);
    expect(isAsExpected({ a: 2.3 }, { a: 2.05 }, numbers)).toBe(false);
    expect(isAsExpected({ a: 1.5 }, { a: 2.05 }, numbers)).toBe(false);
    expect(isAsExpected({ a: Number.POSITIVE_INFINITY }, { a: 2.05 }, numbers)).toBe(false);
  });

  it('takes whole numbers as equal or not, unless a tolerance names their key', () => {
    expect(isAsExpected({ a: 101 }, { a: 100 }, numbers)).toBe(false);
    expect(isAsExpected({ a: 100.5 }, { a: 100 }, numbers)).toBe(true);
    const named: PassRule = { ...numbers, per: { a: { abs: 2, rel: 0 } } };
    expect(isAsExpected({ a: 102 }, { a: 100 }, named)).toBe(true);
    expect(isAsExpected({ a: 103 }, { a: 100 }, named)).toBe(false);
    expect(isAsExpected({ b: { a: 102 } }, { b: { a: 100 } }, named)).toBe(false);
    expect(isAsExpected({ a: { b: [102] } }, { a: { b: [100] } }, named)).toBe(true);
  });

  it('takes lists in order and objects whole below the outcome', () => {
    expect(isAsExpected({ a: ['x', 'y'] }, { a: ['y', 'x'] }, numbers)).toBe(false);
    expect(isAsExpected({ a: { x: 1, y: 2 } }, { a: { x: 1 } }, numbers)).toBe(false);
    expect(isAsExpected({ a: 1, b: 2 }, { a: 1 }, numbers)).toBe(true);
    expect(isAsExpected({ a: '2026-05-12T16:00:00.000Z' }, { a: '2026-05-12T16:00:00Z' }, numbers)).toBe(false);
  });
});
