/**
 * From what a schema found wrong to the words for it: a key of `common:errors` with its numbers. It must not hold words
 * and must not show the schema's own English.
 */
import type { core } from 'zod';
import { i18n } from '@/components/runtime/i18n';

interface Words {
  key: string;
  values?: Record<string, string | number>;
}

function amount(value: number | bigint): number {
  return Number(value);
}

/** Missing and empty ask to be filled in; everything else says what is allowed. */
function wordsOf(issue: core.$ZodRawIssue): Words {
  switch (issue.code) {
    case 'invalid_type':
      return { key: issue.expected === 'number' && issue.input != null ? 'invalid_type_number' : 'invalid_type' };
    case 'invalid_format':
      return { key: `invalid_format_${issue.format}` };
    case 'not_multiple_of':
      return { key: 'not_multiple_of', values: { divisor: issue.divisor } };
    case 'too_small': {
      const minimum = amount(issue.minimum);
      if (issue.origin === 'string' && issue.input === '') return { key: 'required' };
      if (issue.origin === 'string' || issue.origin === 'array') {
        return { key: `too_small_${issue.origin}`, values: { minimum, count: minimum } };
      }
      return { key: issue.inclusive === false ? 'too_small_number_above' : 'too_small_number', values: { minimum } };
    }
    case 'too_big': {
      const maximum = amount(issue.maximum);
      if (issue.origin === 'string' || issue.origin === 'array') {
        return { key: `too_big_${issue.origin}`, values: { maximum, count: maximum } };
      }
      return { key: issue.inclusive === false ? 'too_big_number_below' : 'too_big_number', values: { maximum } };
    }
    case 'custom': {
      // A schema may name its own sentence: refine(…, { params: { key: 'prescription:ends_before_start' } }).
      const own: unknown = issue.params?.['key'];
      return typeof own === 'string' ? { key: own } : { key: 'custom' };
    }
    default:
      return { key: issue.code };
  }
}

export function messageOfIssue(issue: core.$ZodRawIssue): string {
  const { key, values } = wordsOf(issue);
  const full = key.includes(':') ? key : `common:errors.${key}`;
  const fallback = `common:errors.${issue.code}`;
  return i18n.t([full, fallback, 'common:errors.custom'], { ...values });
}

/** A server's bad field has a code of its own; where there is no sentence for it, the server's message stands. */
export function messageOfField(field: { code?: string; message: string }): string {
  if (!field.code) return field.message;
  const key = field.code.includes(':') ? field.code : `common:errors.${field.code}`;
  return i18n.exists(key) && !i18n.t(key).includes('{{') ? i18n.t(key) : field.message;
}
