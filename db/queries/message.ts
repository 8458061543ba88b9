// Messages between a person and the site. Nobody's opening of a thread is stored: a message counts as waiting until the site has answered.

import { and, desc, eq, sql } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { account } from '@/db/schema/account';
import { message } from '@/db/schema/participant';

export interface MessageRecord {
  id: string;
  at: string;
  accountId: string;
  name: string;
  fromSite: boolean;
  text: string;
}

/** Newest first. */
export async function listMessages(
  db: Db,
  participantId: string,
  page: { limit: number; after: { at: string; id: string } | null },
): Promise<MessageRecord[]> {
  const after = page.after && sql`(${message.createdAt}, ${message.id}) < (${page.after.at}, ${page.after.id}::uuid)`;
  return db
    .select({
      id: message.id,
      at: message.createdAt,
      accountId: message.accountId,
      name: account.name,
      fromSite: message.fromSite,
      text: message.text,
    })
    .from(message)
    .innerJoin(account, eq(account.id, message.accountId))
    .where(and(eq(message.participantId, participantId), after ?? undefined))
    .orderBy(desc(message.createdAt), desc(message.id))
    .limit(page.limit);
}

export async function insertMessage(
  db: Db,
  row: { id: string; participantId: string; accountId: string; fromSite: boolean; text: string; createdAt: string },
): Promise<void> {
  await db.insert(message).values(row);
}

/** Messages from the person since the site last wrote. */
export async function countUnansweredMessages(db: Db, participantId: string): Promise<number> {
  const [row] = await db
    .select({ count: sql<number>`count(*)::int` })
    .from(message)
    .where(
      and(
        eq(message.participantId, participantId),
        eq(message.fromSite, false),
        sql`not exists (select 1 from ${message} answer where answer.participant_id = ${participantId} and answer.from_site
          and answer.created_at >= "message"."created_at")`,
      ),
    );
  return row?.count ?? 0;
}
