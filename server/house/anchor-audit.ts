// Once a day (in UTC) all heads of the audit trail that moved are signed together with the house's key. What was anchored cannot be cut off
// or written anew without showing. Keeps nothing outside the database: server/house/keep-anchors.ts does.

import { CompactSign, importJWK } from 'jose';
import {
  anchorHashOf,
  findNewestAnchor,
  hasAuditBegun,
  insertAnchor,
  listMovedHeads,
  type Anchor,
} from '@/db/queries/audit-anchor';
import { genesisHash } from '@/db/queries/audit';
import type { Job, Tx } from '@/server/action';
import { ensureSigningKey } from '@/server/signing-key';
import { addDays, instantOf, localDate } from '@/shared/values/zone';

/** The kind of token, so that no anchor can ever pass for a permit, which is signed with the same key. */
export const anchorType = 'rampwell-anchor';

const dayOf = (instant: string) => localDate(Date.parse(instant), 'UTC');

export const anchorAudit: Job = {
  name: 'audit.anchor',
  async listDue(db, now) {
    const newest = await findNewestAnchor(db);
    const today = dayOf(now);
    if (newest ? newest.day >= today : !(await hasAuditBegun(db))) return [];
    return [today];
  },
  async nextDue(db) {
    const newest = await findNewestAnchor(db);
    return newest && new Date(instantOf(addDays(newest.day, 1), '00:00', 'UTC')).toISOString();
  },
  async run(_id, tx) {
    const at = await tx.now();
    const newest = await findNewestAnchor(tx.db);
    const day = dayOf(at);
    if (newest && newest.day >= day) return;
    const heads = await listMovedHeads(tx.db);
    const said = { number: (newest?.number ?? 0) + 1, at, previousHash: newest?.hash ?? genesisHash, heads };
    const hash = anchorHashOf(said);
    await insertAnchor(tx.db, { ...said, hash, ...(await signed(tx, { number: said.number, at, hash })) }, day);
    tx.record({ subject: { kind: 'audit_anchor', id: String(said.number) }, after: { hash, heads: heads.length } });
  },
};

async function signed(tx: Tx, claims: Pick<Anchor, 'number' | 'at' | 'hash'>): Promise<Pick<Anchor, 'kid' | 'token'>> {
  const { kid, publicX, sealedPrivate } = await ensureSigningKey(tx);
  const d = Buffer.from(tx.vault.open(sealedPrivate)).toString('base64url');
  const key = await importJWK({ kty: 'OKP', crv: 'Ed25519', x: publicX, d }, 'EdDSA');
  const token = await new CompactSign(new TextEncoder().encode(JSON.stringify(claims)))
    .setProtectedHeader({ alg: 'EdDSA', kid, typ: anchorType })
    .sign(key);
  return { kid, token };
}
