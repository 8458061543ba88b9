// The daily anchors of the audit trail: which heads moved since the last, and what an anchor's hash covers. Signs nothing, changes nothing.

import { createHash } from 'node:crypto';
import { asc, desc, gt, inArray, sql } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { auditAnchor, auditAnchorHead, auditHead } from '@/db/schema/house';
import { canonicalJson } from '@/shared/values/canonical';

export interface AnchoredHead {
  chain: string;
  sequence: number;
  hash: string;
}

export interface Anchor {
  number: number;
  at: string;
  previousHash: string;
  hash: string;
  kid: string;
  token: string;
  heads: AnchoredHead[];
}

/** SHA-256 of the anchor before and of everything that this one says. */
export function anchorHashOf({ number, at, previousHash, heads }: Omit<Anchor, 'hash' | 'kid' | 'token'>): string {
  const said = heads.map(({ chain, sequence, hash }) => [chain, sequence, hash]);
  return createHash('sha256')
    .update(previousHash)
    .update(canonicalJson({ number, at, heads: said }))
    .digest('hex');
}

export async function findNewestAnchor(db: Db): Promise<{ number: number; day: string; hash: string } | null> {
  const [row] = await db
    .select({ number: auditAnchor.number, day: auditAnchor.day, hash: auditAnchor.hash })
    .from(auditAnchor)
    .orderBy(desc(auditAnchor.number))
    .limit(1);
  return row ?? null;
}

export async function hasAuditBegun(db: Db): Promise<boolean> {
  const [row] = await db.select({ chain: auditHead.chain }).from(auditHead).limit(1);
  return row !== undefined;
}

/** Heads that stand elsewhere than when they were last anchored. */
export async function listMovedHeads(db: Db): Promise<AnchoredHead[]> {
  const heads = await db
    .select({ chain: auditHead.chain, sequence: auditHead.sequence, hash: auditHead.hash })
    .from(auditHead)
    .where(
      sql`not exists (select 1 from ${auditAnchorHead} a where a.chain = ${auditHead.chain} and a.sequence = ${auditHead.sequence})`,
    );
  return inOrder(heads);
}

export async function insertAnchor(db: Db, anchor: Anchor, day: string): Promise<void> {
  const { heads, ...row } = anchor;
  await db.insert(auditAnchor).values({ ...row, day });
  // One parameter for all: a house of many people has more heads than a statement may have parameters.
  await db.execute(sql`insert into audit_anchor_head (chain, sequence, hash, anchor)
    select chain, sequence, hash, ${row.number} from jsonb_to_recordset(${JSON.stringify(heads)}::jsonb) as h(chain text, sequence bigint, hash text)`);
}

/** Anchors after a number, oldest first, each with the heads that it names. */
export async function listAnchors(db: Db, afterNumber: number, limit: number): Promise<Anchor[]> {
  const anchors = await db
    .select()
    .from(auditAnchor)
    .where(gt(auditAnchor.number, afterNumber))
    .orderBy(asc(auditAnchor.number))
    .limit(limit);
  if (anchors.length === 0) return [];
  const heads = await db
    .select()
    .from(auditAnchorHead)
    .where(
      inArray(
        auditAnchorHead.anchor,
        anchors.map(({ number }) => number),
      ),
    );
  const headsOf = new Map(anchors.map(({ number }): [number, AnchoredHead[]] => [number, []]));
  for (const { anchor, ...head } of heads) headsOf.get(anchor)?.push(head);
  return anchors.map(({ day: _day, ...anchor }) => ({ ...anchor, heads: inOrder(headsOf.get(anchor.number) ?? []) }));
}

/** As the hash wants them: by the bytes of the name, whatever the database's own order is. */
function inOrder(heads: readonly AnchoredHead[]): AnchoredHead[] {
  return [...heads].sort((a, b) => (a.chain < b.chain ? -1 : a.chain > b.chain ? 1 : a.sequence - b.sequence));
}
