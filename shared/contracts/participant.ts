// Participants as staff see them: enrol, list, read, withdraw. What must stand before a first session is in readiness.ts.

import { z } from 'zod';
import {
  Email,
  Instant,
  Language,
  Line,
  LocalDate,
  PersonName,
  Phone,
  Uuid,
  Zone,
  pageOf,
  pageQuery,
} from '@/shared/values/primitives';
import { Adherence, CourseMark, CourseView } from './course';
import { contract } from './contract';

export const participantStates = [
  'invited',
  'training',
  'ready',
  'too_early',
  'held',
  'paused',
  'finished',
  'withdrawn',
] as const;
export const ParticipantState = z.enum(participantStates);

export const ParticipantRow = z.strictObject({
  id: Uuid,
  code: z.string(),
  /** Pseudonymous readers get the code here too. */
  name: z.string(),
  state: ParticipantState,
  siteName: z.string(),
  marks: z.array(CourseMark),
  adherence: Adherence.nullable(),
  prescribed: z.strictObject({ intensityMilliamp: z.number(), minutes: z.number() }).nullable(),
  lastEffect: z.strictObject({ kind: z.string(), strength: z.number(), at: Instant }).nullable(),
  nextFrom: Instant.nullable(),
  holds: z.number().int(),
  since: Instant,
});
export type ParticipantRow = z.infer<typeof ParticipantRow>;

export const listParticipants = contract({
  name: 'participant.list',
  method: 'GET',
  path: '/api/participants',
  who: ['coordinator', 'clinician', 'monitor'],
  reach: 'site',
  query: z.strictObject({
    ...pageQuery,
    search: z.string().trim().max(100).optional(),
    state: ParticipantState.optional(),
    sort: z.enum(['name', 'code', 'since']).default('name'),
  }),
  answer: pageOf(ParticipantRow),
  about: 'Participants of own sites, a page at a time.',
});

export const enrolParticipant = contract({
  name: 'participant.enrol',
  method: 'POST',
  path: '/api/participants',
  who: ['coordinator', 'clinician'],
  reach: 'site',
  once: true,
  body: z.strictObject({
    siteId: Uuid,
    name: PersonName,
    email: Email,
    phone: Phone,
    bornOn: LocalDate,
    zone: Zone,
    language: Language.default('en'),
    emergencyContact: z.strictObject({ name: PersonName, phone: Phone }),
  }),
  answer: z.strictObject({ id: Uuid, code: z.string(), invitationExpiresAt: Instant }),
  status: 201,
  refusals: ['participant.address_taken', 'participant.born_in_future', 'participant.too_young'],
  touches: ['participant', 'worklist'],
  about: 'Enrols a person at an own site and mails the invitation.',
  example: {
    body: {
      siteId: '0b4fbd0e-5d4c-4c7f-8f2b-0c0a4a3f5a01',
      name: 'Ines Marlow',
      email: 'ines.marlow@harrowmere.example',
      phone: '020 7946 0142',
      bornOn: '1984-03-02',
      zone: 'Europe/London',
      language: 'en',
      emergencyContact: { name: 'Tam Marlow', phone: '020 7946 0143' },
    },
  },
});

export const participantParams = z.strictObject({ participantId: Uuid });

export const inviteAgain = contract({
  name: 'participant.invite-again',
  method: 'POST',
  path: '/api/participants/:participantId/invitation',
  who: ['coordinator', 'clinician'],
  reach: 'site',
  once: true,
  params: participantParams,
  body: z.strictObject({}),
  answer: z.strictObject({ invitationExpiresAt: Instant }),
  status: 201,
  refusals: ['participant.has_account', 'participant.withdrawn'],
  touches: ['participant'],
  about: 'Mails a new invitation; the old link ends.',
});

/** What must stand before a first session, each with its state. */
export const Readiness = z.strictObject({
  accountActive: z.boolean(),
  consent: z.enum(['missing', 'outdated', 'current', 'withdrawn']),
  screening: z.enum(['missing', 'incomplete', 'excluded', 'expired', 'clear']),
  training: z.enum(['missing', 'expired', 'signed_off']),
  watched: z.strictObject({ done: z.number().int(), required: z.number().int() }),
  device: z.strictObject({ id: Uuid, label: z.string() }).nullable(),
  supplies: z.number().int(),
  prescription: z.enum(['none', 'draft', 'awaiting_second_signature', 'unacknowledged', 'acknowledged']),
});

export const LockoutView = z.strictObject({
  id: Uuid,
  level: z.enum(['safety', 'review', 'device', 'hold']),
  code: z.string(),
  source: z.enum(['precheck', 'diary', 'session', 'staff']),
  openedAt: Instant,
  until: Instant.nullable(),
  closedAt: Instant.nullable(),
  closedWhy: z.string().nullable(),
  worklistItemId: Uuid.nullable(),
});

export const ParticipantView = z.strictObject({
  id: Uuid,
  code: z.string(),
  name: z.string(),
  /** Null for pseudonymous readers. */
  contact: z
    .strictObject({
      email: z.string(),
      phone: z.string(),
      bornOn: LocalDate,
      emergencyContact: z.strictObject({ name: z.string(), phone: z.string() }),
    })
    .nullable(),
  siteId: Uuid,
  siteName: z.string(),
  zone: z.string(),
  ageYears: z.number().int(),
  state: ParticipantState,
  enrolledAt: Instant,
  withdrawnAt: Instant.nullable(),
  readiness: Readiness,
  course: CourseView.nullable(),
  lockouts: z.array(LockoutView),
  caregivers: z.array(z.strictObject({ id: Uuid, name: z.string(), state: z.enum(['invited', 'active']) })),
  unreadMessages: z.number().int(),
});
export type ParticipantView = z.infer<typeof ParticipantView>;

export const readParticipant = contract({
  name: 'participant.read',
  method: 'GET',
  path: '/api/participants/:participantId',
  who: ['coordinator', 'clinician', 'monitor'],
  reach: 'site',
  params: participantParams,
  answer: ParticipantView,
  about: 'One participant with readiness, course strip and open lockouts.',
});

export const timelineKinds = [
  'enrolled',
  'consent',
  'screening',
  'training',
  'watched_session',
  'device',
  'prescription',
  'acknowledgement',
  'session',
  'missed',
  'diary',
  'lockout',
  'review',
  'message',
  'pause',
  'withdrawal',
] as const;

export const TimelineEntry = z.strictObject({
  id: z.string(),
  kind: z.enum(timelineKinds),
  at: Instant,
  /** Codes and plain facts; the screen makes the sentence. */
  facts: z.record(z.string(), z.union([z.string(), z.number(), z.boolean(), z.null()])),
  by: z.string().nullable(),
  sessionId: Uuid.nullable(),
  prescriptionId: Uuid.nullable(),
});
export type TimelineEntry = z.infer<typeof TimelineEntry>;

export const readTimeline = contract({
  name: 'participant.read-timeline',
  method: 'GET',
  path: '/api/participants/:participantId/timeline',
  who: ['coordinator', 'clinician', 'monitor'],
  reach: 'site',
  params: participantParams,
  query: z.strictObject(pageQuery),
  answer: pageOf(TimelineEntry),
  about: 'Everything that happened to one participant, newest first.',
});

/** Points of the charts on one time axis. */
export const readTrends = contract({
  name: 'participant.read-trends',
  method: 'GET',
  path: '/api/participants/:participantId/trends',
  who: ['coordinator', 'clinician', 'monitor'],
  reach: 'site',
  params: participantParams,
  answer: z.strictObject({
    points: z.array(
      z.strictObject({
        sessionId: Uuid,
        number: z.number().int(),
        at: Instant,
        headache: z.number().nullable(),
        skin: z.number().nullable(),
        worstEffect: z.number().nullable(),
        deliveredCoulomb: z.number().nullable(),
        plannedCoulomb: z.number(),
        worstContactKiloohm: z.number().nullable(),
      }),
    ),
  }),
  about: 'Effects, skin, contact and delivered charge of each session, for charts.',
});

export const withdrawParticipant = contract({
  name: 'participant.withdraw',
  method: 'POST',
  path: '/api/participants/:participantId/withdrawal',
  who: ['coordinator', 'clinician'],
  reach: 'site',
  once: true,
  params: participantParams,
  body: z.strictObject({ reason: Line }),
  answer: z.strictObject({ withdrawnAt: Instant }),
  refusals: ['participant.withdrawn'],
  touches: ['participant', 'course', 'clearance', 'worklist'],
  about: 'Records that a person withdraws: permits end at once, records stay.',
  example: { body: { reason: 'Moves abroad and does not wish to go on' } },
});
