// Rows of the worklist: opened once a matter, claimed, closed. The order of the list is the rule's; here it is said in SQL so
// that pages can be cut. Facts are codes and numbers, never a person's own words.

import { and, eq, isNull, sql } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { worklistItem } from '@/db/schema/session';
import type { WorklistLevel } from '@/shared/values/codes';

export type ItemFacts = Readonly<Record<string, string | number | boolean | null>>;

export interface NewItem {
  id: string;
  siteId: string;
  participantId: string;
  level: WorklistLevel;
  /** The code that the screen makes a sentence of, with `facts`. */
  why: string;
  facts: ItemFacts;
  /** What it is about: at most one open row of a participant for one matter (`second_signature:<id>`). */
  matter: string;
  sessionId?: string | null;
  prescriptionId?: string | null;
  lockoutId?: string | null;
  openedAt: string;
  /** Set for a page: when the next contact is told unless somebody claims it. */
  escalateAt?: string | null;
}

/** Opens a row. False when the matter was open already; then nothing changed. */
export async function openItem(db: Db, item: NewItem): Promise<boolean> {
  const rows = await db
    .insert(worklistItem)
    .values(item)
    .onConflictDoNothing({
      target: [worklistItem.participantId, worklistItem.matter],
      where: sql`${worklistItem.closedAt} is null`,
    })
    .returning({ id: worklistItem.id });
  return rows.length > 0;
}

/** Closes one row, once. False when it was closed already. */
export async function closeItem(db: Db, itemId: string, at: string, why: string): Promise<boolean> {
  const rows = await db
    .update(worklistItem)
    .set({ closedAt: at, closedWhy: why, escalateAt: null })
    .where(and(eq(worklistItem.id, itemId), isNull(worklistItem.closedAt)))
    .returning({ id: worklistItem.id });
  return rows.length > 0;
}

/** Closes the open row of a matter, if there is one. */
export async function closeMatter(
  db: Db,
  participantId: string,
  matter: string,
  at: string,
  why: string,
): Promise<boolean> {
  const rows = await db
    .update(worklistItem)
    .set({ closedAt: at, closedWhy: why, escalateAt: null })
    .where(
      and(
        eq(worklistItem.participantId, participantId),
        eq(worklistItem.matter, matter),
        isNull(worklistItem.closedAt),
      ),
    )
    .returning({ id: worklistItem.id });
  return rows.length > 0;
}
