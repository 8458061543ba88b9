// The stimulator's own check of a permit: signature, who it is for, until when, its counter, its shape. It trusts nothing that
// the app says about the permit, and answers with a named refusal.

import { createLocalJWKSet, errors, jwtVerify } from 'jose';
import { PermitClaims } from '@/shared/contracts/permit';
import type { PermitKey, StartRefusal } from './stimulator';

export interface PermitCheck {
  token: string;
  keys: readonly PermitKey[];
  deviceId: string;
  /** The stimulator's idea of the time, ms since 1970. */
  nowMs: number;
  highestCounter: number;
}
export type PermitFinding = { ok: true; claims: PermitClaims } | { ok: false; why: StartRefusal };

/** Two clocks that were set by the same server differ by the time an answer takes. Own choice. */
const aheadSeconds = 60;

function refusalOf(error: unknown): StartRefusal {
  if (error instanceof errors.JWTExpired) return 'permit_expired';
  if (error instanceof errors.JWSSignatureVerificationFailed) return 'permit_altered';
  if (error instanceof errors.JWKSNoMatchingKey) return 'permit_foreign';
  if (error instanceof errors.JWTClaimValidationFailed)
    return error.claim === 'aud' ? 'permit_other_device' : 'permit_foreign';
  if (error instanceof errors.JOSENotSupported || error instanceof errors.JWKSInvalid) return 'cannot_check';
  if (error instanceof errors.JOSEError) return 'permit_unreadable';
  // A browser that cannot check Ed25519 throws an error of its own: unknown is no.
  return 'cannot_check';
}

export async function checkPermit(check: PermitCheck): Promise<PermitFinding> {
  let payload: unknown;
  try {
    const verified = await jwtVerify(check.token, createLocalJWKSet({ keys: check.keys.map((key) => ({ ...key })) }), {
      algorithms: ['EdDSA', 'Ed25519'],
      issuer: 'rampwell',
      audience: check.deviceId,
      currentDate: new Date(check.nowMs),
      requiredClaims: ['exp', 'iat', 'jti'],
    });
    payload = verified.payload;
  } catch (error) {
    return { ok: false, why: refusalOf(error) };
  }
  const claims = PermitClaims.safeParse(payload);
  if (!claims.success) return { ok: false, why: 'permit_unreadable' };
  if (claims.data.device !== check.deviceId) return { ok: false, why: 'permit_other_device' };
  // jose reads only whole seconds; what expires at T is over at T.
  if (claims.data.exp * 1000 <= check.nowMs) return { ok: false, why: 'permit_expired' };
  if (claims.data.iat * 1000 > check.nowMs + aheadSeconds * 1000) return { ok: false, why: 'permit_not_yet' };
  if (claims.data.counter <= check.highestCounter) return { ok: false, why: 'permit_old' };
  return { ok: true, claims: claims.data };
}
