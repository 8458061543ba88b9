// How a worked case is read: strictly, so that a fact that is not known is named and never passed over.

import type { z } from 'zod';

export type WorkedAnswer =
  | { readonly known: true; readonly outcome: Readonly<Record<string, unknown>> }
  | { readonly known: false; readonly problems: readonly string[] };

/** One kind of case: `given` as it stands in the file after the patch, `now` where the kind has one. */
export type WorkedKind = (given: unknown, now: string | undefined) => WorkedAnswer;

export function kindOf<T extends z.ZodType>(
  schema: T,
  answer: (given: z.infer<T>, now: string) => Readonly<Record<string, unknown>>,
): WorkedKind {
  return (given, now) => {
    const read = schema.safeParse(given);
    if (!read.success) {
      return {
        known: false,
        problems: read.error.issues.map(({ path, message }) => `${path.map(String).join('.')}: ${message}`),
      };
    }
    return { known: true, outcome: answer(read.data, now ?? '') };
  };
}

/** The entries that have a value: an absent key and an undefined one are the same in the outcome. */
export function present(entries: Readonly<Record<string, unknown>>): Readonly<Record<string, unknown>> {
  return Object.fromEntries(Object.entries(entries).filter(([, value]) => value !== undefined));
}

function isPlainObject(value: unknown): value is Readonly<Record<string, unknown>> {
  return typeof value === 'object' && value !== null && !Array.isArray(value);
}

/** JSON Merge Patch (RFC 7396): objects merge, everything else replaces, null removes. */
export function mergePatch(target: unknown, patch: unknown): unknown {
  if (!isPlainObject(patch)) return patch;
  const merged = new Map(isPlainObject(target) ? Object.entries(target) : []);
  for (const [key, value] of Object.entries(patch)) {
    if (value === null) merged.delete(key);
    else merged.set(key, mergePatch(merged.get(key), value));
  }
  return Object.fromEntries(merged);
}
