// Caregivers: invited and removed by the person, with what each may see (the newest row of shares counts) and the caregiver's own code.

import { and, asc, desc, eq, inArray, isNotNull, isNull, sql } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { course, prescription } from '@/db/schema/course';
import { caregiver, caregiverCode, caregiverShare, participant } from '@/db/schema/participant';
import { diary, session } from '@/db/schema/session';
import { site } from '@/db/schema/site';

export interface Shares {
  adherence: boolean;
  diary: boolean;
  missedMail: boolean;
}

export interface CaregiverRecord {
  id: string;
  participantId: string;
  name: string;
  email: string;
  accountId: string | null;
  createdAt: string;
  mailsStoppedAt: string | null;
  closedAt: string | null;
  hasCode: boolean;
  shares: Shares;
}

const newestShare = sql`(select newest.id from ${caregiverShare} newest where newest.caregiver_id = ${caregiver.id}
  order by newest.created_at desc, newest.id desc limit 1)`;

function selectCaregivers(db: Db) {
  return db
    .select({
      id: caregiver.id,
      participantId: caregiver.participantId,
      name: caregiver.name,
      email: caregiver.email,
      accountId: caregiver.accountId,
      createdAt: caregiver.createdAt,
      mailsStoppedAt: caregiver.mailsStoppedAt,
      closedAt: caregiver.closedAt,
      hasCode: sql<boolean>`exists (select 1 from ${caregiverCode} code where code.account_id = ${caregiver.accountId})`,
      shares: {
        adherence: caregiverShare.adherence,
        diary: caregiverShare.diary,
        missedMail: caregiverShare.missedMail,
      },
    })
    .from(caregiver)
    .innerJoin(caregiverShare, eq(caregiverShare.id, newestShare));
}

/** A person's caregivers who are not removed, oldest first. */
export async function listCaregivers(
  db: Db,
  participantId: string,
  page: { limit: number; after: { createdAt: string; id: string } | null },
): Promise<CaregiverRecord[]> {
  const after =
    page.after && sql`(${caregiver.createdAt}, ${caregiver.id}) > (${page.after.createdAt}, ${page.after.id}::uuid)`;
  return selectCaregivers(db)
    .where(and(eq(caregiver.participantId, participantId), isNull(caregiver.closedAt), after ?? undefined))
    .orderBy(asc(caregiver.createdAt), asc(caregiver.id))
    .limit(page.limit);
}

/** One of a person's own caregivers, removed ones too; null for anybody else's. */
export async function findCaregiver(
  db: Db,
  participantId: string,
  caregiverId: string,
): Promise<CaregiverRecord | null> {
  const [row] = await selectCaregivers(db).where(
    and(eq(caregiver.id, caregiverId), eq(caregiver.participantId, participantId)),
  );
  return row ?? null;
}

export async function countCaregivers(db: Db, participantId: string): Promise<number> {
  const [row] = await db
    .select({ count: sql<number>`count(*)::int` })
    .from(caregiver)
    .where(and(eq(caregiver.participantId, participantId), isNull(caregiver.closedAt)));
  return row?.count ?? 0;
}

/** False when this person has invited the address already. */
export async function insertCaregiver(
  db: Db,
  row: { id: string; participantId: string; name: string; email: string; createdAt: string; stopTokenHash: string },
): Promise<boolean> {
  const made = await db.insert(caregiver).values(row).onConflictDoNothing().returning({ id: caregiver.id });
  return made.length > 0;
}

export async function insertShares(
  db: Db,
  row: Shares & { id: string; caregiverId: string; createdAt: string },
): Promise<void> {
  await db.insert(caregiverShare).values(row);
}

export async function closeCaregiver(db: Db, caregiverId: string, at: string): Promise<void> {
  await db
    .update(caregiver)
    .set({ closedAt: at, closedWhy: 'removed' })
    .where(and(eq(caregiver.id, caregiverId), isNull(caregiver.closedAt)));
}

/** A person who shares something, as far as every caregiver may know. */
export interface SharedPersonRecord {
  caregiverId: string;
  participantId: string;
  name: string;
  zone: string;
  shares: Shares;
  courseId: string | null;
  isAssisted: boolean;
  siteName: string;
  sitePhone: string;
  emergencyNumber: string;
}

/** People who invited this account and have not removed it nor withdrawn, in the order of joining. */
export async function listSharedPeople(
  db: Db,
  accountId: string,
  page: { limit: number; after: { acceptedAt: string; id: string } | null },
): Promise<(SharedPersonRecord & { acceptedAt: string })[]> {
  const after =
    page.after && sql`(${caregiver.acceptedAt}, ${caregiver.id}) > (${page.after.acceptedAt}, ${page.after.id}::uuid)`;
  return db
    .select({
      caregiverId: caregiver.id,
      acceptedAt: sql<string>`${caregiver.acceptedAt}`.mapWith(caregiver.acceptedAt),
      participantId: participant.id,
      name: participant.name,
      zone: participant.zone,
      shares: {
        adherence: caregiverShare.adherence,
        diary: caregiverShare.diary,
        missedMail: caregiverShare.missedMail,
      },
      courseId: sql<
        string | null
      >`(select latest.id from ${course} latest where latest.participant_id = ${participant.id}
        order by latest.closed_at is null desc, latest.created_at desc limit 1)`,
      isAssisted: sql<boolean>`exists (select 1 from ${prescription} given where given.participant_id = ${participant.id}
        and given.signed_at is not null and given.closed_at is null and given.assisted)`,
      siteName: site.name,
      sitePhone: site.phone,
      emergencyNumber: site.emergencyNumber,
    })
    .from(caregiver)
    .innerJoin(caregiverShare, eq(caregiverShare.id, newestShare))
    .innerJoin(participant, and(eq(participant.id, caregiver.participantId), isNull(participant.closedAt)))
    .innerJoin(site, eq(site.id, participant.siteId))
    .where(
      and(
        eq(caregiver.accountId, accountId),
        isNotNull(caregiver.acceptedAt),
        isNull(caregiver.closedAt),
        after ?? undefined,
      ),
    )
    .orderBy(asc(caregiver.acceptedAt), asc(caregiver.id))
    .limit(page.limit);
}

/** What this account may see of a person; null without a link, or when the person has withdrawn. */
export async function findSharesOf(db: Db, accountId: string, participantId: string): Promise<Shares | null> {
  const [row] = await db
    .select({
      adherence: caregiverShare.adherence,
      diary: caregiverShare.diary,
      missedMail: caregiverShare.missedMail,
    })
    .from(caregiver)
    .innerJoin(caregiverShare, eq(caregiverShare.id, newestShare))
    .innerJoin(participant, and(eq(participant.id, caregiver.participantId), isNull(participant.closedAt)))
    .where(
      and(eq(caregiver.accountId, accountId), eq(caregiver.participantId, participantId), isNull(caregiver.closedAt)),
    )
    .orderBy(desc(caregiver.createdAt))
    .limit(1);
  return row ?? null;
}

export interface SharedDiaryRecord {
  sessionId: string;
  plannedSessionId: string;
  courseId: string;
  startedAt: string;
  /** As stored; the caller reads what a caregiver may see. */
  answers: unknown;
  headache: number | null;
}

/** Diaries written after a session, newest session first. No dose leaves here. */
export async function listSharedDiary(
  db: Db,
  participantId: string,
  page: { limit: number; after: { startedAt: string; id: string } | null },
): Promise<SharedDiaryRecord[]> {
  const after =
    page.after && sql`(${session.startedAt}, ${session.id}) < (${page.after.startedAt}, ${page.after.id}::uuid)`;
  return db
    .select({
      sessionId: session.id,
      plannedSessionId: session.plannedSessionId,
      courseId: session.courseId,
      startedAt: sql<string>`${session.startedAt}`.mapWith(session.startedAt),
      answers: diary.answers,
      headache: diary.headache,
    })
    .from(session)
    .innerJoin(diary, and(eq(diary.sessionId, session.id), eq(diary.kind, 'after')))
    .where(and(eq(session.participantId, participantId), isNotNull(session.startedAt), after ?? undefined))
    .orderBy(desc(session.startedAt), desc(session.id))
    .limit(page.limit);
}

export async function insertCaregiverCode(
  db: Db,
  row: { id: string; accountId: string; codeHash: string; createdAt: string },
): Promise<void> {
  await db.insert(caregiverCode).values(row);
}

export interface HelperCode {
  caregiverId: string;
  accountId: string;
  name: string;
  codeHash: string;
}

/** The newest code of each caregiver whom this person has invited and not removed. */
export async function listHelperCodes(db: Db, participantId: string): Promise<HelperCode[]> {
  const helpers = await db
    .select({
      caregiverId: caregiver.id,
      accountId: sql<string>`${caregiver.accountId}`,
      name: caregiver.name,
    })
    .from(caregiver)
    .where(and(eq(caregiver.participantId, participantId), isNotNull(caregiver.accountId), isNull(caregiver.closedAt)));
  if (helpers.length === 0) return [];
  const codes = await db
    .selectDistinctOn([caregiverCode.accountId], {
      accountId: caregiverCode.accountId,
      codeHash: caregiverCode.codeHash,
    })
    .from(caregiverCode)
    .where(
      inArray(
        caregiverCode.accountId,
        helpers.map(({ accountId }) => accountId),
      ),
    )
    .orderBy(caregiverCode.accountId, desc(caregiverCode.createdAt), desc(caregiverCode.id));
  const hashOf = new Map(codes.map(({ accountId, codeHash }) => [accountId, codeHash]));
  return helpers.flatMap((helper) => {
    const codeHash = hashOf.get(helper.accountId);
    return codeHash === undefined ? [] : [{ ...helper, codeHash }];
  });
}
