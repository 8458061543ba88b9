// From what a schema found to each field's path, stable code and facts. The codes are ours: the schema library may be changed.

import type { z } from 'zod';
import type { BareField } from '@/server/action';

type Issue = z.core.$ZodIssue;

/** @param input what was parsed, to tell a missing field from one of the wrong type */
export function fieldsOf(issues: readonly Issue[], input: unknown): BareField[] {
  return issues.flatMap((issue) => fieldsOfIssue(issue, input));
}

function fieldsOfIssue(issue: Issue, input: unknown): BareField[] {
  const path = issue.path.map(String).join('.');
  switch (issue.code) {
    case 'invalid_type':
      return valueAt(input, issue.path) === undefined
        ? [{ path, code: 'missing' }]
        : [{ path, code: `type.${issue.expected}` }];
    case 'unrecognized_keys':
      return issue.keys.map((key) => ({ path: path ? `${path}.${key}` : key, code: 'unknown_field' }));
    case 'too_small':
      return [
        { path, code: `too_small.${sizeOf(issue.origin, issue.inclusive)}`, facts: { minimum: String(issue.minimum) } },
      ];
    case 'too_big':
      return [
        { path, code: `too_big.${sizeOf(issue.origin, issue.inclusive)}`, facts: { maximum: String(issue.maximum) } },
      ];
    case 'invalid_format':
      return [{ path, code: `format.${issue.format}` }];
    case 'invalid_value':
      return [
        {
          path,
          code: valueAt(input, issue.path) === undefined ? 'missing' : 'not_one_of',
          facts: { allowed: issue.values.map(String).join(', ') },
        },
      ];
    case 'not_multiple_of':
      return [{ path, code: 'not_multiple_of', facts: { divisor: issue.divisor } }];
    case 'invalid_union':
      return fieldsOfUnion(issue, path, input);
    case 'invalid_key':
    case 'invalid_element':
      return [{ path, code: 'not_allowed' }];
    case 'custom':
      return [{ path, code: issue.message }];
    default:
      return [{ path, code: 'not_allowed' }];
  }
}

/** Of the shapes that would do, the one that was missed by least tells most. */
function fieldsOfUnion(issue: z.core.$ZodIssueInvalidUnion, path: string, input: unknown): BareField[] {
  const [nearest] = [...issue.errors].sort((a, b) => a.length - b.length);
  if (!nearest || nearest.length === 0) {
    // The library names the field that tells the shapes apart in the path already.
    const isNamed = issue.discriminator === undefined || issue.path.at(-1) === issue.discriminator;
    const tag = isNamed ? issue.path : [...issue.path, issue.discriminator ?? ''];
    return [
      { path: tag.map(String).join('.') || path, code: valueAt(input, tag) === undefined ? 'missing' : 'not_one_of' },
    ];
  }
  return nearest.flatMap((one) => fieldsOfIssue({ ...one, path: [...issue.path, ...one.path] }, input));
}

function sizeOf(origin: string, inclusive: boolean | undefined): string {
  if (origin === 'string') return 'text';
  if (origin === 'array' || origin === 'set' || origin === 'map') return 'list';
  return inclusive === false ? 'number_exclusive' : 'number';
}

function valueAt(input: unknown, path: readonly PropertyKey[]): unknown {
  let value = input;
  for (const key of path) {
    if (typeof value !== 'object' || value === null) return undefined;
    value = Object.getOwnPropertyDescriptor(value, key)?.value;
  }
  return value;
}

/** Deeper than any body of ours (own choice). */
const deepest = 40;

/**
 * Text that the database cannot keep: NUL, and half a surrogate pair (PostgreSQL's text holds neither). Also finds what is nested too deep
 * to be meant. Paths of the fields, empty when all is well.
 */
export function unreadableFields(input: unknown): BareField[] {
  const found: BareField[] = [];
  const left: { value: unknown; path: string; depth: number }[] = [{ value: input, path: '', depth: 0 }];
  for (let next = left.pop(); next; next = left.pop()) {
    const { value, path, depth } = next;
    if (typeof value === 'string') {
      if (!isKeepable(value)) found.push({ path, code: 'unreadable_text' });
    } else if (typeof value === 'object' && value !== null) {
      if (depth >= deepest) return [{ path, code: 'too_deep' }];
      for (const [key, member] of Object.entries(value)) {
        if (!isKeepable(key)) found.push({ path, code: 'unreadable_text' });
        else left.push({ value: member, path: path ? `${path}.${key}` : key, depth: depth + 1 });
      }
    }
  }
  return found;
}

function isKeepable(text: string): boolean {
  return !text.includes('\u0000') && text.isWellFormed();
}
