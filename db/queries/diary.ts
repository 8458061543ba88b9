// Diary pages: one after a session, one the next day. Added, never changed. The past as the lockout rules read it. Decides nothing.

import { and, asc, desc, eq, inArray, lt, sql } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { diary, photo, session } from '@/db/schema/session';

export type DiaryKind = 'after' | 'next_day';

export interface NewDiary {
  id: string;
  sessionId: string;
  participantId: string;
  kind: DiaryKind;
  answers: unknown;
  headache: number;
  worstStrength: number | null;
  worstGrade: string | null;
  emergencyAdvice: boolean;
  writtenAt: string;
  accountId: string;
}

/** False when this page of the session is written already. */
export async function insertDiary(db: Db, row: NewDiary): Promise<boolean> {
  const made = await db.insert(diary).values(row).onConflictDoNothing().returning({ id: diary.id });
  return made.length > 0;
}

export interface DiaryRecord {
  id: string;
  sessionId: string;
  kind: DiaryKind;
  answers: unknown;
  emergencyAdvice: boolean;
  writtenAt: string;
}

/** Pages of any number of sessions. */
export async function listDiaries(db: Db, sessionIds: readonly string[]): Promise<DiaryRecord[]> {
  if (sessionIds.length === 0) return [];
  return db
    .select({
      id: diary.id,
      sessionId: diary.sessionId,
      kind: diary.kind,
      answers: diary.answers,
      emergencyAdvice: diary.emergencyAdvice,
      writtenAt: diary.writtenAt,
    })
    .from(diary)
    .where(inArray(diary.sessionId, [...sessionIds]))
    .orderBy(asc(diary.writtenAt), asc(diary.id));
}

export interface PhotoMark {
  id: string;
  sessionId: string;
  takenAt: string;
  width: number;
  height: number;
}

/** Photos of any number of sessions, without their bytes. */
export async function listPhotos(db: Db, sessionIds: readonly string[]): Promise<PhotoMark[]> {
  if (sessionIds.length === 0) return [];
  return db
    .select({
      id: photo.id,
      sessionId: photo.sessionId,
      takenAt: photo.createdAt,
      width: photo.width,
      height: photo.height,
    })
    .from(photo)
    .where(inArray(photo.sessionId, [...sessionIds]))
    .orderBy(asc(photo.createdAt), asc(photo.id));
}

/** Worst headache and grade of the sessions before one, old to new, at most so many; sessions without a diary are passed over. */
export async function listEarlierReports(
  db: Db,
  participantId: string,
  beforeStartedAt: string,
  limit: number,
): Promise<{ headache: number; worstGrade: string }[]> {
  const rows = await db
    .select({
      headache: sql<number>`max(${diary.headache})`,
      worstGrade: sql<string>`max(${diary.worstGrade}) filter (where ${diary.kind} = 'after')`,
    })
    .from(session)
    .innerJoin(diary, eq(diary.sessionId, session.id))
    .where(and(eq(session.participantId, participantId), lt(session.startedAt, beforeStartedAt)))
    .groupBy(session.id, session.startedAt)
    .orderBy(desc(session.startedAt))
    .limit(limit);
  return rows
    .map(({ headache, worstGrade }) => ({ headache: headache ?? 0, worstGrade: worstGrade ?? 'none' }))
    .reverse();
}
