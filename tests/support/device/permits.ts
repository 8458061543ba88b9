// What: permits as the server would sign them, for tests of the stimulator: a key pair, claims and a token.
// Must not: be used outside tests; the key lives as long as the test.
import { exportJWK, generateKeyPair, SignJWT } from 'jose';
import type { PermitKey } from '@/components/runtime/device/stimulator';
import type { PermitClaims } from '@/shared/contracts/permit';

export const deviceId = '7d2a9e4c-3b5f-4d6e-8a1c-0f9e8d7c6b5a';
export const otherDeviceId = '7d2a9e4c-3b5f-4d6e-8a1c-0f9e8d7c6b5b';
/** Seconds since 1970 of the tests' now. */
export const nowSeconds = 1_780_000_000;
export const nowText = new Date(nowSeconds * 1000).toISOString();

export interface Signer {
  key: PermitKey;
  sign(claims: PermitClaims): Promise<string>;
}

export async function signer(kid = 'house-1'): Promise<Signer> {
  const { publicKey, privateKey } = await generateKeyPair('EdDSA', { crv: 'Ed25519', extractable: true });
  const jwk = await exportJWK(publicKey);
  return {
    key: { kty: 'OKP', crv: 'Ed25519', x: jwk.x ?? '', kid, alg: 'EdDSA', use: 'sig' },
    sign: (claims) => new SignJWT({ ...claims }).setProtectedHeader({ alg: 'EdDSA', kid }).sign(privateKey),
  };
}

export function claimsOf(change: Partial<PermitClaims> = {}): PermitClaims {
  return {
    iss: 'rampwell',
    aud: deviceId,
    jti: '0b5d1f0e-3f53-4d4e-9a53-5f0c4a1b2c3d',
    iat: nowSeconds,
    exp: nowSeconds + 1800,
    participant: '3f0c4a1b-2c3d-4e5f-8a9b-0c1d2e3f4a5b',
    device: deviceId,
    session: '9a53e5f0-c4a1-4b2c-8d3e-4f5a6b7c8d9e',
    course: '5f2c3e8f-6f0b-4a62-8b6a-0e5d3c1b2a91',
    prescriptionVersion: 1,
    counter: 7,
    waveform: 'tDCS',
    intensityMicroamp: 2000,
    rampUpMs: 30_000,
    holdMs: 1_200_000,
    rampDownMs: 30_000,
    chargeMicrocoulomb: 2_460_000,
    montage: [
      { position: 'F3', polarity: 'anode' },
      { position: 'Fp2', polarity: 'cathode' },
    ],
    ...change,
  };
}
