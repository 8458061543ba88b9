// What a pseudonymous reader does not get to see of recorded facts: whatever says who somebody is, and what people typed freely.

type Json = string | number | boolean | null | readonly Json[] | { readonly [key: string]: Json | undefined };

/** Names of facts that identify, or that a person wrote in own words (safety rules §10: the monitor sees pseudonyms). */
const hidden = new Set([
  ...['name', 'email', 'phone', 'bornOn', 'emergencyContact', 'emergencyName', 'emergencyPhone', 'helperName'],
  ...['text', 'freeText', 'remark', 'reason', 'finding', 'toEmail', 'address'],
]);

/** The same facts without those; at every depth. */
export function withoutIdentity(value: Json): Json {
  if (value === null || typeof value !== 'object') return value;
  if (isList(value)) return value.map(withoutIdentity);
  return Object.fromEntries(
    Object.entries(value).flatMap(([key, fact]) =>
      fact === undefined || hidden.has(key) ? [] : [[key, withoutIdentity(fact)]],
    ),
  );
}

function isList(value: Json): value is readonly Json[] {
  return Array.isArray(value);
}
