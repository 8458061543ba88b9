// The signature on a permit: a compact JWS (RFC 7515) by Ed25519 (RFC 8037), which the stimulator checks itself.

import { CompactSign, importJWK } from 'jose';
import type { Tx } from '@/server/action';
import { ensureSigningKey } from '@/server/signing-key';
import type { PermitClaims } from '@/shared/contracts/permit';

/** Both parts of the key as base64url (RFC 8037). */
export async function signClaims(
  claims: PermitClaims,
  { kid, x, d }: { readonly kid: string; readonly x: string; readonly d: string },
): Promise<string> {
  const key = await importJWK({ kty: 'OKP', crv: 'Ed25519', x, d }, 'EdDSA');
  return new CompactSign(new TextEncoder().encode(JSON.stringify(claims)))
    .setProtectedHeader({ alg: 'EdDSA', kid, typ: 'JWT' })
    .sign(key);
}

export async function signPermit(tx: Pick<Tx, 'db' | 'now' | 'vault'>, claims: PermitClaims): Promise<string> {
  const { kid, publicX, sealedPrivate } = await ensureSigningKey(tx);
  const d = Buffer.from(tx.vault.open(sealedPrivate)).toString('base64url');
  return signClaims(claims, { kid, x: publicX, d });
}
