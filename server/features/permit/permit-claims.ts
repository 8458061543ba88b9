// What a permit tells the stimulator, in the whole µA, ms and µC that it counts in.

import { doseOf, type StoredDose } from '@/db/queries/dose';
import type { PermitClaims } from '@/shared/contracts/permit';
import { secondsOf } from '@/shared/values/units';
import { parseInstant } from '@/shared/values/zone';

interface Given {
  id: string;
  participantId: string;
  courseId: string;
  deviceId: string;
  counter: number;
  issuedAt: string;
  expiresAt: string;
}

/** Whole seconds (RFC 7519), rounded down: a device ends a permit early rather than late. */
function epochSecondsOf(instant: string): number {
  return Math.floor(secondsOf(parseInstant(instant) ?? Number.NaN));
}

export function claimsOf(
  permit: Given,
  sessionId: string,
  prescription: StoredDose & { version: number | null },
): PermitClaims {
  return {
    iss: 'rampwell',
    aud: permit.deviceId,
    jti: permit.id,
    iat: epochSecondsOf(permit.issuedAt),
    exp: epochSecondsOf(permit.expiresAt),
    participant: permit.participantId,
    device: permit.deviceId,
    session: sessionId,
    course: permit.courseId,
    prescriptionVersion: prescription.version ?? 0,
    counter: permit.counter,
    waveform: prescription.waveform,
    intensityMicroamp: prescription.intensityUa,
    rampUpMs: prescription.rampUpMs,
    holdMs: prescription.holdMs,
    rampDownMs: prescription.rampDownMs,
    chargeMicrocoulomb: prescription.chargeUc,
    montage: doseOf(prescription).electrodes.map(({ position, polarity }) => ({ position, polarity })),
  };
}
