// People who can sign in. The auth_* tables are the sign-in library's; ours add role, state, sites, invitations.

import { sql } from 'drizzle-orm';
import { boolean, check, index, integer, pgTable, primaryKey, text, timestamp, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import { roles } from '@/shared/values/roles';
import { closing, id, instant, oneOf } from './columns';
import { site } from './site';

export const authUser = pgTable('auth_user', {
  id: text('id').primaryKey(),
  name: text('name').notNull(),
  email: text('email').notNull().unique(),
  emailVerified: boolean('email_verified').notNull().default(false),
  image: text('image'),
  twoFactorEnabled: boolean('two_factor_enabled').notNull().default(false),
  createdAt: timestamp('created_at', { withTimezone: true }).notNull().defaultNow(),
  updatedAt: timestamp('updated_at', { withTimezone: true }).notNull().defaultNow(),
});

export const authSession = pgTable(
  'auth_session',
  {
    id: text('id').primaryKey(),
    token: text('token').notNull().unique(),
    userId: text('user_id')
      .notNull()
      .references(() => authUser.id, { onDelete: 'cascade' }),
    expiresAt: timestamp('expires_at', { withTimezone: true }).notNull(),
    ipAddress: text('ip_address'),
    userAgent: text('user_agent'),
    createdAt: timestamp('created_at', { withTimezone: true }).notNull().defaultNow(),
    updatedAt: timestamp('updated_at', { withTimezone: true }).notNull().defaultNow(),
  },
  (table) => [index('auth_session_user').on(table.userId)],
);

export const authCredential = pgTable(
  'auth_credential',
  {
    id: text('id').primaryKey(),
    accountId: text('account_id').notNull(),
    providerId: text('provider_id').notNull(),
    userId: text('user_id')
      .notNull()
      .references(() => authUser.id, { onDelete: 'cascade' }),
    accessToken: text('access_token'),
    refreshToken: text('refresh_token'),
    idToken: text('id_token'),
    accessTokenExpiresAt: timestamp('access_token_expires_at', { withTimezone: true }),
    refreshTokenExpiresAt: timestamp('refresh_token_expires_at', { withTimezone: true }),
    scope: text('scope'),
    password: text('password'),
    createdAt: timestamp('created_at', { withTimezone: true }).notNull().defaultNow(),
    updatedAt: timestamp('updated_at', { withTimezone: true }).notNull().defaultNow(),
  },
  (table) => [index('auth_credential_user').on(table.userId)],
);

export const authVerification = pgTable(
  'auth_verification',
  {
    id: text('id').primaryKey(),
    identifier: text('identifier').notNull(),
    value: text('value').notNull(),
    expiresAt: timestamp('expires_at', { withTimezone: true }).notNull(),
    createdAt: timestamp('created_at', { withTimezone: true }).notNull().defaultNow(),
    updatedAt: timestamp('updated_at', { withTimezone: true }).notNull().defaultNow(),
  },
  (table) => [index('auth_verification_identifier').on(table.identifier)],
);

export const authTwoFactor = pgTable(
  'auth_two_factor',
  {
    id: text('id').primaryKey(),
    secret: text('secret').notNull(),
    backupCodes: text('backup_codes').notNull(),
    userId: text('user_id')
      .notNull()
      .references(() => authUser.id, { onDelete: 'cascade' }),
    verified: boolean('verified').notNull().default(true),
    failedVerificationCount: integer('failed_verification_count').notNull().default(0),
    lockedUntil: timestamp('locked_until', { withTimezone: true }),
  },
  (table) => [index('auth_two_factor_user').on(table.userId)],
);

/** One role a person; `state` is the only thing that changes, by an administrator or by withdrawal. */
export const account = pgTable(
  'account',
  {
    id: text('id')
      .primaryKey()
      .references(() => authUser.id),
    role: text('role', { enum: roles }).notNull(),
    name: text('name').notNull(),
    email: text('email').notNull(),
    language: text('language').notNull().default('en'),
    state: text('state', { enum: ['active', 'suspended', 'closed'] }).notNull().default('active'),
    createdAt: instant('created_at').notNull(),
  },
  (table) => [
    uniqueIndex('account_email').on(sql`lower(${table.email})`),
    check('account_role', oneOf('role', roles)),
    check('account_state', oneOf('state', ['active', 'suspended', 'closed'])),
  ],
);

export const membership = pgTable(
  'membership',
  {
    accountId: text('account_id')
      .notNull()
      .references(() => account.id),
    siteId: uuid('site_id')
      .notNull()
      .references(() => site.id),
    createdAt: instant('created_at').notNull(),
  },
  (table) => [primaryKey({ columns: [table.accountId, table.siteId] }), index('membership_site').on(table.siteId)],
);

export const invitation = pgTable(
  'invitation',
  {
    id: id(),
    role: text('role', { enum: roles }).notNull(),
    email: text('email').notNull(),
    name: text('name').notNull(),
    siteId: uuid('site_id')
      .notNull()
      .references(() => site.id),
    /** The participant invited, or the caregiver's row; no foreign key, since it may name either. */
    subjectId: uuid('subject_id'),
    /** SHA-256 of the token in the mail; the token itself is kept nowhere but there. */
    tokenHash: text('token_hash').notNull().unique(),
    invitedBy: text('invited_by').notNull(),
    createdAt: instant('created_at').notNull(),
    expiresAt: instant('expires_at').notNull(),
    ...closing(),
  },
  (table) => [index('invitation_subject').on(table.subjectId), index('invitation_site').on(table.siteId, table.createdAt), index('invitation_email').on(table.email)],
);
