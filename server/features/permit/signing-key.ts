// The Ed25519 key that signs permits: made once for the whole house, its private part sealed by the server's secret. Signs nothing itself.

import { generateKeyPairSync } from 'node:crypto';
import { calculateJwkThumbprint } from 'jose';
import { insertSigningKey, listSigningKeys, lockSigningKeys, type SigningKeyRecord } from '@/db/queries/permit';
import type { Tx } from '@/server/action';

type KeyTx = Pick<Tx, 'db' | 'now' | 'vault'>;

/** The key in use; made now if there is none. The lock keeps two processes from making two. */
export async function ensureSigningKey(tx: KeyTx): Promise<SigningKeyRecord> {
  const [known] = await listSigningKeys(tx.db);
  if (known) return known;
  await lockSigningKeys(tx.db);
  const [made] = await listSigningKeys(tx.db);
  if (made) return made;
  const { x, d } = generateKeyPairSync('ed25519').privateKey.export({ format: 'jwk' });
  if (!x || !d) throw new Error('The platform made no Ed25519 key.');
  // RFC 7638: the same key has the same name wherever it is reckoned.
  const kid = await calculateJwkThumbprint({ kty: 'OKP', crv: 'Ed25519', x });
  const key = { kid, publicX: x, sealedPrivate: tx.vault.seal(Buffer.from(d, 'base64url')) };
  await insertSigningKey(tx.db, { ...key, createdAt: await tx.now() });
  return key;
}
