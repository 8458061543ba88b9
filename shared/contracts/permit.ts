// The permit, and the session's events that come in under it.

import { z } from 'zod';
import { redFlags } from '@/shared/values/codes';
import { Instant, Uuid } from '@/shared/values/primitives';
import { contract } from './contract';
import { DoseView } from './course';

export const PermitView = z.strictObject({
  id: Uuid,
  sessionId: Uuid,
  courseId: Uuid,
  participantId: Uuid,
  deviceId: Uuid,
  prescriptionVersion: z.number().int(),
  state: z.enum(['live', 'used', 'expired', 'void']),
  /** Why it is void, a stable code; null unless it is. */
  voidedBy: z.string().nullable(),
  issuedAt: Instant,
  expiresAt: Instant,
  expiresBy: z.enum(['issue', 'precheck', 'hours', 'prescription']),
  counter: z.number().int(),
  /** Compact JWS (RFC 7515), Ed25519 (RFC 8037), that the stimulator checks itself. */
  token: z.string(),
  dose: DoseView,
  sessionNumber: z.number().int(),
  sessionsTotal: z.number().int(),
});
export type PermitView = z.infer<typeof PermitView>;

/** The claims inside the token. Amounts are whole µA, ms, µC, as the device counts. */
export const PermitClaims = z.strictObject({
  iss: z.literal('rampwell'),
  aud: z.string(),
  jti: Uuid,
  iat: z.number().int(),
  exp: z.number().int(),
  participant: Uuid,
  device: Uuid,
  session: Uuid,
  course: Uuid,
  /** Within its course. */
  prescriptionVersion: z.number().int(),
  counter: z.number().int(),
  waveform: z.enum(['tDCS']),
  intensityMicroamp: z.number().int().positive(),
  rampUpMs: z.number().int().nonnegative(),
  holdMs: z.number().int().nonnegative(),
  rampDownMs: z.number().int().nonnegative(),
  chargeMicrocoulomb: z.number().int().positive(),
  montage: z.array(z.strictObject({ position: z.string(), polarity: z.enum(['anode', 'cathode']) })),
});
export type PermitClaims = z.infer<typeof PermitClaims>;

export const issuePermit = contract({
  name: 'permit.issue',
  method: 'POST',
  path: '/api/permits',
  who: ['participant'],
  reach: 'own',
  once: 'required',
  replay: 'action',
  body: z.strictObject({
    courseId: Uuid,
    precheckId: Uuid,
    /** As the stimulator reported it just now; unknown = refused. */
    batteryPercent: z.number().int().min(0).max(100),
    deviceId: Uuid,
  }),
  answer: PermitView,
  status: 201,
  refusals: ['clearance.refused', 'permit.too_many'],
  touches: ['clearance', 'permit', 'session'],
  about:
    'Asks for one permit. Refused (409) with every reason at once. The same key gives the same permit with its present state.',
  example: {
    body: {
      courseId: '8f5f2c3e-6f0b-4a62-8b6a-0e5d3c1b2a90',
      precheckId: '2b7e4f0a-1c4d-4e8f-9a0b-6d5c4b3a2f10',
      batteryPercent: 80,
      deviceId: '7d2a9e4c-3b5f-4d6e-8a1c-0f9e8d7c6b5a',
    },
  },
});

export const readPermit = contract({
  name: 'permit.read',
  method: 'GET',
  path: '/api/permits/:permitId',
  who: ['participant'],
  reach: 'own',
  params: z.strictObject({ permitId: Uuid }),
  answer: PermitView,
  about: 'A permit with its present state: void at once after an amendment, pause or lockout.',
});

export const readPermitKeys = contract({
  name: 'permit.read-keys',
  method: 'GET',
  path: '/api/permit-keys',
  who: ['anyone', 'participant', 'caregiver', 'coordinator', 'clinician', 'monitor', 'administrator'],
  reach: 'open',
  answer: z.strictObject({
    keys: z.array(
      z.strictObject({
        kty: z.literal('OKP'),
        crv: z.literal('Ed25519'),
        x: z.string(),
        kid: z.string(),
        alg: z.literal('EdDSA'),
        use: z.literal('sig'),
      }),
    ),
  }),
  about: 'Public keys (JWK set, RFC 7517) that a stimulator is given when it is set up.',
});

export const readOwnDevice = contract({
  name: 'device.read-own',
  method: 'GET',
  path: '/api/own-device',
  who: ['participant'],
  reach: 'own',
  answer: z
    .strictObject({
      id: Uuid,
      label: z.string(),
      model: z.string(),
      serial: z.string(),
      lastCounter: z.number().int(),
      recalled: z.boolean(),
    })
    .nullable(),
  about: 'The stimulator that the participant holds, for pairing.',
});

const at = {
  /** Made on the phone; the server keeps each once. */
  id: Uuid,
  /** 0, 1, 2 … within the session; a missing number shows as a gap. */
  sequence: z.number().int().min(0).max(1_000_000),
  /** Seconds since the start of the ramp up, on the device's monotonic clock; 0 before it. */
  atSeconds: z.number().min(0).max(86_400),
};

export const endReasons = [
  'complete',
  'stopped',
  'pause_limit',
  'lost_contact',
  'too_short_to_resume',
  'red_flag',
  'pain_high',
  'over_current',
  'permit_void',
  'device_fault',
] as const;

export const SessionEvent = z.discriminatedUnion('kind', [
  z.strictObject({
    ...at,
    kind: z.literal('identified'),
    deviceId: Uuid,
    serial: z.string().max(100),
    firmware: z.string().max(100),
    batteryPercent: z.number().min(0).max(100),
  }),
  z.strictObject({
    ...at,
    kind: z.literal('contact'),
    position: z.string().max(6),
    kiloohm: z.number().min(0).max(10_000).nullable(),
    grade: z.enum(['good', 'weak', 'none']),
  }),
  z.strictObject({ ...at, kind: z.literal('started'), counter: z.number().int() }),
  z.strictObject({
    ...at,
    kind: z.literal('samples'),
    /** `[seconds, mA]` (envelope for AC), at 1 Hz or faster. */
    samples: z
      .array(z.tuple([z.number().min(0).max(86_400), z.number().min(-20).max(20)]))
      .min(1)
      .max(600),
    /** `[position, kΩ]`, latest of the batch. */
    impedance: z.array(z.tuple([z.string().max(6), z.number().min(0).max(10_000)])).max(12),
  }),
  z.strictObject({ ...at, kind: z.enum(['contact_lost', 'contact_back', 'pause', 'resume']) }),
  z.strictObject({
    ...at,
    kind: z.literal('stop'),
    why: z.enum(['button', 'red_flag', 'pain_high', 'permit_void', 'over_current', 'clock_implausible']),
  }),
  z.strictObject({
    ...at,
    kind: z.literal('sensation'),
    sensation: z.string().max(40),
    strength: z.number().int().min(0).max(10),
  }),
  z.strictObject({ ...at, kind: z.literal('red_flag'), flag: z.enum(redFlags) }),
  z.strictObject({
    ...at,
    kind: z.literal('ended'),
    reason: z.enum(endReasons),
    /** What the device itself counted; kept beside the server's own sum. */
    onSeconds: z.number().min(0).max(86_400),
    chargeCoulomb: z.number().min(0).max(1000),
    /** The last sequence number of this session: how the server knows that nothing is missing. */
    lastSequence: z.number().int().min(0).max(1_000_000),
  }),
]);
export type SessionEvent = z.infer<typeof SessionEvent>;

export const sendEvents = contract({
  name: 'session.send-events',
  method: 'POST',
  path: '/api/permits/:permitId/events',
  who: ['participant'],
  reach: 'own',
  params: z.strictObject({ permitId: Uuid }),
  body: z.strictObject({ events: z.array(SessionEvent).min(1).max(500) }),
  answer: z.strictObject({
    /** Ids stored now, ids that were there already, ids refused with why. */
    stored: z.array(Uuid),
    known: z.array(Uuid),
    refused: z.array(
      z.strictObject({ id: Uuid, code: z.enum(['other_content', 'from_the_future', 'sequence_taken', 'after_the_end', 'too_many']) }),
    ),
    sessionId: Uuid,
    sessionState: z.enum(['permitted', 'running', 'awaiting_record', 'closed', 'void']),
    /** Sequence numbers not yet here, up to the highest one that is. */
    missing: z.array(z.number().int()),
    /** `rampDown`: what runs on it goes down; `voidedBy` says why, also where the permit was used before. */
    permit: z.strictObject({
      state: z.enum(['live', 'used', 'expired', 'void']),
      voidedBy: z.string().nullable(),
      rampDown: z.boolean(),
    }),
  }),
  touches: ['session', 'clearance', 'course'],
  about: 'A batch of the session’s events, any order, any delay, each kept once. Idempotent by event id.',
  example: {
    body: {
      events: [
        {
          id: '1f0d9c55-8f5e-4f3a-9b52-0c3f7b8a9d01',
          sequence: 3,
          atSeconds: 30,
          kind: 'samples',
          samples: [
            [29, 1.93],
            [30, 2.0],
          ],
          impedance: [
            ['F3', 6.2],
            ['Fp2', 7.1],
          ],
        },
        {
          id: '1f0d9c55-8f5e-4f3a-9b52-0c3f7b8a9d02',
          sequence: 4,
          atSeconds: 42.5,
          kind: 'sensation',
          sensation: 'tingling',
          strength: 3,
        },
      ],
    },
  },
});
