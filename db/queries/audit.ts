// The audit trail: chains of entries, each with the hash of the one before. Adds and reads; nothing here changes or removes an entry.

import { createHash } from 'node:crypto';
import { and, desc, eq, gt, inArray, isNull, sql, type SQL } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { auditEntry, auditHead } from '@/db/schema/house';
import { participant } from '@/db/schema/participant';
import { canonicalJson, type Canonical } from '@/shared/values/canonical';

type Json = string | number | boolean | null | readonly Json[] | { readonly [key: string]: Json | undefined };

/** What an entry says; its place in the chain is added when it is written. */
export interface AuditContent {
  chain: string;
  at: string;
  actorId: string | null;
  actorName: string;
  actorRole: string;
  action: string;
  kind: 'write' | 'read' | 'refusal';
  siteId: string | null;
  participantId: string | null;
  subjectKind: string | null;
  subjectId: string | null;
  before: Json;
  after: Json;
  why: string | null;
  requestId: string | null;
}

/** What stands before the first entry of every chain. */
export const genesisHash = '0'.repeat(64);

/** As it will be kept: a key without a value is no key. */
function withoutUndefined(value: Json): Canonical {
  if (value === null || typeof value !== 'object') return value;
  if (isList(value)) return value.map(withoutUndefined);
  return Object.fromEntries(
    Object.entries(value).flatMap(([key, member]) => (member === undefined ? [] : [[key, withoutUndefined(member)]])),
  );
}

function isList(value: Json): value is readonly Json[] {
  return Array.isArray(value);
}

/** The text of an entry that its hash covers: everything but its place, which follows from the chain. */
export function canonicalOf(entry: AuditContent): string {
  const {
    chain,
    at,
    actorId,
    actorName,
    actorRole,
    action,
    kind,
    siteId,
    participantId,
    subjectKind,
    subjectId,
    before,
    after,
    why,
    requestId,
  } = entry;
  return canonicalJson({
    ...{ chain, at, actorId, actorName, actorRole, action, kind, siteId, participantId, subjectKind, subjectId },
    ...{ before: withoutUndefined(before), after: withoutUndefined(after), why, requestId },
  });
}

/** SHA-256, in hex, of the previous hash followed by the canonical text. Anyone with the entries can compute it again. */
export function hashOf(previousHash: string, entry: AuditContent): string {
  return createHash('sha256').update(previousHash).update(canonicalOf(entry)).digest('hex');
}

/**
 * Adds entries, each to the end of its chain. One statement moves the heads and writes the links: as three statements it was a third as
 * fast (16 clients at one site). Heads are locked in the order of their names, last of all locks, so two transactions never wait for
 * each other here.
 */
export async function appendAudit(db: Db, entries: readonly AuditContent[]): Promise<void> {
  for (const wave of wavesOf(entries)) {
    const rows = JSON.stringify(wave.map((entry) => ({ ...entry, canonical: canonicalOf(entry) })));
    await db.execute(sql`
      with entry as materialized (
        select * from jsonb_to_recordset(${rows}::jsonb) as e(
          "chain" text, "canonical" text, "at" timestamptz, "actorId" text, "actorName" text, "actorRole" text, "action" text, "kind" text,
          "siteId" uuid, "participantId" uuid, "subjectKind" text, "subjectId" text, "before" jsonb, "after" jsonb, "why" text, "requestId" text)
      ), link as (
        insert into audit_head as head (chain, sequence, previous_hash, hash)
        select "chain", 1, ${genesisHash}, encode(sha256(convert_to(${genesisHash} || "canonical", 'UTF8')), 'hex') from entry order by "chain"
        on conflict (chain) do update set
          sequence = head.sequence + 1,
          previous_hash = head.hash,
          hash = encode(sha256(convert_to(head.hash || (select "canonical" from entry where entry."chain" = head.chain), 'UTF8')), 'hex')
        returning chain, sequence, previous_hash, hash
      )
      insert into audit_entry (chain, sequence, at, actor_id, actor_name, actor_role, action, kind, site_id, participant_id, subject_kind,
        subject_id, before, after, why, request_id, previous_hash, hash)
      select link.chain, link.sequence, "at", "actorId", "actorName", "actorRole", "action", "kind", "siteId", "participantId", "subjectKind",
        "subjectId", "before", "after", "why", "requestId", link.previous_hash, link.hash
      from link join entry on entry."chain" = link.chain`);
  }
}

/** One statement can move a head once: the second entry of a chain waits for the next wave. */
function wavesOf(entries: readonly AuditContent[]): AuditContent[][] {
  const waves: AuditContent[][] = [];
  const seen = new Map<string, number>();
  for (const entry of entries) {
    const place = seen.get(entry.chain) ?? 0;
    seen.set(entry.chain, place + 1);
    (waves[place] ??= []).push(entry);
  }
  return waves;
}

export interface AuditRow extends AuditContent {
  sequence: number;
  previousHash: string;
  hash: string;
  participantCode: string | null;
}

export interface AuditFilter {
  siteIds: readonly string[];
  participantId?: string | undefined;
  kind?: AuditContent['kind'] | undefined;
  /** Only entries that concern no participant. */
  siteChainOnly: boolean;
}

const rowColumns = {
  chain: auditEntry.chain,
  sequence: auditEntry.sequence,
  at: auditEntry.at,
  actorId: auditEntry.actorId,
  actorName: auditEntry.actorName,
  actorRole: auditEntry.actorRole,
  action: auditEntry.action,
  kind: auditEntry.kind,
  siteId: auditEntry.siteId,
  participantId: auditEntry.participantId,
  subjectKind: auditEntry.subjectKind,
  subjectId: auditEntry.subjectId,
  before: sql<Json>`${auditEntry.before}`,
  after: sql<Json>`${auditEntry.after}`,
  why: auditEntry.why,
  requestId: auditEntry.requestId,
  previousHash: auditEntry.previousHash,
  hash: auditEntry.hash,
  participantCode: participant.code,
};

/**
 * Entries of the given sites, newest first.
 * @param after the last row of the page before: instant, chain, sequence
 */
export async function listAudit(
  db: Db,
  filter: AuditFilter,
  limit: number,
  after: { at: string; chain: string; sequence: number } | null,
): Promise<AuditRow[]> {
  const conditions: (SQL | undefined)[] = [
    inArray(auditEntry.siteId, [...filter.siteIds]),
    filter.participantId ? eq(auditEntry.participantId, filter.participantId) : undefined,
    filter.kind ? eq(auditEntry.kind, filter.kind) : undefined,
    filter.siteChainOnly ? isNull(auditEntry.participantId) : undefined,
    after
      ? sql`(${auditEntry.at}, ${auditEntry.chain}, ${auditEntry.sequence}) < (${after.at}::timestamptz, ${after.chain}, ${after.sequence}::bigint)`
      : undefined,
  ];
  return db
    .select(rowColumns)
    .from(auditEntry)
    .leftJoin(participant, eq(participant.id, auditEntry.participantId))
    .where(and(...conditions))
    .orderBy(desc(auditEntry.at), desc(auditEntry.chain), desc(auditEntry.sequence))
    .limit(limit);
}

/** Every entry, chain after chain, each from its beginning: a page after the given place, for checking them all. */
export async function pageOfTrail(
  db: Db,
  after: { chain: string; sequence: number } | null,
  limit: number,
): Promise<Omit<AuditRow, 'participantCode'>[]> {
  const { participantCode: _code, ...columns } = rowColumns;
  return db
    .select(columns)
    .from(auditEntry)
    .where(
      after
        ? sql`(${auditEntry.chain}, ${auditEntry.sequence}) > (${after.chain}, ${after.sequence}::bigint)`
        : undefined,
    )
    .orderBy(auditEntry.chain, auditEntry.sequence)
    .limit(limit);
}

/** Where in its chain an entry with this hash stands; null where none does. */
export async function findSequenceOfHash(db: Db, chain: string, hash: string): Promise<number | null> {
  const [row] = await db
    .select({ sequence: auditEntry.sequence })
    .from(auditEntry)
    .where(and(eq(auditEntry.chain, chain), eq(auditEntry.hash, hash)))
    .limit(1);
  return row?.sequence ?? null;
}

/** The hashes at several places of chains, by `chain sequence`; a place without an entry is left out. */
export async function hashesAt(
  db: Db,
  places: readonly { chain: string; sequence: number }[],
): Promise<ReadonlyMap<string, string>> {
  const { rows } = await db.execute<{ place: string; hash: string }>(sql`
    select e.chain || ' ' || e.sequence as place, e.hash
    from jsonb_to_recordset(${JSON.stringify(places)}::jsonb) as p(chain text, sequence bigint)
    join ${auditEntry} e on e.chain = p.chain and e.sequence = p.sequence`);
  return new Map(rows.map(({ place, hash }) => [place, hash]));
}

/** Heads, by name of the chain, a page after the given name. */
export async function pageOfHeads(
  db: Db,
  afterChain: string | null,
  limit: number,
): Promise<{ chain: string; sequence: number; hash: string }[]> {
  return db
    .select({ chain: auditHead.chain, sequence: auditHead.sequence, hash: auditHead.hash })
    .from(auditHead)
    .where(afterChain === null ? undefined : gt(auditHead.chain, afterChain))
    .orderBy(auditHead.chain)
    .limit(limit);
}

/** One chain from its beginning, for checking it. */
export async function listChain(db: Db, chain: string, afterSequence: number, limit: number): Promise<AuditRow[]> {
  return db
    .select(rowColumns)
    .from(auditEntry)
    .leftJoin(participant, eq(participant.id, auditEntry.participantId))
    .where(and(eq(auditEntry.chain, chain), sql`${auditEntry.sequence} > ${afterSequence}`))
    .orderBy(auditEntry.sequence)
    .limit(limit);
}
