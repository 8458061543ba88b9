// Reviews: the signed looks at rows of the worklist, and the lockout that a row is about. Added, never changed.

import { and, desc, eq, isNull, lt, or, sql, type SQL } from 'drizzle-orm';
import { z } from 'zod';
import type { Db } from '@/db/client';
import { isIntact, reviewHashOf } from '@/db/queries/content-hash';
import { signature } from '@/db/schema/course';
import { lockout, review, worklistItem } from '@/db/schema/session';

const storedGrading = z.object({
  severity: z.enum(['mild', 'moderate', 'severe']),
  serious: z.boolean(),
  causality: z.enum(['not_related', 'possible', 'probable', 'causal']),
  expected: z.boolean(),
});
export type StoredGrading = z.infer<typeof storedGrading>;

export interface ReviewRecord {
  id: string;
  at: string;
  by: string;
  why: string;
  finding: string;
  decision: 'lift' | 'keep' | 'noted' | 'done';
  reason: string;
  grading: StoredGrading | null;
  /** False: it is not what was signed. */
  isIntact: boolean;
}

export interface NewReview {
  id: string;
  itemId: string;
  participantId: string;
  finding: string;
  decision: ReviewRecord['decision'];
  reason: string;
  grading: StoredGrading | null;
  accountId: string;
  name: string;
  contentHash: string;
  createdAt: string;
}

export async function insertReview(db: Db, row: NewReview): Promise<void> {
  await db.insert(review).values(row);
}

/** A participant's reviews, newest first. */
export async function listReviews(
  db: Db,
  want: { participantId: string; limit: number; after: { at: string; id: string } | null },
): Promise<ReviewRecord[]> {
  const conditions: (SQL | undefined)[] = [eq(review.participantId, want.participantId)];
  if (want.after) {
    const { at, id } = want.after;
    conditions.push(or(lt(review.createdAt, at), and(eq(review.createdAt, at), lt(review.id, id))));
  }
  const rows = await db
    .select({
      id: review.id,
      at: review.createdAt,
      by: review.name,
      why: worklistItem.why,
      finding: review.finding,
      decision: review.decision,
      reason: review.reason,
      grading: review.grading,
      itemId: review.itemId,
      contentHash: review.contentHash,
      signed: sql<
        string[]
      >`coalesce((select array_agg(g.content_hash) from ${signature} g where g.subject_id = ${review.id}), '{}')`,
    })
    .from(review)
    .innerJoin(worklistItem, eq(worklistItem.id, review.itemId))
    .where(and(...conditions))
    .orderBy(desc(review.createdAt), desc(review.id))
    .limit(want.limit);
  return rows.map(({ itemId, contentHash, signed, ...row }) => {
    const grading = row.grading === null ? null : storedGrading.parse(row.grading);
    const computed = reviewHashOf({ ...row, itemId, grading });
    return { ...row, grading, isIntact: isIntact(true, computed, contentHash, signed) };
  });
}

export interface LockoutOfItem {
  id: string;
  level: 'safety' | 'review' | 'device' | 'hold';
  code: string;
}

/** The lockout that a row is about, if it is open and, for a hold, not over; locked until commit. */
export async function lockOpenLockout(db: Db, lockoutId: string, now: string): Promise<LockoutOfItem | null> {
  const [row] = await db
    .select({ id: lockout.id, level: lockout.level, code: lockout.code, until: lockout.until })
    .from(lockout)
    .where(and(eq(lockout.id, lockoutId), isNull(lockout.closedAt)))
    .for('update');
  if (!row || (row.until !== null && row.until <= now)) return null;
  return { id: row.id, level: row.level, code: row.code };
}
