// The cursor of a list: the last row's sort keys as base64url JSON. It carries position only, never a right to see anything.

/** Sort keys of one row, in the order of the list's ORDER BY. */
export type CursorValues = readonly (string | number | null)[];

export function encodeCursor(values: CursorValues): string {
  return Buffer.from(JSON.stringify(values), 'utf8').toString('base64url');
}

/** Null for whatever this house did not make: the asker gets 422 `cursor_unknown`, never a fault. */
export function decodeCursor(text: string): CursorValues | null {
  try {
    const values: unknown = JSON.parse(Buffer.from(text, 'base64url').toString('utf8'));
    if (!Array.isArray(values)) return null;
    const known: unknown[] = values;
    return known.every(isKey) ? known : null;
  } catch {
    return null;
  }
}

function isKey(value: unknown): value is string | number | null {
  // PostgreSQL keeps no NUL in text; such a key was never a row's.
  return value === null || typeof value === 'number' || (typeof value === 'string' && !value.includes('\u0000'));
}

/** A page of `limit` rows out of the `limit + 1` that were asked for, and where the next one begins. */
export function cutPage<T>(
  rows: readonly T[],
  limit: number,
  keysOf: (row: T) => CursorValues,
): { page: T[]; nextCursor: string | null } {
  const page = rows.slice(0, limit);
  const last = page.at(-1);
  return { page, nextCursor: last !== undefined && rows.length > limit ? encodeCursor(keysOf(last)) : null };
}
