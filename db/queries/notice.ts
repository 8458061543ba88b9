// Whom to tell what about a planned session, and which are due: for the jobs that mark, remind and nudge. Decides nothing.

import { and, asc, eq, isNotNull, isNull, lte, sql } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { account } from '@/db/schema/account';
import { plannedSession } from '@/db/schema/course';
import { caregiver, participant } from '@/db/schema/participant';

/** A session of the row has begun and its record is not whole: neither done nor missed yet. */
const isUnderWay = sql`exists (select 1 from session s where s.planned_session_id = ${plannedSession.id}
  and s.started_at is not null and s.closed_at is null)`;

/** Open rows whose window is over, oldest first. */
export async function listClosedWindows(db: Db, now: string, limit: number): Promise<string[]> {
  const rows = await db
    .select({ id: plannedSession.id })
    .from(plannedSession)
    .where(and(isNull(plannedSession.closedAt), lte(plannedSession.windowTo, now), sql`not ${isUnderWay}`))
    .orderBy(asc(plannedSession.windowTo), asc(plannedSession.id))
    .limit(limit);
  return rows.map((row) => row.id);
}

export async function findNextWindowEnd(db: Db): Promise<string | null> {
  const [row] = await db
    .select({ at: plannedSession.windowTo })
    .from(plannedSession)
    .where(and(isNull(plannedSession.closedAt), sql`not ${isUnderWay}`))
    .orderBy(asc(plannedSession.windowTo))
    .limit(1);
  return row?.at ?? null;
}

/** The key of the one reminder of a planned session. */
export function reminderKey(plannedSessionId: string): string {
  return `planned_reminder:${plannedSessionId}`;
}

/** Worth a reminder: the person can sign in, has read what is prescribed, is not held or paused, and was not reminded yet. */
const isRemindable = sql`not ${isUnderWay}
  and exists (select 1 from participant p join account a on a.id = p.account_id
    where p.id = ${plannedSession.participantId} and p.closed_at is null and a.state = 'active')
  and exists (select 1 from acknowledgement k where k.prescription_id = ${plannedSession.prescriptionId})
  and not exists (select 1 from lockout l where l.participant_id = ${plannedSession.participantId} and l.closed_at is null)
  and not exists (select 1 from course_pause u where u.course_id = ${plannedSession.courseId} and u.closed_at is null)
  and not exists (select 1 from outbox o where o.key = 'planned_reminder:' || ${plannedSession.id})`;

export async function listDueReminders(db: Db, now: string, limit: number): Promise<string[]> {
  const rows = await db
    .select({ id: plannedSession.id })
    .from(plannedSession)
    .where(
      and(
        isNull(plannedSession.closedAt),
        lte(plannedSession.windowFrom, now),
        sql`${plannedSession.windowTo} > ${now}`,
        isRemindable,
      ),
    )
    .orderBy(asc(plannedSession.windowFrom), asc(plannedSession.id))
    .limit(limit);
  return rows.map((row) => row.id);
}

export async function findNextReminder(db: Db): Promise<string | null> {
  const [row] = await db
    .select({ at: plannedSession.windowFrom })
    .from(plannedSession)
    .where(and(isNull(plannedSession.closedAt), isRemindable))
    .orderBy(asc(plannedSession.windowFrom))
    .limit(1);
  return row?.at ?? null;
}

/** Whether a planned session is still worth a reminder, read afresh. */
export async function findReminder(db: Db, plannedSessionId: string, now: string) {
  const [row] = await db
    .select({ id: plannedSession.id, participantId: plannedSession.participantId, windowTo: plannedSession.windowTo })
    .from(plannedSession)
    .where(
      and(
        eq(plannedSession.id, plannedSessionId),
        isNull(plannedSession.closedAt),
        lte(plannedSession.windowFrom, now),
        sql`${plannedSession.windowTo} > ${now}`,
        isRemindable,
      ),
    )
    .limit(1);
  return row ?? null;
}

export interface PersonToTell {
  participantId: string;
  siteId: string;
  name: string;
  email: string;
  language: string;
  zone: string;
  /** False: invited, withdrawn or closed; such a person gets no notice. */
  canSignIn: boolean;
}

export async function findPersonToTell(db: Db, participantId: string): Promise<PersonToTell | null> {
  const [row] = await db
    .select({
      participantId: participant.id,
      siteId: participant.siteId,
      name: participant.name,
      email: participant.email,
      language: participant.language,
      zone: participant.zone,
      canSignIn: sql<boolean>`${participant.closedAt} is null and coalesce(${account.state} = 'active', false)`,
    })
    .from(participant)
    .leftJoin(account, eq(account.id, participant.accountId))
    .where(eq(participant.id, participantId))
    .limit(1);
  return row ?? null;
}

/** Caregivers who agreed, whom the person lets know about missed sessions, and who have not stopped these mails. */
export async function listMissedMailCaregivers(db: Db, participantId: string) {
  return db
    .select({ id: caregiver.id, name: caregiver.name, email: caregiver.email, language: account.language })
    .from(caregiver)
    .innerJoin(account, and(eq(account.id, caregiver.accountId), eq(account.state, 'active')))
    .where(
      and(
        eq(caregiver.participantId, participantId),
        isNull(caregiver.closedAt),
        isNotNull(caregiver.acceptedAt),
        isNull(caregiver.mailsStoppedAt),
        sql`(select h.missed_mail from caregiver_share h where h.caregiver_id = ${caregiver.id}
          order by h.created_at desc, h.id desc limit 1)`,
      ),
    )
    .orderBy(asc(caregiver.createdAt), asc(caregiver.id));
}

/** True when something was begun in a planned session, whatever became of it. */
export async function wasTried(db: Db, plannedSessionId: string): Promise<boolean> {
  const { rows } = await db.execute<{ tried: boolean }>(
    sql`select exists (select 1 from session s where s.planned_session_id = ${plannedSessionId}
      and s.started_at is not null and s.closed_why is distinct from 'unused') as tried`,
  );
  return rows[0]?.tried === true;
}
