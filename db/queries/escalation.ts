// Pages that wait for somebody: which are due to go to the next contact. Claiming or closing a row ends it. Decides nothing.

import { and, asc, eq, isNotNull, isNull, lte } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { worklistItem } from '@/db/schema/session';

export async function listDueEscalations(db: Db, now: string, limit: number): Promise<string[]> {
  const rows = await db
    .select({ id: worklistItem.id })
    .from(worklistItem)
    .where(and(isNull(worklistItem.closedAt), lte(worklistItem.escalateAt, now)))
    .orderBy(asc(worklistItem.escalateAt))
    .limit(limit);
  return rows.map((row) => row.id);
}

export async function findNextEscalation(db: Db): Promise<string | null> {
  const [row] = await db
    .select({ at: worklistItem.escalateAt })
    .from(worklistItem)
    .where(and(isNull(worklistItem.closedAt), isNotNull(worklistItem.escalateAt)))
    .orderBy(asc(worklistItem.escalateAt))
    .limit(1);
  return row?.at ?? null;
}

/** The row under its lock, so that a claim and the next page do not cross; null when it is closed. */
export async function lockEscalation(db: Db, itemId: string) {
  const [row] = await db
    .select({
      id: worklistItem.id,
      siteId: worklistItem.siteId,
      participantId: worklistItem.participantId,
      escalateAt: worklistItem.escalateAt,
      escalation: worklistItem.escalation,
    })
    .from(worklistItem)
    .where(and(eq(worklistItem.id, itemId), isNull(worklistItem.closedAt)))
    .for('update');
  return row ?? null;
}

export async function setEscalation(db: Db, itemId: string, escalation: number, escalateAt: string): Promise<void> {
  await db
    .update(worklistItem)
    .set({ escalation, escalateAt })
    .where(and(eq(worklistItem.id, itemId), isNull(worklistItem.closedAt)));
}
