// Worked cases of kind `permit`: a permit as issued, the present state, and what is asked of it.

import { z } from 'zod';
import {
  mayIssue,
  mayStartWithPermit,
  releaseOf,
  type PermitAnswer,
  type PermitFacts,
  type PermitPresentFacts,
  type ReleaseEvidence,
} from '../permit';
import { kindOf, present } from './form';

const number = z.number().optional();
const flag = z.boolean().optional();
const text = z.string().optional();

const permitSchema = z.strictObject({
  id: text,
  participant: text,
  device: text,
  prescription_version: number,
  intensity_mA: number,
  counter: number,
  issued_at: text,
  expires_at: text,
  key: text,
  charge_C: number,
  minutes: number,
  used: flag,
});
const currentSchema = z.strictObject({
  prescription_version: number,
  paused: flag,
  lockout: flag,
  device_last_counter: number,
  precheck_answered_at: text,
  zone: text,
  hours_from: text,
  hours_to: text,
  prescription_expires_at: text,
});
const evidenceSchema = z.discriminatedUnion('type', [
  z.strictObject({ type: z.literal('record'), final: flag, upper_C: number, minutes: number }),
  z.strictObject({ type: z.literal('readout'), shows_use: flag }),
  z.strictObject({ type: z.literal('statement'), by: text, text: text }),
]);
const givenSchema = z.strictObject({
  permit: permitSchema.optional(),
  current: currentSchema.optional(),
  ask: z.discriminatedUnion('type', [
    z.strictObject({ type: z.literal('start'), device: text, counter: number }),
    z.strictObject({ type: z.literal('issue'), key: text }),
    z.strictObject({ type: z.literal('release'), evidence: evidenceSchema.optional() }),
  ]),
});

function permitOf(permit: z.infer<typeof permitSchema>): PermitFacts {
  return {
    id: permit.id,
    deviceId: permit.device,
    prescriptionVersion: permit.prescription_version,
    counter: permit.counter,
    issuedAt: permit.issued_at,
    expiresAt: permit.expires_at,
    key: permit.key,
    isUsed: permit.used,
    chargeCoulomb: permit.charge_C,
    minutes: permit.minutes,
  };
}

function presentOf(current: z.infer<typeof currentSchema>): PermitPresentFacts {
  return {
    prescriptionVersion: current.prescription_version,
    isPaused: current.paused,
    isLocked: current.lockout,
    deviceLastCounter: current.device_last_counter,
    precheckAnsweredAt: current.precheck_answered_at,
    zone: current.zone,
    hoursFrom: current.hours_from,
    hoursTo: current.hours_to,
    prescriptionExpiresAt: current.prescription_expires_at,
  };
}

function evidenceOf(evidence: z.infer<typeof evidenceSchema> | undefined): ReleaseEvidence | undefined {
  if (evidence?.type === 'record') {
    const { final, upper_C, minutes } = evidence;
    return { type: 'record', isFinal: final, upperChargeCoulomb: upper_C, minutes };
  }
  if (evidence?.type === 'readout') return { type: 'readout', showsUse: evidence.shows_use };
  return evidence && { type: 'statement' };
}

/** The file lists reasons and missing facts only where there are some. */
function validity({ valid, reasons, facts }: PermitAnswer): Readonly<Record<string, unknown>> {
  return present({
    valid,
    reasons: reasons.length > 0 ? reasons : undefined,
    facts: facts.length > 0 ? facts : undefined,
  });
}

export const permitKind = kindOf(givenSchema, ({ permit, current, ask }, now) => {
  const given = permit && permitOf(permit);
  const state = current && presentOf(current);
  if (ask.type === 'start') {
    return validity(mayStartWithPermit(given, state, { deviceId: ask.device, counter: ask.counter }, now));
  }
  if (ask.type === 'release') {
    const release = releaseOf(given ?? {}, evidenceOf(ask.evidence));
    return present({ state: release.state, charge_C: release.chargeCoulomb, minutes: release.minutes });
  }
  const answer = mayIssue(given, state, ask.key, now);
  return present({
    ...validity(answer),
    permit_id: answer.permitId,
    new_permit: answer.isNewPermit,
    expires_at: answer.expiresAt,
    expires_by: answer.expiresBy,
  });
});
