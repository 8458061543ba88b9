// Courses, prescriptions, their signatures, and the planned sessions that follow from a signed one.
// A signed prescription never changes. The published ceilings stand here as CHECK constraints too, from the same constants.

import { sql } from 'drizzle-orm';
import {
  bigint,
  boolean,
  check,
  date,
  index,
  integer,
  jsonb,
  pgTable,
  text,
  uniqueIndex,
  uuid,
} from 'drizzle-orm/pg-core';
import { ceilings } from '@/shared/rules/ceilings';
import { closing, id, instant, oneOf } from './columns';
import { participant } from './participant';
import { site } from './site';

export const course = pgTable(
  'course',
  {
    id: id(),
    participantId: uuid('participant_id')
      .notNull()
      .references(() => participant.id),
    siteId: uuid('site_id')
      .notNull()
      .references(() => site.id),
    createdAt: instant('created_at').notNull(),
    /** finished, withdrawn. */
    ...closing(),
  },
  (table) => [
    uniqueIndex('course_one_active')
      .on(table.participantId)
      .where(sql`${table.closedAt} is null`),
    index('course_participant').on(table.participantId, table.createdAt.desc()),
  ],
);

export const coursePause = pgTable(
  'course_pause',
  {
    id: id(),
    courseId: uuid('course_id')
      .notNull()
      .references(() => course.id),
    reason: text('reason').notNull(),
    by: text('by').notNull(),
    createdAt: instant('created_at').notNull(),
    ...closing(),
  },
  (table) => [
    uniqueIndex('course_pause_one_open')
      .on(table.courseId)
      .where(sql`${table.closedAt} is null`),
  ],
);

const microampCeiling = sql.raw(String(Math.round(ceilings.currentMilliamp.value * 1000)));
const msCeiling = sql.raw(String(Math.round(ceilings.minutes.value * 60_000)));
const microcoulombCeiling = sql.raw(String(Math.round(ceilings.chargeCoulomb.value * 1_000_000)));
const rampMsMin = sql.raw(String(Math.round(ceilings.leastRampSeconds.value * 1000)));
const rampMsMax = sql.raw(String(Math.round(ceilings.mostRampSeconds.value * 1000)));
const msADayCeiling = sql.raw(String(Math.round(ceilings.minutesPerDay.value * 60_000)));
const gapMsMin = sql.raw(String(Math.round(ceilings.leastGapHours.value * 3_600_000)));
// With the rules' relative tolerance: shares such as a third have no exact decimal.
const densityCeiling = sql.raw(`${ceilings.densityMilliampPerSquareCentimetre.value} * 1.000000001`);

export const prescription = pgTable(
  'prescription',
  {
    id: id(),
    courseId: uuid('course_id')
      .notNull()
      .references(() => course.id),
    participantId: uuid('participant_id')
      .notNull()
      .references(() => participant.id),
    waveform: text('waveform', { enum: ['tDCS'] }).notNull(),
    intensityUa: integer('intensity_ua').notNull(),
    rampUpMs: integer('ramp_up_ms').notNull(),
    holdMs: integer('hold_ms').notNull(),
    rampDownMs: integer('ramp_down_ms').notNull(),
    /** By the dose rule, rounded up to whole µC and ms. */
    chargeUc: bigint('charge_uc', { mode: 'number' }).notNull(),
    onMs: integer('on_ms').notNull(),
    electrodes: jsonb('electrodes').notNull(),
    startsOn: date('starts_on', { mode: 'string' }).notNull(),
    days: integer('days').array().notNull(),
    hoursFrom: text('hours_from').notNull(),
    hoursTo: text('hours_to').notNull(),
    sessionsTotal: integer('sessions_total').notNull(),
    minGapMs: bigint('min_gap_ms', { mode: 'number' }).notNull(),
    maxPerDay: integer('max_per_day').notNull(),
    maxPer7Days: integer('max_per_7_days').notNull(),
    expiresOn: date('expires_on', { mode: 'string' }).notNull(),
    expiresAt: instant('expires_at').notNull(),
    makeUpMissed: boolean('make_up_missed').notNull(),
    assisted: boolean('assisted').notNull(),
    tier: text('tier', { enum: ['accept', 'second_signature'] }).notNull(),
    reason: text('reason'),
    amendsId: uuid('amends_id'),
    contentHash: text('content_hash').notNull(),
    writtenBy: text('written_by').notNull(),
    createdAt: instant('created_at').notNull(),
    /** Null until the last needed signature; then fixed for ever. */
    version: integer('version'),
    signedAt: instant('signed_at'),
    /** superseded, discarded, course_ended. */
    ...closing(),
  },
  (table) => [
    uniqueIndex('prescription_version')
      .on(table.courseId, table.version)
      .where(sql`${table.version} is not null`),
    uniqueIndex('prescription_one_in_force')
      .on(table.courseId)
      .where(sql`${table.signedAt} is not null and ${table.closedAt} is null`),
    index('prescription_participant').on(table.participantId, table.createdAt.desc()),
    check(
      'prescription_intensity_ceiling',
      sql`${table.intensityUa} > 0 and ${table.intensityUa} <= ${microampCeiling}`,
    ),
    check('prescription_minutes_ceiling', sql`${table.onMs} > 0 and ${table.onMs} <= ${msCeiling}`),
    check('prescription_charge_ceiling', sql`${table.chargeUc} > 0 and ${table.chargeUc} <= ${microcoulombCeiling}`),
    check('prescription_ramp_up_bounds', sql`${table.rampUpMs} between ${rampMsMin} and ${rampMsMax}`),
    check('prescription_ramp_down_bounds', sql`${table.rampDownMs} between ${rampMsMin} and ${rampMsMax}`),
    check(
      'prescription_day_ceiling',
      sql`${table.maxPerDay} >= 1 and ${table.maxPerDay}::bigint * ${table.onMs} <= ${msADayCeiling}`,
    ),
    check('prescription_gap_floor', sql`${table.minGapMs} >= ${gapMsMin}`),
    // The function stands in migration 0002: a CHECK cannot look into a list by itself. Nothing readable is no density, and refused.
    check(
      'prescription_density_ceiling',
      sql`coalesce(worst_density(${table.intensityUa}, ${table.electrodes}) <= ${densityCeiling}, false)`,
    ),
    check('prescription_whole_time', sql`${table.onMs} = ${table.rampUpMs} + ${table.holdMs} + ${table.rampDownMs}`),
    // µA times ms are nC, and a ramp counts half: the amount that limits are judged by cannot be less than the curve gives.
    check(
      'prescription_whole_charge',
      sql`${table.waveform} <> 'tDCS' or ${table.chargeUc} * 2000 >= ${table.intensityUa}::bigint * (2 * ${table.holdMs}::bigint + ${table.rampUpMs} + ${table.rampDownMs})`,
    ),
    check('prescription_hold', sql`${table.holdMs} >= 0`),
    check('prescription_sessions', sql`${table.sessionsTotal} between 1 and 200`),
    check('prescription_signed_has_version', sql`(${table.signedAt} is null) = (${table.version} is null)`),
    check('prescription_waveform', oneOf('waveform', ['tDCS'])),
  ],
);

export const signature = pgTable(
  'signature',
  {
    id: id(),
    subjectKind: text('subject_kind', { enum: ['prescription', 'review', 'protocol'] }).notNull(),
    subjectId: uuid('subject_id').notNull(),
    accountId: text('account_id').notNull(),
    name: text('name').notNull(),
    role: text('role').notNull(),
    meaning: text('meaning', { enum: ['prescribed', 'second_signature', 'reviewed', 'graded', 'protocol'] }).notNull(),
    contentHash: text('content_hash').notNull(),
    createdAt: instant('created_at').notNull(),
    /** When the password was asked for again: within 5 minutes before the signature (OWASP ASVS 7.5.3 asks for it; the minutes are an own choice). */
    confirmedAt: instant('confirmed_at').notNull(),
  },
  (table) => [
    check(
      'signature_confirmed',
      sql`${table.confirmedAt} between ${table.createdAt} - interval '5 minutes' and ${table.createdAt}`,
    ),
    index('signature_subject').on(table.subjectId, table.createdAt),
    // One person in two roles is one signature; a review that grades carries two meanings of the same person.
    uniqueIndex('signature_once_a_person')
      .on(table.subjectId, table.accountId)
      .where(sql`${table.subjectKind} = 'prescription'`),
    uniqueIndex('signature_once_a_meaning').on(table.subjectId, table.meaning),
  ],
);

export const acknowledgement = pgTable(
  'acknowledgement',
  {
    prescriptionId: uuid('prescription_id')
      .primaryKey()
      .references(() => prescription.id),
    participantId: uuid('participant_id')
      .notNull()
      .references(() => participant.id),
    createdAt: instant('created_at').notNull(),
  },
  (table) => [index('acknowledgement_participant').on(table.participantId)],
);

/** One for each day and window that the schedule names. Closed once: done, missed, excused, cancelled, moved. */
export const plannedSession = pgTable(
  'planned_session',
  {
    id: id(),
    courseId: uuid('course_id')
      .notNull()
      .references(() => course.id),
    participantId: uuid('participant_id')
      .notNull()
      .references(() => participant.id),
    prescriptionId: uuid('prescription_id')
      .notNull()
      .references(() => prescription.id),
    windowFrom: instant('window_from').notNull(),
    windowTo: instant('window_to').notNull(),
    /** The row that this one takes the place of, when a session was moved or made up. */
    replacesId: uuid('replaces_id'),
    createdAt: instant('created_at').notNull(),
    ...closing(),
  },
  (table) => [
    index('planned_session_course').on(table.courseId, table.windowFrom),
    index('planned_session_due')
      .on(table.windowTo)
      .where(sql`${table.closedAt} is null`),
    check('planned_session_window', sql`${table.windowTo} > ${table.windowFrom}`),
    check(
      'planned_session_closed_why',
      sql.raw(`closed_why is null or closed_why in ('done', 'missed', 'excused', 'cancelled', 'moved')`),
    ),
  ],
);
