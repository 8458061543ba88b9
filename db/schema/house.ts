// The house's own tables: audit chains, outbox, keys seen, signing keys, the demo clock, heartbeats.

import { sql } from 'drizzle-orm';
import { bigint, boolean, date, index, integer, jsonb, pgTable, primaryKey, text, uuid } from 'drizzle-orm/pg-core';
import { closing, id, instant } from './columns';

/** Head of each chain: `participant:<id>` or `site:<id>` or `house`. Locked last of all. */
export const auditHead = pgTable('audit_head', {
  chain: text('chain').primaryKey(),
  sequence: bigint('sequence', { mode: 'number' }).notNull(),
  /** The hash before `hash`: lets one statement move the head and write the entry. */
  previousHash: text('previous_hash').notNull(),
  hash: text('hash').notNull(),
});

export const auditEntry = pgTable(
  'audit_entry',
  {
    chain: text('chain').notNull(),
    sequence: bigint('sequence', { mode: 'number' }).notNull(),
    at: instant('at').notNull(),
    actorId: text('actor_id'),
    actorName: text('actor_name').notNull(),
    actorRole: text('actor_role').notNull(),
    action: text('action').notNull(),
    kind: text('kind', { enum: ['write', 'read', 'refusal'] }).notNull(),
    siteId: uuid('site_id'),
    participantId: uuid('participant_id'),
    subjectKind: text('subject_kind'),
    subjectId: text('subject_id'),
    before: jsonb('before'),
    after: jsonb('after'),
    why: text('why'),
    requestId: text('request_id'),
    previousHash: text('previous_hash').notNull(),
    hash: text('hash').notNull(),
  },
  (table) => [
    primaryKey({ columns: [table.chain, table.sequence] }),
    index('audit_entry_site').on(table.siteId, table.at.desc()),
    index('audit_entry_participant').on(table.participantId, table.at.desc()),
  ],
);

/**
 * Once a day all heads that moved are signed together. Each anchor carries the hash of the one before, so that whoever kept any line of
 * the file outside the database can see a tail that was cut.
 */
export const auditAnchor = pgTable('audit_anchor', {
  number: integer('number').primaryKey(),
  at: instant('at').notNull(),
  /** One a day, in UTC. */
  day: date('day', { mode: 'string' }).notNull().unique(),
  previousHash: text('previous_hash').notNull(),
  hash: text('hash').notNull(),
  kid: text('kid').notNull(),
  /** Compact JWS over number, instant and hash. */
  token: text('token').notNull(),
});

export const auditAnchorHead = pgTable(
  'audit_anchor_head',
  {
    chain: text('chain').notNull(),
    sequence: bigint('sequence', { mode: 'number' }).notNull(),
    hash: text('hash').notNull(),
    anchor: integer('anchor')
      .notNull()
      .references(() => auditAnchor.number),
  },
  (table) => [primaryKey({ columns: [table.chain, table.sequence] }), index('audit_anchor_head_anchor').on(table.anchor)],
);

/** The record of every mail and page to be sent; the queue only wakes the sender. */
export const outbox = pgTable(
  'outbox',
  {
    id: id(),
    kind: text('kind').notNull(),
    /** Whom and what about, ids and codes only; words are made at sending. */
    facts: jsonb('facts').notNull(),
    toEmail: text('to_email').notNull(),
    language: text('language').notNull(),
    /** One mail for one matter. */
    key: text('key').notNull().unique(),
    /** A safety page goes before any reminder. */
    urgent: boolean('urgent').notNull(),
    createdAt: instant('created_at').notNull(),
    dueAt: instant('due_at').notNull(),
    /** Not sent after this instant: a stale nudge is dropped and recorded. */
    dropAt: instant('drop_at'),
    attempts: integer('attempts').notNull().default(0),
    lastError: text('last_error'),
    /** sent, dropped. */
    ...closing(),
  },
  (table) => [
    index('outbox_due')
      .on(table.urgent.desc(), table.dueAt)
      .where(sql`${table.closedAt} is null`),
  ],
);

/** Idempotency: the answer that a key got. */
export const keySeen = pgTable(
  'key_seen',
  {
    accountId: text('account_id').notNull(),
    key: text('key').notNull(),
    contract: text('contract').notNull(),
    bodyHash: text('body_hash').notNull(),
    status: integer('status').notNull(),
    answer: jsonb('answer').notNull(),
    createdAt: instant('created_at').notNull(),
  },
  (table) => [primaryKey({ columns: [table.accountId, table.key] }), index('key_seen_age').on(table.createdAt)],
);

/** Ed25519 keys that sign permits. The private part is sealed with the server's secret. */
export const signingKey = pgTable('signing_key', {
  kid: text('kid').primaryKey(),
  publicX: text('public_x').notNull(),
  sealedPrivate: text('sealed_private').notNull(),
  createdAt: instant('created_at').notNull(),
  ...closing(),
});

/** Seconds that the demo's clock is ahead; one row, id 1, only used with DEMO=1. */
export const demoClock = pgTable('demo_clock', {
  id: integer('id').primaryKey(),
  offsetSeconds: bigint('offset_seconds', { mode: 'number' }).notNull(),
});

/** Mails that the demo's catcher took, so that the mailbox page has them after a restart. */
export const demoMail = pgTable(
  'demo_mail',
  {
    id: id(),
    toEmail: text('to_email').notNull(),
    subject: text('subject').notNull(),
    text: text('text').notNull(),
    html: text('html').notNull(),
    sentAt: instant('sent_at').notNull(),
  },
  (table) => [index('demo_mail_sent').on(table.sentAt.desc())],
);

/** When each process that runs jobs last did, in real time: how health knows that jobs run. */
export const heartbeat = pgTable('heartbeat', {
  name: text('name').primaryKey(),
  at: instant('at').notNull(),
});

/** What the demo seed has done, so that a second start adds nothing. */
export const demoProgress = pgTable('demo_progress', {
  step: text('step').primaryKey(),
  facts: jsonb('facts').notNull(),
});
