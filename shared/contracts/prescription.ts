// Writing, signing, amending and acknowledging a prescription. Shape here; every limit is judged by shared/rules/dose.ts.

import { z } from 'zod';
import {
  Instant,
  LocalDate,
  LocalTime,
  Milliamp,
  Paragraph,
  PasswordAgain,
  Seconds,
  Uuid,
  Weekday,
  pageOf,
  pageQuery,
} from '@/shared/values/primitives';
import { contract } from './contract';

export const ElectrodeBody = z.strictObject({
  /** 10-10 position, `F3`. */
  position: z.string().regex(/^[A-Za-z]{1,3}[0-9z]{1,2}$/),
  polarity: z.enum(['anode', 'cathode']),
  shape: z.enum(['pad']),
  areaSquareCentimetre: z.number().min(0).max(500),
  /** Part of the total current of its polarity, 0 to 1. */
  share: z.number().min(0).max(1),
});

export const DoseBody = z.strictObject({
  waveform: z.enum(['tDCS']),
  intensityMilliamp: Milliamp,
  rampUpSeconds: Seconds,
  holdSeconds: Seconds,
  rampDownSeconds: Seconds,
  electrodes: z.array(ElectrodeBody).min(2).max(2),
});

export const ScheduleBody = z.strictObject({
  startsOn: LocalDate,
  days: z.array(Weekday).min(1).max(7),
  hoursFrom: LocalTime,
  hoursTo: LocalTime,
  sessionsTotal: z.number().int().min(1).max(200),
  minGapHours: z.number().min(0).max(168),
  maxPerDay: z.number().int().min(1).max(4),
  maxPer7Days: z.number().int().min(1).max(28),
  /** Last day, in the participant's zone. */
  expiresOn: LocalDate,
  /** A missed session is added at the end (true), or lost. */
  makeUpMissed: z.boolean(),
});

export const LimitRow = z.strictObject({
  row: z.string(),
  value: z.number().nullable(),
  unit: z.string(),
  tier: z.enum(['accept', 'second_signature', 'refuse']),
  routineLimit: z.number().nullable(),
  siteLimit: z.number().nullable(),
  ceiling: z.number().nullable(),
  layer: z.string().nullable(),
  source: z.string(),
  fact: z.string().nullable(),
});
export type LimitRow = z.infer<typeof LimitRow>;

export const SignatureView = z.strictObject({
  name: z.string(),
  role: z.string(),
  meaning: z.enum(['prescribed', 'second_signature', 'reviewed', 'graded', 'protocol']),
  at: Instant,
  contentHash: z.string(),
});

export const PrescriptionView = z.strictObject({
  id: Uuid,
  courseId: Uuid,
  participantId: Uuid,
  version: z.number().int().nullable(),
  status: z.enum(['draft', 'awaiting_second_signature', 'signed', 'superseded', 'discarded']),
  dose: DoseBody,
  schedule: ScheduleBody,
  assisted: z.boolean(),
  reason: z.string().nullable(),
  amendsId: Uuid.nullable(),
  computed: z.strictObject({
    chargeCoulomb: z.number(),
    minutes: z.number(),
    maxDensityMilliampPerSquareCentimetre: z.number(),
  }),
  verdict: z.enum(['accept', 'second_signature', 'refuse']),
  rows: z.array(LimitRow),
  signatures: z.array(SignatureView),
  contentHash: z.string(),
  /** False: the content is not what was signed. It counts as unsigned, whatever its status says. */
  isIntact: z.boolean(),
  createdAt: Instant,
  signedAt: Instant.nullable(),
  acknowledgedAt: Instant.nullable(),
  livePermits: z.number().int(),
});
export type PrescriptionView = z.infer<typeof PrescriptionView>;

const exampleDose = {
  waveform: 'tDCS',
  intensityMilliamp: 2,
  rampUpSeconds: 30,
  holdSeconds: 1200,
  rampDownSeconds: 30,
  electrodes: [
    { position: 'F3', polarity: 'anode', shape: 'pad', areaSquareCentimetre: 35, share: 1 },
    { position: 'Fp2', polarity: 'cathode', shape: 'pad', areaSquareCentimetre: 35, share: 1 },
  ],
};

export const writePrescription = contract({
  name: 'prescription.write',
  method: 'POST',
  path: '/api/prescriptions',
  who: ['clinician'],
  reach: 'site',
  once: true,
  body: z.strictObject({
    participantId: Uuid,
    /** The signed prescription that this one amends; null for a first one. Another one in force = 409 `version.stale`. */
    amendsId: Uuid.nullable(),
    /** Needed for an amendment. */
    reason: Paragraph.nullable(),
    dose: DoseBody,
    schedule: ScheduleBody,
    assisted: z.boolean(),
  }),
  answer: PrescriptionView,
  status: 201,
  refusals: [
    'prescription.over_limit',
    'prescription.schedule',
    'prescription.reason_missing',
    'version.stale',
    'participant.withdrawn',
  ],
  touches: ['prescription', 'participant'],
  about:
    'Writes a draft. A dose above a limit is refused with the row, the limit, its layer and its source; nothing is clamped.',
  example: {
    body: {
      participantId: '5c3d8a52-7f4e-4b0e-9a57-3f1d2b7c9e10',
      amendsId: null,
      reason: null,
      dose: exampleDose,
      schedule: {
        startsOn: '2026-12-02',
        days: [1, 2, 3, 4, 5],
        hoursFrom: '07:00',
        hoursTo: '22:00',
        sessionsTotal: 20,
        minGapHours: 20,
        maxPerDay: 1,
        maxPer7Days: 5,
        expiresOn: '2027-01-31',
        makeUpMissed: true,
      },
      assisted: false,
    },
  },
});

const prescriptionParams = z.strictObject({ prescriptionId: Uuid });

export const readPrescription = contract({
  name: 'prescription.read',
  method: 'GET',
  path: '/api/prescriptions/:prescriptionId',
  who: ['participant', 'coordinator', 'clinician', 'monitor'],
  reach: 'own-or-site',
  params: prescriptionParams,
  answer: PrescriptionView,
  about: 'One version of a prescription, with its limits and signatures.',
});

export const listPrescriptions = contract({
  name: 'prescription.list',
  method: 'GET',
  path: '/api/participants/:participantId/prescriptions',
  who: ['participant', 'coordinator', 'clinician', 'monitor'],
  reach: 'own-or-site',
  params: z.strictObject({ participantId: Uuid }),
  query: z.strictObject(pageQuery),
  answer: pageOf(PrescriptionView),
  about: 'All versions of a participant’s prescriptions, newest first. A participant sees signed ones.',
});

export const signPrescription = contract({
  name: 'prescription.sign',
  method: 'POST',
  path: '/api/prescriptions/:prescriptionId/sign',
  who: ['clinician'],
  reach: 'site',
  once: true,
  confirm: true,
  params: prescriptionParams,
  body: z.strictObject({
    /** Hash of what was on the screen; another content = 409 `version.stale`. */
    contentHash: z.string().length(64),
    meaning: z.enum(['prescribed', 'second_signature']),
    password: PasswordAgain,
  }),
  answer: PrescriptionView,
  refusals: [
    'version.stale',
    'prescription.over_limit',
    'prescription.schedule',
    'prescription.already_signed',
    'prescription.same_signer',
    'prescription.not_awaiting',
    'participant.withdrawn',
  ],
  touches: ['prescription', 'participant', 'course', 'clearance', 'permit', 'worklist'],
  about:
    'Signs with the password again. It takes effect with its last needed signature: a live permit is void at once.',
  example: { body: { contentHash: '0'.repeat(64), meaning: 'prescribed', password: 'the password again' } },
});

export const acknowledgePrescription = contract({
  name: 'prescription.acknowledge',
  method: 'POST',
  path: '/api/prescriptions/:prescriptionId/acknowledgement',
  who: ['participant'],
  reach: 'own',
  once: true,
  params: prescriptionParams,
  body: z.strictObject({}),
  answer: z.strictObject({ acknowledgedAt: Instant }),
  refusals: ['version.stale'],
  touches: ['prescription', 'clearance', 'course'],
  about: 'The participant has read the prescription in force. Idempotent.',
});
