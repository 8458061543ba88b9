// Everything that is kept about one person, table by table, for the person's own copy (GDPR Art. 15 and 20). A test holds this list against
// the tables: one that names a participant and is missing here fails it.

import { asc, eq, inArray, type SQL } from 'drizzle-orm';
import type { PgColumn, PgTable } from 'drizzle-orm/pg-core';
import type { Db } from '@/db/client';
import { account } from '@/db/schema/account';
import { acknowledgement, course, coursePause, plannedSession, prescription } from '@/db/schema/course';
import { deviceAssignment, supply } from '@/db/schema/device';
import { auditEntry } from '@/db/schema/house';
import {
  caregiver,
  caregiverShare,
  consent,
  message,
  participant,
  screening,
  training,
  watchedSession,
} from '@/db/schema/participant';
import {
  diary,
  lockout,
  permit,
  photo,
  precheck,
  review,
  session,
  sessionEvent,
  worklistItem,
} from '@/db/schema/session';

export interface OwnTable {
  name: string;
  table: PgTable;
  /** Rows of this person. */
  where: (db: Db, participantId: string) => SQL;
  orderBy: PgColumn;
  /** Kept back: it opens a door and tells the person nothing. */
  without?: readonly string[];
}

function own(
  name: string,
  table: PgTable,
  participantId: PgColumn,
  orderBy: PgColumn,
  without: readonly string[] = [],
): OwnTable {
  return { name, table, where: (_db, id) => eq(participantId, id), orderBy, without };
}

export const ownTables: readonly OwnTable[] = [
  own('participant', participant, participant.id, participant.createdAt),
  {
    name: 'account',
    table: account,
    where: (db, id) =>
      inArray(account.id, db.select({ id: participant.accountId }).from(participant).where(eq(participant.id, id))),
    orderBy: account.createdAt,
  },
  own('consent', consent, consent.participantId, consent.createdAt),
  own('screening', screening, screening.participantId, screening.createdAt),
  own('training', training, training.participantId, training.createdAt),
  own('watched_session', watchedSession, watchedSession.participantId, watchedSession.createdAt),
  own('device_assignment', deviceAssignment, deviceAssignment.participantId, deviceAssignment.createdAt),
  own('supply', supply, supply.participantId, supply.createdAt),
  own('course', course, course.participantId, course.createdAt),
  {
    name: 'course_pause',
    table: coursePause,
    where: (db, id) =>
      inArray(coursePause.courseId, db.select({ id: course.id }).from(course).where(eq(course.participantId, id))),
    orderBy: coursePause.createdAt,
  },
  own('prescription', prescription, prescription.participantId, prescription.createdAt),
  own('acknowledgement', acknowledgement, acknowledgement.participantId, acknowledgement.createdAt),
  own('planned_session', plannedSession, plannedSession.participantId, plannedSession.windowFrom),
  own('precheck', precheck, precheck.participantId, precheck.answeredAt),
  // A permit's token makes a device run; its dose and times stand beside it.
  own('permit', permit, permit.participantId, permit.issuedAt, ['token', 'key']),
  own('session', session, session.participantId, session.createdAt),
  {
    name: 'session_event',
    table: sessionEvent,
    where: (db, id) =>
      inArray(sessionEvent.sessionId, db.select({ id: session.id }).from(session).where(eq(session.participantId, id))),
    orderBy: sessionEvent.receivedAt,
  },
  own('diary', diary, diary.participantId, diary.writtenAt),
  own('photo', photo, photo.participantId, photo.createdAt),
  own('lockout', lockout, lockout.participantId, lockout.openedAt),
  own('worklist_item', worklistItem, worklistItem.participantId, worklistItem.openedAt),
  own('review', review, review.participantId, review.createdAt),
  own('message', message, message.participantId, message.createdAt),
  own('caregiver', caregiver, caregiver.participantId, caregiver.createdAt, ['stopTokenHash']),
  {
    name: 'caregiver_share',
    table: caregiverShare,
    where: (db, id) =>
      inArray(
        caregiverShare.caregiverId,
        db.select({ id: caregiver.id }).from(caregiver).where(eq(caregiver.participantId, id)),
      ),
    orderBy: caregiverShare.createdAt,
  },
  own('audit_entry', auditEntry, auditEntry.participantId, auditEntry.at),
];

/** Bytes as base64, so that all of it is JSON. */
function plain(value: unknown): unknown {
  return value instanceof Uint8Array ? Buffer.from(value).toString('base64') : value;
}

/** All rows of a person by table, oldest first. */
export async function readOwnRecord(db: Db, participantId: string): Promise<Record<string, unknown[]>> {
  const record: Record<string, unknown[]> = {};
  for (const { name, table, where, orderBy, without = [] } of ownTables) {
    const rows = await db.select().from(table).where(where(db, participantId)).orderBy(asc(orderBy));
    record[name] = rows.map((row) =>
      Object.fromEntries(
        Object.entries(row)
          .filter(([column]) => !without.includes(column))
          .map(([column, value]) => [column, plain(value)]),
      ),
    );
  }
  return record;
}
