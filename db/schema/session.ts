// Pre-checks, permits, sessions with their events, diaries, photos, lockouts, reviews, the worklist.

import { sql } from 'drizzle-orm';
import { bigint, boolean, check, index, integer, jsonb, pgTable, primaryKey, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import { ceilings } from '@/shared/rules/ceilings';
import { bytes, closing, id, instant, oneOf } from './columns';
import { course, plannedSession, prescription } from './course';
import { device } from './device';
import { participant } from './participant';

const person = () =>
  uuid('participant_id')
    .notNull()
    .references(() => participant.id);

export const precheck = pgTable(
  'precheck',
  {
    id: id(),
    participantId: person(),
    courseId: uuid('course_id')
      .notNull()
      .references(() => course.id),
    accountId: text('account_id').notNull(),
    answers: jsonb('answers').notNull(),
    language: text('language').notNull(),
    complete: boolean('complete').notNull(),
    open: jsonb('open').notNull(),
    outcome: text('outcome'),
    findings: jsonb('findings').notNull(),
    emergencyAdvice: boolean('emergency_advice').notNull(),
    helperPresent: boolean('helper_present').notNull(),
    helperAccountId: text('helper_account_id'),
    answeredAt: instant('answered_at').notNull(),
  },
  (table) => [index('precheck_newest').on(table.participantId, table.answeredAt.desc())],
);

const microampCeiling = sql.raw(String(Math.round(ceilings.currentMilliamp.value * 1000)));
const microcoulombCeiling = sql.raw(String(Math.round(ceilings.chargeCoulomb.value * 1_000_000)));
const msCeiling = sql.raw(String(Math.round(ceilings.minutes.value * 60_000)));

/** The single-use authorisation. Closed once: used, expired, or void_<why>. */
export const permit = pgTable(
  'permit',
  {
    id: id(),
    participantId: person(),
    courseId: uuid('course_id')
      .notNull()
      .references(() => course.id),
    deviceId: uuid('device_id')
      .notNull()
      .references(() => device.id),
    prescriptionId: uuid('prescription_id')
      .notNull()
      .references(() => prescription.id),
    precheckId: uuid('precheck_id')
      .notNull()
      .references(() => precheck.id),
    key: text('key').notNull(),
    counter: integer('counter').notNull(),
    intensityUa: integer('intensity_ua').notNull(),
    chargeUc: bigint('charge_uc', { mode: 'number' }).notNull(),
    onMs: integer('on_ms').notNull(),
    token: text('token').notNull(),
    issuedAt: instant('issued_at').notNull(),
    expiresAt: instant('expires_at').notNull(),
    expiresBy: text('expires_by').notNull(),
    ...closing(),
  },
  (table) => [
    // The last guard: whatever the number of processes, one live permit a participant.
    uniqueIndex('permit_one_live').on(table.participantId).where(sql`${table.closedAt} is null`),
    uniqueIndex('permit_precheck_once').on(table.precheckId),
    uniqueIndex('permit_counter').on(table.deviceId, table.counter),
    uniqueIndex('permit_key').on(table.participantId, table.key),
    index('permit_newest').on(table.participantId, table.issuedAt.desc()),
    index('permit_expiry').on(table.expiresAt).where(sql`${table.closedAt} is null`),
    check('permit_intensity_ceiling', sql`${table.intensityUa} > 0 and ${table.intensityUa} <= ${microampCeiling}`),
    check('permit_charge_ceiling', sql`${table.chargeUc} > 0 and ${table.chargeUc} <= ${microcoulombCeiling}`),
    check('permit_minutes_ceiling', sql`${table.onMs} > 0 and ${table.onMs} <= ${msCeiling}`),
  ],
);

/**
 * One session a permit, made with it: from then on the whole dose is reserved. `started_at` is set once by the first event that
 * tells of current; the closing columns and the delivered amounts once, by the whole final record.
 */
export const session = pgTable(
  'session',
  {
    id: id(),
    permitId: uuid('permit_id')
      .notNull()
      .unique()
      .references(() => permit.id),
    participantId: person(),
    courseId: uuid('course_id')
      .notNull()
      .references(() => course.id),
    plannedSessionId: uuid('planned_session_id')
      .notNull()
      .references(() => plannedSession.id),
    createdAt: instant('created_at').notNull(),
    startedAt: instant('started_at'),
    endedAt: instant('ended_at'),
    endReason: text('end_reason'),
    deliveredUc: bigint('delivered_uc', { mode: 'number' }),
    upperUc: bigint('upper_uc', { mode: 'number' }),
    onMs: integer('on_ms'),
    fractionPermille: integer('fraction_permille'),
    completeness: text('completeness', { enum: ['complete', 'partial', 'not_delivered'] }),
    summary: jsonb('summary'),
    /** closed_why: recorded, unused (a read-out shows that it never ran). */
    ...closing(),
  },
  (table) => [
    index('session_participant').on(table.participantId, table.createdAt.desc()),
    index('session_course').on(table.courseId, table.createdAt),
    uniqueIndex('session_one_open').on(table.participantId).where(sql`${table.startedAt} is not null and ${table.closedAt} is null`),
  ],
);

export const sessionEvent = pgTable(
  'session_event',
  {
    sessionId: uuid('session_id')
      .notNull()
      .references(() => session.id),
    id: uuid('id').notNull(),
    sequence: integer('sequence').notNull(),
    atMs: integer('at_ms').notNull(),
    kind: text('kind').notNull(),
    body: jsonb('body').notNull(),
    contentHash: text('content_hash').notNull(),
    receivedAt: instant('received_at').notNull(),
  },
  (table) => [primaryKey({ columns: [table.sessionId, table.id] }), uniqueIndex('session_event_sequence').on(table.sessionId, table.sequence)],
);

export const diary = pgTable(
  'diary',
  {
    id: id(),
    sessionId: uuid('session_id')
      .notNull()
      .references(() => session.id),
    participantId: person(),
    kind: text('kind', { enum: ['after', 'next_day'] }).notNull(),
    answers: jsonb('answers').notNull(),
    /** Worst headache of this page, for the rules over several sessions. */
    headache: integer('headache'),
    worstStrength: integer('worst_strength'),
    worstGrade: text('worst_grade'),
    emergencyAdvice: boolean('emergency_advice').notNull(),
    writtenAt: instant('written_at').notNull(),
    accountId: text('account_id').notNull(),
  },
  (table) => [uniqueIndex('diary_once').on(table.sessionId, table.kind), index('diary_participant').on(table.participantId, table.writtenAt.desc())],
);

export const photo = pgTable(
  'photo',
  {
    id: id(),
    sessionId: uuid('session_id')
      .notNull()
      .references(() => session.id),
    participantId: person(),
    jpeg: bytes('jpeg').notNull(),
    width: integer('width').notNull(),
    height: integer('height').notNull(),
    createdAt: instant('created_at').notNull(),
    accountId: text('account_id').notNull(),
  },
  (table) => [index('photo_session').on(table.sessionId)],
);

export const lockout = pgTable(
  'lockout',
  {
    id: id(),
    participantId: person(),
    level: text('level', { enum: ['safety', 'review', 'device', 'hold'] }).notNull(),
    code: text('code').notNull(),
    source: text('source', { enum: ['precheck', 'diary', 'session', 'staff'] }).notNull(),
    sourceId: uuid('source_id'),
    openedAt: instant('opened_at').notNull(),
    /** A hold is over at this instant by itself; no other level has one. */
    until: instant('until'),
    ...closing(),
  },
  (table) => [
    index('lockout_open').on(table.participantId).where(sql`${table.closedAt} is null`),
    index('lockout_participant').on(table.participantId, table.openedAt.desc()),
    check('lockout_level', oneOf('level', ['safety', 'review', 'device', 'hold'])),
    check('lockout_only_holds_end_by_time', sql`(${table.level} = 'hold') = (${table.until} is not null)`),
  ],
);

export const worklistItem = pgTable(
  'worklist_item',
  {
    id: id(),
    siteId: uuid('site_id').notNull(),
    participantId: person(),
    level: text('level', { enum: ['safety', 'review', 'look', 'device', 'flag', 'due'] }).notNull(),
    why: text('why').notNull(),
    facts: jsonb('facts').notNull(),
    /** One open row for one matter: a code with what it is about. */
    matter: text('matter').notNull(),
    sessionId: uuid('session_id'),
    prescriptionId: uuid('prescription_id'),
    lockoutId: uuid('lockout_id'),
    openedAt: instant('opened_at').notNull(),
    /** Set while a page waits for somebody: when the next contact is told, and how far down the list it is. */
    escalateAt: instant('escalate_at'),
    escalation: integer('escalation').notNull().default(0),
    ...closing(),
  },
  (table) => [
    uniqueIndex('worklist_item_matter').on(table.participantId, table.matter).where(sql`${table.closedAt} is null`),
    index('worklist_item_site').on(table.siteId, table.openedAt.desc()).where(sql`${table.closedAt} is null`),
    index('worklist_item_escalation').on(table.escalateAt).where(sql`${table.closedAt} is null and ${table.escalateAt} is not null`),
  ],
);

/** Who has a row: the newest counts; null account = given back. */
export const worklistClaim = pgTable(
  'worklist_claim',
  {
    id: id(),
    itemId: uuid('item_id')
      .notNull()
      .references(() => worklistItem.id),
    accountId: text('account_id'),
    by: text('by').notNull(),
    createdAt: instant('created_at').notNull(),
  },
  (table) => [index('worklist_claim_newest').on(table.itemId, table.createdAt.desc())],
);

export const review = pgTable(
  'review',
  {
    id: id(),
    itemId: uuid('item_id')
      .notNull()
      .references(() => worklistItem.id),
    participantId: person(),
    finding: text('finding').notNull(),
    decision: text('decision', { enum: ['lift', 'keep', 'noted', 'done'] }).notNull(),
    reason: text('reason').notNull(),
    grading: jsonb('grading'),
    accountId: text('account_id').notNull(),
    name: text('name').notNull(),
    contentHash: text('content_hash').notNull(),
    createdAt: instant('created_at').notNull(),
  },
  (table) => [index('review_participant').on(table.participantId, table.createdAt.desc(), table.id)],
);
