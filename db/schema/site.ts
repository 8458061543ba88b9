// Sites and the signed versions of their protocols.

import { sql } from 'drizzle-orm';
import { check, index, integer, jsonb, pgTable, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import { id, instant, oneOf } from './columns';

export const site = pgTable(
  'site',
  {
    id: id(),
    name: text('name').notNull(),
    code: text('code').notNull().unique(),
    kind: text('kind', { enum: ['service', 'research'] }).notNull(),
    phone: text('phone').notNull(),
    emergencyNumber: text('emergency_number').notNull(),
    zone: text('zone').notNull(),
    createdAt: instant('created_at').notNull(),
  },
  () => [check('site_kind', oneOf('kind', ['service', 'research']))],
);

/** Running number of participants' codes, one row a site (LS-0142). */
export const siteCounter = pgTable('site_counter', {
  siteId: uuid('site_id')
    .primaryKey()
    .references(() => site.id),
  lastNumber: integer('last_number').notNull().default(0),
});

/** Append-only: the highest version of a site is in force. */
export const protocol = pgTable(
  'protocol',
  {
    id: id(),
    siteId: uuid('site_id')
      .notNull()
      .references(() => site.id),
    version: integer('version').notNull(),
    settings: jsonb('settings').notNull(),
    reason: text('reason').notNull(),
    signedBy: text('signed_by').notNull(),
    signedByName: text('signed_by_name').notNull(),
    signedAt: instant('signed_at').notNull(),
    contentHash: text('content_hash').notNull(),
  },
  (table) => [
    uniqueIndex('protocol_site_version').on(table.siteId, table.version.desc()),
    index('protocol_signed_at').on(table.signedAt),
    check('protocol_version_from_one', sql`${table.version} >= 1`),
  ],
);
