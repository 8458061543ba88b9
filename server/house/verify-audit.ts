// Checks the whole audit trail: every chain entry by entry, the heads, and what the daily anchors say of both. Names chain, place and what is
// wrong. Reads only. The first break of a chain is told; what follows it in that chain hangs on it.

import { calculateJwkThumbprint, compactVerify, importJWK } from 'jose';
import {
  findSequenceOfHash,
  genesisHash,
  hashesAt,
  hashOf,
  pageOfHeads,
  pageOfTrail,
  type AuditRow,
} from '@/db/queries/audit';
import { anchorHashOf, listAnchors, type Anchor } from '@/db/queries/audit-anchor';
import { listSigningKeys } from '@/db/queries/permit';
import type { Db } from '@/db/client';
import { anchorType } from '@/server/house/anchor-audit';
import type { KeptAnchor } from '@/server/house/keep-anchors';

export type AuditFault =
  /** The entry says something else than its hash was made for. */
  | 'altered'
  /** Entries that were here are gone. */
  | 'removed'
  /** An entry stands here that was written elsewhere. */
  | 'reordered'
  /** An entry stands here that the next one does not know. */
  | 'inserted'
  /** The head says something else than the last entry. */
  | 'head_altered'
  /** An anchor names this place, and there is nothing: the tail was cut off. */
  | 'tail_cut'
  /** The chain is whole in itself, and not the one that was anchored: it was written anew. */
  | 'rewritten'
  | 'anchor_altered'
  | 'anchor_removed'
  | 'anchor_signature';

export interface AuditFinding {
  /** For anchors: `anchors`. */
  chain: string;
  sequence: number;
  what: AuditFault;
}

export interface AuditVerdict {
  entries: number;
  chains: number;
  anchors: number;
  findings: AuditFinding[];
}

type Entry = Omit<AuditRow, 'participantCode'>;
interface Place {
  sequence: number;
  hash: string;
}

const entriesPage = 1000;
const anchorsPage = 20;
const anchorsChain = 'anchors';

/** @param kept anchors kept outside the database, where there are any */
export async function verifyAudit(db: Db, kept: readonly KeptAnchor[] | null = null): Promise<AuditVerdict> {
  const { ends, entries, findings } = await walkTrail(db);
  await checkHeads(db, ends, findings);
  const anchors = await checkAnchors(db, kept, findings);
  return { entries, chains: ends.size, anchors, findings };
}

async function walkTrail(db: Db) {
  const ends = new Map<string, Place>();
  const findings: AuditFinding[] = [];
  const broken = new Set<string>();
  let entries = 0;
  let after: Entry | null = null;
  for (;;) {
    const page: Entry[] = await pageOfTrail(db, after, entriesPage);
    for (const entry of page) {
      const { chain, sequence, hash } = entry;
      entries += 1;
      if (!broken.has(chain)) {
        const finding = await breakAt(db, entry, ends.get(chain) ?? { sequence: 0, hash: genesisHash });
        if (finding) {
          broken.add(chain);
          findings.push(finding);
        }
      }
      ends.set(chain, { sequence, hash });
    }
    after = page.at(-1) ?? null;
    if (page.length < entriesPage) break;
  }
  return { ends, entries, findings };
}

async function breakAt(db: Db, entry: Entry, before: Place): Promise<AuditFinding | null> {
  const { chain, sequence, previousHash, hash } = entry;
  if (sequence !== before.sequence + 1) return { chain, sequence: before.sequence + 1, what: 'removed' };
  if (hashOf(previousHash, entry) !== hash) return { chain, sequence, what: 'altered' };
  if (previousHash === before.hash) return null;
  // Whole in itself, but it follows another entry than the one before it. Where that one stands tells what was done.
  const at = previousHash === genesisHash ? 0 : await findSequenceOfHash(db, chain, previousHash);
  if (at === null) return { chain, sequence, what: 'removed' };
  return at < before.sequence ? { chain, sequence: at + 1, what: 'inserted' } : { chain, sequence, what: 'reordered' };
}

async function checkHeads(db: Db, ends: ReadonlyMap<string, Place>, findings: AuditFinding[]): Promise<void> {
  // A broken chain's end is compared with nothing: the break is what there is to say.
  const broken = new Set(findings.map(({ chain }) => chain));
  const headless = new Set(ends.keys());
  let after: string | null = null;
  for (;;) {
    const page: Awaited<ReturnType<typeof pageOfHeads>> = await pageOfHeads(db, after, entriesPage);
    for (const { chain, ...head } of page) {
      headless.delete(chain);
      if (broken.has(chain)) continue;
      const end = ends.get(chain) ?? { sequence: 0, hash: genesisHash };
      if (head.sequence > end.sequence) findings.push({ chain, sequence: end.sequence + 1, what: 'removed' });
      else if (head.sequence < end.sequence) findings.push({ chain, sequence: head.sequence + 1, what: 'inserted' });
      else if (head.hash !== end.hash) findings.push({ chain, sequence: head.sequence, what: 'head_altered' });
    }
    after = page.at(-1)?.chain ?? null;
    if (page.length < entriesPage) break;
  }
  for (const chain of headless) if (!broken.has(chain)) findings.push({ chain, sequence: 1, what: 'inserted' });
}

async function checkAnchors(db: Db, kept: readonly KeptAnchor[] | null, findings: AuditFinding[]): Promise<number> {
  const keys = new Map((await listSigningKeys(db)).map(({ kid, publicX }) => [kid, publicX]));
  const inDatabase = new Map<number, string>();
  let last = { number: 0, hash: genesisHash };
  for (;;) {
    const page = await listAnchors(db, last.number, anchorsPage);
    for (const anchor of page) {
      const { number, hash } = anchor;
      const tell = (what: AuditFault, at = number) => findings.push({ chain: anchorsChain, sequence: at, what });
      if (number !== last.number + 1) tell('anchor_removed', last.number + 1);
      else if (anchorHashOf(anchor) !== hash || anchor.previousHash !== last.hash) tell('anchor_altered');
      else if (!(await isSigned(anchor, keys.get(anchor.kid)))) tell('anchor_signature');
      await checkAnchored(db, anchor, findings);
      inDatabase.set(number, hash);
      last = { number, hash };
    }
    if (page.length < anchorsPage) break;
  }
  for (const anchor of kept ?? []) {
    const { number } = anchor;
    const tell = (what: AuditFault) => findings.push({ chain: anchorsChain, sequence: number, what });
    // The file is the witness against the database: it is believed by its own signature alone.
    if (anchorHashOf(anchor) !== anchor.hash || !(await isSigned(anchor, anchor.publicX))) tell('anchor_signature');
    else {
      if (!inDatabase.has(number)) tell('anchor_removed');
      else if (inDatabase.get(number) !== anchor.hash) tell('anchor_altered');
      await checkAnchored(db, anchor, findings);
    }
  }
  return inDatabase.size;
}

/** Whether the trail still holds what the anchor says of it. */
async function checkAnchored(db: Db, { heads }: Anchor, findings: AuditFinding[]): Promise<void> {
  const told = new Set(findings.map(({ chain }) => chain));
  const found = await hashesAt(db, heads);
  for (const { chain, sequence, hash } of heads) {
    const there = found.get(`${chain} ${sequence}`);
    if (there === hash || told.has(chain)) continue;
    told.add(chain);
    findings.push({ chain, sequence, what: there === undefined ? 'tail_cut' : 'rewritten' });
  }
}

async function isSigned({ number, at, hash, kid, token }: Anchor, publicX: string | undefined): Promise<boolean> {
  if (!publicX) return false;
  try {
    const jwk = { kty: 'OKP', crv: 'Ed25519', x: publicX };
    // The key's name is its own thumbprint (RFC 7638), so another key cannot go by it.
    if ((await calculateJwkThumbprint(jwk)) !== kid) return false;
    const { payload, protectedHeader } = await compactVerify(token, await importJWK(jwk, 'EdDSA'), {
      algorithms: ['EdDSA'],
    });
    const said: unknown = JSON.parse(new TextDecoder().decode(payload));
    return protectedHeader.typ === anchorType && JSON.stringify(said) === JSON.stringify({ number, at, hash });
  } catch {
    return false;
  }
}
