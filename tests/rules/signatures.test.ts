// The signature of a permit beside published numbers: the primitive gives RFC 8032's own values, the envelope RFC 8037's, and what the house
// signs with such a key is what Ed25519 makes of the same bytes and what a stimulator accepts.

import { createPrivateKey, createPublicKey, sign, verify } from 'node:crypto';
import { CompactSign, compactVerify, importJWK } from 'jose';
import { checkPermit } from '@/components/runtime/device/check-permit';
import { signClaims } from '@/server/features/permit/sign-permit';
import published from '@/tests/published/ed25519.json';
import { claimsOf, deviceId, nowSeconds } from '@/tests/support/device/permits';

const base64url = (hex: string) => Buffer.from(hex, 'hex').toString('base64url');
const keyOf = ({ secret, public: x }: { secret: string; public: string }) =>
  ({ kty: 'OKP', crv: 'Ed25519', x: base64url(x), d: base64url(secret) }) as const;

describe('RFC 8032', () => {
  it.each(published.vectors.map((each) => [each.id, each] as const))(
    '%s: signs and verifies the published bytes',
    (_id, vector) => {
      const jwk = keyOf(vector);
      const message = Buffer.from(vector.message, 'hex');
      const own = createPrivateKey({ key: jwk, format: 'jwk' });
      expect(sign(null, message, own).toString('hex')).toBe(vector.signature);
      const { d: _secret, ...open } = jwk;
      const theirs = createPublicKey({ key: open, format: 'jwk' });
      expect(verify(null, message, theirs, Buffer.from(vector.signature, 'hex'))).toBe(true);
      // One bit of the signature or one byte more of the message, and it is none.
      const bent = Buffer.from(vector.signature, 'hex');
      bent[0] = (bent[0] ?? 0) ^ 1;
      expect(verify(null, message, theirs, bent)).toBe(false);
      expect(
        verify(null, Buffer.concat([message, Buffer.from([0])]), theirs, Buffer.from(vector.signature, 'hex')),
      ).toBe(false);
    },
  );
});

describe('RFC 8037', () => {
  const [first] = published.vectors;
  const { token, payload, header } = published.jws;

  it('makes the token of appendix A.4 with the key of A.1, and reads it', async () => {
    if (first === undefined) throw new Error('no vector');
    const key = await importJWK(keyOf(first), 'EdDSA');
    const made = await new CompactSign(new TextEncoder().encode(payload))
      .setProtectedHeader(JSON.parse(header))
      .sign(key);
    expect(made).toBe(token);
    const { d: _secret, ...open } = keyOf(first);
    const read = await compactVerify(token, await importJWK(open, 'EdDSA'));
    expect(new TextDecoder().decode(read.payload)).toBe(payload);
  });
});

describe('what the house signs', () => {
  it.each(published.vectors.map((each) => [each.id, each] as const))(
    'with the key of %s is its Ed25519 signature, which a stimulator accepts',
    async (_id, vector) => {
      const { x, d } = keyOf(vector);
      const token = await signClaims(claimsOf(), { kid: 'k1', x, d });
      const [head = '', body = '', signature] = token.split('.');
      const own = createPrivateKey({ key: keyOf(vector), format: 'jwk' });
      expect(signature).toBe(sign(null, Buffer.from(`${head}.${body}`), own).toString('base64url'));
      expect(JSON.parse(Buffer.from(head, 'base64url').toString())).toEqual({ alg: 'EdDSA', kid: 'k1', typ: 'JWT' });
      const key = { kty: 'OKP', crv: 'Ed25519', x, kid: 'k1', alg: 'EdDSA', use: 'sig' } as const;
      const asked = { token, keys: [key], deviceId, nowMs: nowSeconds * 1000, highestCounter: 0 };
      expect(await checkPermit(asked)).toEqual({ ok: true, claims: claimsOf() });
    },
  );
});
