// The register of stimulators and supplies. A device's state is the newest row of its history.

import { sql } from 'drizzle-orm';
import { check, date, index, integer, pgTable, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import { closing, id, instant, oneOf } from './columns';
import { participant } from './participant';
import { site } from './site';

const deviceStates = ['stock', 'out', 'quarantined', 'recalled', 'lost', 'retired'] as const;

export const device = pgTable(
  'device',
  {
    id: id(),
    siteId: uuid('site_id')
      .notNull()
      .references(() => site.id),
    label: text('label').notNull(),
    model: text('model').notNull(),
    serial: text('serial').notNull().unique(),
    firmware: text('firmware').notNull(),
    calibrationDueOn: date('calibration_due_on', { mode: 'string' }).notNull(),
    createdAt: instant('created_at').notNull(),
    /** Highest counter given out; moves only upwards, in the transaction that issues a permit. */
    lastCounter: integer('last_counter').notNull().default(0),
  },
  (table) => [index('device_site_label').on(table.siteId, table.label, table.id)],
);

export const deviceState = pgTable(
  'device_state',
  {
    id: id(),
    deviceId: uuid('device_id')
      .notNull()
      .references(() => device.id),
    state: text('state', { enum: deviceStates }).notNull(),
    reason: text('reason'),
    by: text('by').notNull(),
    createdAt: instant('created_at').notNull(),
    /** Tie-break of rows made in the same millisecond. */
    number: integer('number').notNull(),
  },
  (table) => [uniqueIndex('device_state_number').on(table.deviceId, table.number.desc()), check('device_state_known', oneOf('state', deviceStates))],
);

export const deviceAssignment = pgTable(
  'device_assignment',
  {
    id: id(),
    deviceId: uuid('device_id')
      .notNull()
      .references(() => device.id),
    participantId: uuid('participant_id')
      .notNull()
      .references(() => participant.id),
    by: text('by').notNull(),
    createdAt: instant('created_at').notNull(),
    ...closing(),
  },
  (table) => [
    uniqueIndex('device_assignment_one_person').on(table.deviceId).where(sql`${table.closedAt} is null`),
    uniqueIndex('device_assignment_one_device').on(table.participantId).where(sql`${table.closedAt} is null`),
  ],
);

export const supply = pgTable(
  'supply',
  {
    id: id(),
    participantId: uuid('participant_id')
      .notNull()
      .references(() => participant.id),
    kind: text('kind', { enum: ['sponge', 'saline', 'insert'] }).notNull(),
    lot: text('lot').notNull(),
    openedAt: instant('opened_at').notNull(),
    maxUses: integer('max_uses'),
    maxDays: integer('max_days').notNull(),
    by: text('by').notNull(),
    createdAt: instant('created_at').notNull(),
    ...closing(),
  },
  (table) => [index('supply_participant').on(table.participantId, table.createdAt.desc()), check('supply_kind', oneOf('kind', ['sponge', 'saline', 'insert']))],
);
