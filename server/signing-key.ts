// The Ed25519 keys that sign permits: one in use for the whole house, its private part sealed by the server's secret. Signs nothing itself.

import { generateKeyPairSync } from 'node:crypto';
import { calculateJwkThumbprint } from 'jose';
import { insertSigningKey, listSigningKeys, lockSigningKeys, type SigningKeyRecord } from '@/db/queries/permit';
import type { Tx } from '@/server/action';
import { keyInUse } from '@/shared/rules/permit-keys';

type KeyTx = Pick<Tx, 'db' | 'now' | 'vault'>;

/** The key in use; made now if there is none. The lock keeps two processes from making two. */
export async function ensureSigningKey(tx: KeyTx): Promise<SigningKeyRecord> {
  const known = keyInUse(await listSigningKeys(tx.db));
  if (known) return known;
  await lockSigningKeys(tx.db);
  return keyInUse(await listSigningKeys(tx.db)) ?? makeSigningKey(tx);
}

/** A new key, in use from now on. The caller holds the lock. */
export async function makeSigningKey(tx: KeyTx): Promise<SigningKeyRecord> {
  const { x, d } = generateKeyPairSync('ed25519').privateKey.export({ format: 'jwk' });
  if (!x || !d) throw new Error('The platform made no Ed25519 key.');
  // RFC 7638: the same key has the same name wherever it is reckoned.
  const kid = await calculateJwkThumbprint({ kty: 'OKP', crv: 'Ed25519', x });
  const sealedPrivate = tx.vault.seal(Buffer.from(d, 'base64url'));
  const key = { kid, publicX: x, sealedPrivate, createdAt: await tx.now() };
  await insertSigningKey(tx.db, key);
  return { ...key, closedAt: null };
}
