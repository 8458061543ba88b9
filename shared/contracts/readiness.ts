// What must stand before a first session, as staff record it: consent, screening, training, watched sessions.

import { z } from 'zod';
import { Instant, LocalDate, Paragraph, PersonName, Uuid } from '@/shared/values/primitives';
import { contract } from './contract';
import { participantParams } from './participant';

export const recordConsent = contract({
  name: 'consent.record',
  method: 'POST',
  path: '/api/participants/:participantId/consents',
  who: ['coordinator', 'clinician'],
  reach: 'site',
  once: true,
  params: participantParams,
  body: z.strictObject({
    kind: z.enum(['own', 'guardian', 'assent']).default('own'),
    documentVersion: z.number().int().min(1).max(1000),
    signedOn: LocalDate,
    /** Asked one by one, each answered. */
    understandsPurpose: z.boolean(),
    understandsRisks: z.boolean(),
    understandsMayStop: z.boolean(),
    agreesToDataUse: z.boolean(),
    agreesToPhotos: z.boolean(),
    questionsAnswered: z.boolean(),
    copyGiven: z.boolean(),
    remark: Paragraph.optional(),
  }),
  answer: z.strictObject({ id: Uuid }),
  status: 201,
  refusals: [
    'consent.not_given',
    'consent.version_unknown',
    'consent.signed_in_future',
    'participant.withdrawn',
    'protocol.none',
  ],
  touches: ['participant', 'clearance'],
  about: 'Records a signed consent by its version.',
  example: {
    body: {
      kind: 'own',
      documentVersion: 1,
      signedOn: '2026-05-11',
      understandsPurpose: true,
      understandsRisks: true,
      understandsMayStop: true,
      agreesToDataUse: true,
      agreesToPhotos: true,
      questionsAnswered: true,
      copyGiven: true,
    },
  },
});

export const recordScreening = contract({
  name: 'screening.record',
  method: 'POST',
  path: '/api/participants/:participantId/screenings',
  who: ['coordinator', 'clinician'],
  reach: 'site',
  once: true,
  params: participantParams,
  body: z.strictObject({
    /** Item id → answer; a `yes` on a relative item carries the reason for going on. Items: shared/rules/screening.ts. */
    answers: z.record(
      z.string().max(60),
      z.strictObject({ answer: z.enum(['yes', 'no', 'not_known']), reason: Paragraph.optional() }),
    ),
    seizureHistory: z.boolean(),
  }),
  answer: z.strictObject({ id: Uuid, outcome: z.enum(['clear', 'excluded', 'incomplete']), validUntil: Instant }),
  status: 201,
  refusals: [
    'screening.item_unknown',
    'screening.reason_missing',
    'screening.clinician_decides',
    'participant.withdrawn',
    'protocol.none',
  ],
  touches: ['participant', 'clearance'],
  about: 'Records the screening form; the outcome is the rule’s. Going on over a relative item is a clinician’s.',
  example: {
    body: {
      answers: {
        head_implant: { answer: 'no' },
        migraine_or_daily_headache: { answer: 'yes', reason: 'Rare, mild, and known to the clinician' },
      },
      seizureHistory: false,
    },
  },
});

export const recordTraining = contract({
  name: 'training.record',
  method: 'POST',
  path: '/api/participants/:participantId/trainings',
  who: ['coordinator', 'clinician'],
  reach: 'site',
  once: true,
  params: participantParams,
  body: z.strictObject({
    /** Skill id → seen done alone. Skills and capability items: shared/rules/screening.ts. */
    skills: z.record(z.string().max(60), z.boolean()),
    capability: z.record(z.string().max(60), z.boolean()),
    helperName: PersonName.optional(),
    remark: Paragraph.optional(),
  }),
  answer: z.strictObject({
    id: Uuid,
    signedOff: z.boolean(),
    open: z.array(z.string()),
    validUntil: Instant.nullable(),
  }),
  status: 201,
  refusals: ['training.skill_unknown', 'participant.withdrawn', 'protocol.none'],
  touches: ['participant', 'clearance'],
  about: 'Signs off the skills one by one; all of them make the sign-off.',
  example: {
    body: {
      skills: { wet_and_place: true, check_contact: true, stop: true },
      capability: { reading: true, quiet_seat: true },
    },
  },
});

export const recordWatchedSession = contract({
  name: 'training.record-watched-session',
  method: 'POST',
  path: '/api/participants/:participantId/watched-sessions',
  who: ['coordinator', 'clinician'],
  reach: 'site',
  once: true,
  params: participantParams,
  body: z.strictObject({
    where: z.enum(['clinic', 'live_video']),
    /** done: a watched session took place. now: somebody watches for the next two hours. */
    when: z.enum(['done', 'now']),
    tolerated: z.enum(['well', 'with_discomfort', 'not_tolerated']).optional(),
    remark: Paragraph.optional(),
  }),
  answer: z.strictObject({ id: Uuid, watched: z.number().int(), required: z.number().int() }),
  status: 201,
  refusals: ['training.tolerability_missing', 'participant.withdrawn', 'protocol.none'],
  touches: ['participant', 'clearance'],
  about: 'Records a watched session, or that somebody is watching now.',
  example: { body: { where: 'clinic', when: 'done', tolerated: 'well' } },
});
