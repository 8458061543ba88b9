// Training sign-offs and watched sessions, append-only; the newest sign-off counts, watched sessions are counted.

import { and, eq, isNull, sql } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { training, watchedSession } from '@/db/schema/participant';

export interface NewTraining {
  id: string;
  participantId: string;
  skills: Readonly<Record<string, boolean>>;
  capability: Readonly<Record<string, boolean>>;
  helperName: string | null;
  remark: string | null;
  signedOff: boolean;
  validUntil: string | null;
  recordedBy: string;
  createdAt: string;
}

export async function insertTraining(db: Db, row: NewTraining): Promise<void> {
  await db.insert(training).values(row);
}

export interface NewWatchedSession {
  id: string;
  participantId: string;
  place: 'clinic' | 'live_video';
  /** Set while somebody is watching now; such a row counts as no watched session. */
  until: string | null;
  tolerated: string | null;
  remark: string | null;
  recordedBy: string;
  createdAt: string;
}

export async function insertWatchedSession(db: Db, row: NewWatchedSession): Promise<void> {
  await db.insert(watchedSession).values(row);
}

export async function countWatchedSessions(db: Db, participantId: string): Promise<number> {
  const [row] = await db
    .select({ count: sql<number>`count(*)::int` })
    .from(watchedSession)
    .where(and(eq(watchedSession.participantId, participantId), isNull(watchedSession.until)));
  return row?.count ?? 0;
}
