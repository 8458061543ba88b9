// One text for one content: JSON with sorted keys and no spaces, so that a hash of it means the same on both sides and for
// ever. Hashes nothing itself: that needs the platform.

export type Canonical = string | number | boolean | null | readonly Canonical[] | { readonly [key: string]: Canonical };

/** NaN and infinities have no JSON; they would silently become null, so they throw. */
export function canonicalJson(value: Canonical): string {
  if (typeof value === 'number' && !Number.isFinite(value)) throw new RangeError('a number without JSON form');
  if (value === null || typeof value !== 'object') return JSON.stringify(value);
  if (isList(value)) return `[${value.map(canonicalJson).join(',')}]`;
  const pairs = Object.entries(value).sort(([a], [b]) => (a < b ? -1 : a > b ? 1 : 0));
  return `{${pairs.map(([key, part]) => `${JSON.stringify(key)}:${canonicalJson(part)}`).join(',')}}`;
}

function isList(value: object): value is readonly Canonical[] {
  return Array.isArray(value);
}
