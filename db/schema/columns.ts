// Column shapes that many tables share. Instants are ISO strings in UTC on our side, timestamptz in the database.

import { sql } from 'drizzle-orm';
import { customType, text, uuid } from 'drizzle-orm/pg-core';

/** timestamptz as an ISO string with milliseconds, `2026-05-12T16:00:00.000Z`. */
export const instant = customType<{ data: string; driverData: string | Date }>({
  dataType: () => 'timestamp (3) with time zone',
  fromDriver: (value) => new Date(value).toISOString(),
  toDriver: (value) => value,
});

export const bytes = customType<{ data: Uint8Array; driverData: Buffer }>({
  dataType: () => 'bytea',
  fromDriver: (value) => new Uint8Array(value),
  toDriver: (value) => Buffer.from(value),
});

export const id = () => uuid('id').primaryKey();

/** The closing columns of an append-only row: null until the one thing that may happen to it. */
export const closing = () => ({
  closedAt: instant('closed_at'),
  closedWhy: text('closed_why'),
});

/** `column in ('a', 'b')` for a CHECK, from the same list that the types come from. */
export function oneOf(column: string, values: readonly string[]) {
  return sql.raw(`${column} in (${values.map((value) => `'${value}'`).join(', ')})`);
}
