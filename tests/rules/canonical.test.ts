// One text for one content: what a signature's hash is taken of.

import fc from 'fast-check';
import { canonicalJson } from '@/shared/values/canonical';

describe('the canonical text', () => {
  it('does not depend on the order of keys', () => {
    expect(canonicalJson({ b: [1, { d: null, c: true }], a: 'x' })).toBe('{"a":"x","b":[1,{"c":true,"d":null}]}');
    expect(canonicalJson({ a: 'x', b: [1, { c: true, d: null }] })).toBe(
      canonicalJson({ b: [1, { d: null, c: true }], a: 'x' }),
    );
  });

  it('depends on the order of a list and on every value', () => {
    expect(canonicalJson([1, 2])).not.toBe(canonicalJson([2, 1]));
    expect(canonicalJson({ a: 1 })).not.toBe(canonicalJson({ a: '1' }));
  });

  it('is JSON of the same content', () => {
    fc.assert(
      fc.property(
        fc.dictionary(fc.string(), fc.oneof(fc.string(), fc.integer(), fc.boolean(), fc.constant(null))),
        (value) => {
          expect(Object.entries(JSON.parse(canonicalJson(value))).sort()).toEqual(Object.entries(value).sort());
        },
      ),
    );
  });

  it('throws for a number that JSON has no form for', () => {
    expect(() => canonicalJson({ a: Number.NaN })).toThrow(RangeError);
  });
});
