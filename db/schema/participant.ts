// Participants and what must stand before a first session. Append-only but for the closing columns and, once, the account.

import { boolean, check, date, index, jsonb, pgTable, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import { sql } from 'drizzle-orm';
import { account } from './account';
import { closing, id, instant, oneOf } from './columns';
import { site } from './site';

export const participant = pgTable(
  'participant',
  {
    id: id(),
    siteId: uuid('site_id')
      .notNull()
      .references(() => site.id),
    code: text('code').notNull().unique(),
    name: text('name').notNull(),
    email: text('email').notNull(),
    phone: text('phone').notNull(),
    bornOn: date('born_on', { mode: 'string' }).notNull(),
    zone: text('zone').notNull(),
    language: text('language').notNull(),
    emergencyName: text('emergency_name').notNull(),
    emergencyPhone: text('emergency_phone').notNull(),
    enrolledBy: text('enrolled_by').notNull(),
    createdAt: instant('created_at').notNull(),
    /** Null until the invitation is accepted. */
    accountId: text('account_id').references(() => account.id),
    /** Closed = withdrawn. */
    ...closing(),
  },
  (table) => [
    uniqueIndex('participant_account').on(table.accountId).where(sql`${table.accountId} is not null`),
    uniqueIndex('participant_email_open').on(sql`lower(${table.email})`).where(sql`${table.closedAt} is null`),
    index('participant_site_name').on(table.siteId, table.name, table.id),
    index('participant_site_code').on(table.siteId, table.code),
    index('participant_site_created').on(table.siteId, table.createdAt, table.id),
  ],
);

const person = () =>
  uuid('participant_id')
    .notNull()
    .references(() => participant.id);

export const consent = pgTable(
  'consent',
  {
    id: id(),
    participantId: person(),
    kind: text('kind', { enum: ['own', 'guardian', 'assent'] }).notNull(),
    documentVersion: text('document_version').notNull(),
    signedOn: date('signed_on', { mode: 'string' }).notNull(),
    answers: jsonb('answers').notNull(),
    recordedBy: text('recorded_by').notNull(),
    createdAt: instant('created_at').notNull(),
    /** Closed = withdrawn. */
    ...closing(),
  },
  (table) => [index('consent_participant').on(table.participantId, table.createdAt.desc()), check('consent_kind', oneOf('kind', ['own', 'guardian', 'assent']))],
);

export const screening = pgTable(
  'screening',
  {
    id: id(),
    participantId: person(),
    answers: jsonb('answers').notNull(),
    seizureHistory: boolean('seizure_history').notNull(),
    outcome: text('outcome', { enum: ['clear', 'excluded', 'incomplete'] }).notNull(),
    validUntil: instant('valid_until').notNull(),
    recordedBy: text('recorded_by').notNull(),
    createdAt: instant('created_at').notNull(),
  },
  (table) => [index('screening_participant').on(table.participantId, table.createdAt.desc())],
);

export const training = pgTable(
  'training',
  {
    id: id(),
    participantId: person(),
    skills: jsonb('skills').notNull(),
    capability: jsonb('capability').notNull(),
    helperName: text('helper_name'),
    remark: text('remark'),
    signedOff: boolean('signed_off').notNull(),
    validUntil: instant('valid_until'),
    recordedBy: text('recorded_by').notNull(),
    createdAt: instant('created_at').notNull(),
  },
  (table) => [index('training_participant').on(table.participantId, table.createdAt.desc())],
);

/** A session that somebody watched, or (`until`) somebody watching now. */
export const watchedSession = pgTable(
  'watched_session',
  {
    id: id(),
    participantId: person(),
    place: text('place', { enum: ['clinic', 'live_video'] }).notNull(),
    until: instant('until'),
    tolerated: text('tolerated'),
    remark: text('remark'),
    recordedBy: text('recorded_by').notNull(),
    createdAt: instant('created_at').notNull(),
  },
  (table) => [index('watched_session_participant').on(table.participantId, table.createdAt.desc())],
);

export const message = pgTable(
  'message',
  {
    id: id(),
    participantId: person(),
    accountId: text('account_id').notNull(),
    fromSite: boolean('from_site').notNull(),
    text: text('text').notNull(),
    createdAt: instant('created_at').notNull(),
  },
  (table) => [index('message_participant').on(table.participantId, table.createdAt.desc(), table.id)],
);

export const caregiver = pgTable(
  'caregiver',
  {
    id: id(),
    participantId: person(),
    name: text('name').notNull(),
    email: text('email').notNull(),
    /** Null until the invitation is accepted. */
    accountId: text('account_id').references(() => account.id),
    createdAt: instant('created_at').notNull(),
    acceptedAt: instant('accepted_at'),
    /** SHA-256 of the token in the "stop these mails" link. */
    stopTokenHash: text('stop_token_hash').notNull().unique(),
    mailsStoppedAt: instant('mails_stopped_at'),
    /** Closed = removed. */
    ...closing(),
  },
  (table) => [
    uniqueIndex('caregiver_open').on(table.participantId, sql`lower(${table.email})`).where(sql`${table.closedAt} is null`),
    index('caregiver_account').on(table.accountId),
  ],
);

/** What a caregiver may see, from this row on; the newest counts. */
export const caregiverShare = pgTable(
  'caregiver_share',
  {
    id: id(),
    caregiverId: uuid('caregiver_id')
      .notNull()
      .references(() => caregiver.id),
    adherence: boolean('adherence').notNull(),
    diary: boolean('diary').notNull(),
    missedMail: boolean('missed_mail').notNull(),
    createdAt: instant('created_at').notNull(),
  },
  (table) => [index('caregiver_share_newest').on(table.caregiverId, table.createdAt.desc())],
);

/** The caregiver's own six digits (scrypt); the newest counts. */
export const caregiverCode = pgTable(
  'caregiver_code',
  {
    id: id(),
    accountId: text('account_id')
      .notNull()
      .references(() => account.id),
    codeHash: text('code_hash').notNull(),
    createdAt: instant('created_at').notNull(),
  },
  (table) => [index('caregiver_code_newest').on(table.accountId, table.createdAt.desc())],
);
