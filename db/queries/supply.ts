// Supplies that a person was given, by lot. Closing one is its end: used up, too old, or followed by a new lot.

import { and, desc, eq, isNull, sql } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { supply } from '@/db/schema/device';
import { session } from '@/db/schema/session';

export interface SupplyRecord {
  id: string;
  kind: 'sponge' | 'saline' | 'insert';
  lot: string;
  openedAt: string;
  /** Sessions begun while it was the one in use. */
  uses: number;
  maxUses: number | null;
  maxDays: number;
  closedAt: string | null;
  createdAt: string;
}

/** Counted at reading, so that a session that began offline and arrived late counts too. The left side is qualified by hand. */
const uses = sql<number>`(select count(*)::int from ${session} used where used.participant_id = "supply"."participant_id"
  and used.started_at >= "supply"."opened_at" and ("supply"."closed_at" is null or used.started_at < "supply"."closed_at"))`;

const columns = {
  id: supply.id,
  kind: supply.kind,
  lot: supply.lot,
  openedAt: supply.openedAt,
  uses,
  maxUses: supply.maxUses,
  maxDays: supply.maxDays,
  closedAt: supply.closedAt,
  createdAt: supply.createdAt,
};

/** Newest first. */
export async function listSupplies(
  db: Db,
  participantId: string,
  page: { limit: number; after: { createdAt: string; id: string } | null },
): Promise<SupplyRecord[]> {
  const after =
    page.after && sql`(${supply.createdAt}, ${supply.id}) < (${page.after.createdAt}, ${page.after.id}::uuid)`;
  return db
    .select(columns)
    .from(supply)
    .where(and(eq(supply.participantId, participantId), after ?? undefined))
    .orderBy(desc(supply.createdAt), desc(supply.id))
    .limit(page.limit);
}

export interface NewSupply {
  id: string;
  participantId: string;
  kind: 'sponge' | 'saline' | 'insert';
  lot: string;
  openedAt: string;
  maxUses: number | null;
  maxDays: number;
  by: string;
  createdAt: string;
}

/** A new lot of a kind; the one before ends. */
export async function insertSupply(db: Db, row: NewSupply): Promise<SupplyRecord> {
  await db
    .update(supply)
    .set({ closedAt: row.createdAt, closedWhy: 'followed' })
    .where(and(eq(supply.participantId, row.participantId), eq(supply.kind, row.kind), isNull(supply.closedAt)));
  await db.insert(supply).values(row);
  const [made] = await db.select(columns).from(supply).where(eq(supply.id, row.id));
  if (!made) throw new Error('the supply that was just written is not there');
  return made;
}
