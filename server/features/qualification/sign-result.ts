// The result of a qualification run as a file that can be checked without this server: what was asked, of which program, what came of it,
// signed by the house's key. A type of its own, so that it can never be taken for a permit.

import { createHash } from 'node:crypto';
import { CompactSign, importJWK } from 'jose';
import type { SigningKeyRecord } from '@/db/queries/permit';
import type { Vault } from '@/server/action';
import type { CaseResult } from '@/shared/rules/qualify';

export interface Result {
  issuer: 'rampwell';
  at: string;
  version: string;
  siteId: string;
  byName: string;
  file: { name: string; sha256: string };
  passed: number;
  failed: number;
  cases: readonly CaseResult[];
}

export function sha256(text: string): string {
  return createHash('sha256').update(text).digest('hex');
}

/** RFC 7515 §4.1.9: what kind of thing is signed. */
export const qualificationType = 'rampwell-qualification+json';

export async function signResult(result: Result, key: SigningKeyRecord, vault: Vault): Promise<string> {
  const open = { kty: 'OKP', crv: 'Ed25519', x: key.publicX, kid: key.kid, alg: 'EdDSA', use: 'sig' } as const;
  const d = Buffer.from(vault.open(key.sealedPrivate)).toString('base64url');
  const jws = await new CompactSign(new TextEncoder().encode(JSON.stringify(result)))
    .setProtectedHeader({ alg: 'EdDSA', kid: key.kid, typ: qualificationType })
    .sign(await importJWK({ kty: open.kty, crv: open.crv, x: open.x, d }, 'EdDSA'));
  return JSON.stringify({ result, jws, key: open }, null, '  ');
}
