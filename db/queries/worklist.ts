// Rows of the worklist: opened once a matter, claimed, closed. The order of the list is the rule's; here it is said in SQL so
// that pages can be cut. Facts are codes and numbers, never a person's own words.

import { and, asc, count, desc, eq, ilike, inArray, isNull, or, sql, type SQL } from 'drizzle-orm';
import { z } from 'zod';
import type { Db } from '@/db/client';
import { course } from '@/db/schema/course';
import { participant } from '@/db/schema/participant';
import { worklistClaim, worklistItem } from '@/db/schema/session';
import { worklistLevels, type WorklistLevel } from '@/shared/values/codes';

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

/** Closes the open rows about these prescriptions. */
export async function closeItemsOfPrescriptions(
  db: Db,
  prescriptionIds: readonly string[],
  at: string,
  why: string,
): Promise<void> {
  if (prescriptionIds.length === 0) return;
  await db
    .update(worklistItem)
    .set({ closedAt: at, closedWhy: why, escalateAt: null })
    .where(and(inArray(worklistItem.prescriptionId, [...prescriptionIds]), isNull(worklistItem.closedAt)));
}

const storedFacts: z.ZodType<Record<string, string | number | boolean | null>> = z.record(
  z.string(),
  z.union([z.string(), z.number(), z.boolean(), z.null()]),
);

/** Who has each open row: the newest claim counts, and one without account gives the row back. */
const ownerId = sql<string | null>`(
  select c.account_id from worklist_claim c where c.item_id = worklist_item.id order by c.created_at desc, c.id desc limit 1)`;

/** The order of shared/rules/worklist.ts: by level, then nobody's first, then the newest. A test compares the two. */
const ownedRank = sql<number>`case when ${ownerId} is null then 0 else 1 end`;
const levelRank = sql<number>`array_position(array[${sql.join(
  worklistLevels.map((level) => sql`${level}`),
  sql`, `,
)}]::text[], worklist_item.level)`;

export interface ItemRecord {
  id: string;
  siteId: string;
  participantId: string;
  name: string;
  code: string;
  level: WorklistLevel;
  why: string;
  facts: Record<string, string | number | boolean | null>;
  openedAt: string;
  closedAt: string | null;
  ownerAccountId: string | null;
  ownerName: string | null;
  sessionId: string | null;
  prescriptionId: string | null;
  lockoutId: string | null;
}

const columns = {
  id: worklistItem.id,
  siteId: worklistItem.siteId,
  participantId: worklistItem.participantId,
  name: participant.name,
  code: participant.code,
  level: worklistItem.level,
  why: worklistItem.why,
  facts: worklistItem.facts,
  openedAt: worklistItem.openedAt,
  closedAt: worklistItem.closedAt,
  ownerAccountId: ownerId,
  ownerName: sql<string | null>`(select a.name from account a where a.id = ${ownerId})`,
  sessionId: worklistItem.sessionId,
  prescriptionId: worklistItem.prescriptionId,
  lockoutId: worklistItem.lockoutId,
};

/** Sort keys of a row: where the next page begins. */
export interface ItemPosition {
  isOwned: boolean;
  level: WorklistLevel;
  openedAt: string;
  id: string;
}

export interface ItemSearch {
  siteIds: readonly string[];
  /** Rows of this account and of nobody; all rows if absent. */
  accountId?: string | undefined;
  search?: string | undefined;
  /** A pseudonymous reader finds nobody by name. */
  byName: boolean;
  limit: number;
  after: ItemPosition | null;
}

/** `%` and `_` are letters here, not wildcards. */
function likeOf(search: string): string {
  return `%${search.replace(/[\\%_]/g, (sign) => `\\${sign}`)}%`;
}

function matching({ search, byName }: ItemSearch): SQL | undefined {
  if (search === undefined || search === '') return undefined;
  const like = likeOf(search);
  return or(
    ilike(participant.code, like),
    byName ? ilike(participant.name, like) : undefined,
    sql`exists (select 1 from device_assignment g join device d on d.id = g.device_id
      where g.participant_id = ${participant.id} and g.closed_at is null and (d.label ilike ${like} or d.serial ilike ${like}))`,
  );
}

function afterPosition(position: ItemPosition): SQL {
  const { isOwned, level, openedAt, id } = position;
  const rank = worklistLevels.indexOf(level) + 1;
  return sql`((${levelRank}, ${ownedRank}) > (${rank}::int, ${isOwned ? 1 : 0}::int)
    or ((${levelRank}, ${ownedRank}) = (${rank}::int, ${isOwned ? 1 : 0}::int)
      and (${worklistItem.openedAt} < ${openedAt} or (${worklistItem.openedAt} = ${openedAt} and ${worklistItem.id} > ${id}))))`;
}

/** Open rows of own sites, most urgent first. */
export async function listItems(db: Db, want: ItemSearch): Promise<ItemRecord[]> {
  if (want.siteIds.length === 0) return [];
  const { accountId } = want;
  const rows = await db
    .select(columns)
    .from(worklistItem)
    .innerJoin(participant, eq(participant.id, worklistItem.participantId))
    .where(
      and(
        inArray(worklistItem.siteId, [...want.siteIds]),
        isNull(worklistItem.closedAt),
        accountId === undefined ? undefined : sql`coalesce(${ownerId}, ${accountId}) = ${accountId}`,
        matching(want),
        want.after ? afterPosition(want.after) : undefined,
      ),
    )
    .orderBy(asc(levelRank), asc(ownedRank), desc(worklistItem.openedAt), asc(worklistItem.id))
    .limit(want.limit);
  return rows.map((row) => ({ ...row, facts: storedFacts.parse(row.facts) }));
}

/** Open rows of these sites, and how many people go on as prescribed with none. */
export async function countWorklist(db: Db, siteIds: readonly string[]): Promise<{ needing: number; goingOn: number }> {
  if (siteIds.length === 0) return { needing: 0, goingOn: 0 };
  const [open] = await db
    .select({ count: count() })
    .from(worklistItem)
    .where(and(inArray(worklistItem.siteId, [...siteIds]), isNull(worklistItem.closedAt)));
  const [quiet] = await db
    .select({ count: count() })
    .from(participant)
    .innerJoin(course, and(eq(course.participantId, participant.id), isNull(course.closedAt)))
    .where(
      and(
        inArray(participant.siteId, [...siteIds]),
        isNull(participant.closedAt),
        sql`exists (select 1 from prescription p where p.course_id = ${course.id} and p.signed_at is not null and p.closed_at is null)`,
        sql`not exists (select 1 from course_pause p where p.course_id = ${course.id} and p.closed_at is null)`,
        sql`not exists (select 1 from worklist_item i where i.participant_id = ${participant.id} and i.closed_at is null)`,
      ),
    );
  return { needing: open?.count ?? 0, goingOn: quiet?.count ?? 0 };
}

export async function findItem(db: Db, itemId: string): Promise<ItemRecord | null> {
  const [row] = await db
    .select(columns)
    .from(worklistItem)
    .innerJoin(participant, eq(participant.id, worklistItem.participantId))
    .where(eq(worklistItem.id, itemId))
    .limit(1);
  return row ? { ...row, facts: storedFacts.parse(row.facts) } : null;
}

/** The row under its lock; the participant's lock, where one is taken, comes before it. */
export async function lockItem(db: Db, itemId: string): Promise<ItemRecord | null> {
  await db.select({ id: worklistItem.id }).from(worklistItem).where(eq(worklistItem.id, itemId)).for('update');
  return findItem(db, itemId);
}

/** Somebody takes a row, or (account null) gives it back. */
export async function insertClaim(
  db: Db,
  row: { id: string; itemId: string; accountId: string | null; by: string; createdAt: string },
): Promise<void> {
  await db.insert(worklistClaim).values(row);
}

/** When the next contact is told unless somebody takes the row; null = nobody is told. */
export async function setEscalation(db: Db, itemId: string, escalateAt: string | null): Promise<void> {
  await db
    .update(worklistItem)
    .set({ escalateAt })
    .where(and(eq(worklistItem.id, itemId), isNull(worklistItem.closedAt)));
}
