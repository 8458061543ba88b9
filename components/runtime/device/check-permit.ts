// The stimulator's own check of a permit: signature, who it is for, until when, its counter, its shape. It trusts nothing that
// the app says about the permit, and answers with a named refusal.

import { createLocalJWKSet, errors, jwtVerify } from 'jose';
import { PermitClaims } from '@/shared/contracts/permit';
import { ceilings } from '@/shared/rules/ceilings';
import { coulombOf, isAbove, milliampOf, minutesOf, secondsOf } from '@/shared/values/units';
import type { PermitKey, StartRefusal } from './stimulator';

export interface PermitCheck {
  token: string;
  keys: readonly PermitKey[];
  deviceId: string;
  /** The stimulator's idea of the time, ms since 1970. */
  nowMs: number;
  highestCounter: number;
  /** Who wears it, where it was told. */
  participantId?: string | undefined;
  /** Of the course that was last started here. */
  newestVersion?: { course: string; version: number } | null;
}
export type PermitFinding = { ok: true; claims: PermitClaims } | { ok: false; why: StartRefusal };

/** Two clocks that were set by the same server differ by the time an answer takes. Own choice. */
const aheadSeconds = 60;

function refusalOf(error: unknown): StartRefusal {
  if (error instanceof errors.JWTExpired) return 'permit_expired';
  if (error instanceof errors.JWSSignatureVerificationFailed) return 'permit_altered';
  if (error instanceof errors.JWKSNoMatchingKey || error instanceof errors.JOSEAlgNotAllowed) return 'permit_foreign';
  if (error instanceof errors.JWTClaimValidationFailed)
    return error.claim === 'aud' ? 'permit_other_device' : 'permit_foreign';
  if (error instanceof errors.JOSENotSupported || error instanceof errors.JWKSInvalid) return 'cannot_check';
  if (error instanceof errors.JOSEError) return 'permit_unreadable';
  // A browser that cannot check Ed25519 throws an error of its own: unknown is no.
  return 'cannot_check';
}

/** What no permit may ask for, whoever signed it. Same limits as the database's own. */
function isAboveCeiling(claims: PermitClaims): boolean {
  const onSeconds = secondsOf(claims.rampUpMs + claims.holdMs + claims.rampDownMs);
  return (
    isAbove(milliampOf(claims.intensityMicroamp), ceilings.currentMilliamp.value) ||
    isAbove(minutesOf(onSeconds), ceilings.minutes.value) ||
    isAbove(coulombOf(claims.chargeMicrocoulomb), ceilings.chargeCoulomb.value)
  );
}

/** What a good signature says about this stimulator, this wearer, this moment. */
function findingOf(claims: PermitClaims, check: PermitCheck): PermitFinding {
  const refused = (why: StartRefusal): PermitFinding => ({ ok: false, why });
  if (claims.device !== check.deviceId) return refused('permit_other_device');
  if (check.participantId !== undefined && claims.participant !== check.participantId)
    return refused('permit_other_person');
  // jose reads only whole seconds; what expires at T is over at T.
  if (claims.exp * 1000 <= check.nowMs) return refused('permit_expired');
  if (claims.iat * 1000 > check.nowMs + aheadSeconds * 1000) return refused('permit_not_yet');
  if (claims.counter <= check.highestCounter) return refused('permit_old');
  const { newestVersion: newest } = check;
  if (newest && newest.course === claims.course && claims.prescriptionVersion < newest.version)
    return refused('permit_older_version');
  if (isAboveCeiling(claims)) return refused('permit_above_ceiling');
  return { ok: true, claims };
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
  return findingOf(claims.data, check);
}
