// Caregivers: invited and removed by the participant, who switches what each may see.

import { z } from 'zod';
import { Email, Instant, PersonName, Uuid, pageOf, pageQuery } from '@/shared/values/primitives';
import { contract } from './contract';
import { Adherence, CourseMark } from './course';

export const Shares = z.strictObject({ adherence: z.boolean(), diary: z.boolean(), missedMail: z.boolean() });

export const CaregiverView = z.strictObject({
  id: Uuid,
  name: z.string(),
  email: z.string(),
  state: z.enum(['invited', 'active']),
  shares: Shares,
  /** The caregiver stopped the mails by the link. */
  mailsStopped: z.boolean(),
  hasCode: z.boolean(),
  since: Instant,
});
export type CaregiverView = z.infer<typeof CaregiverView>;

export const listCaregivers = contract({
  name: 'caregiver.list',
  method: 'GET',
  path: '/api/caregivers',
  who: ['participant'],
  reach: 'own',
  query: z.strictObject(pageQuery),
  answer: pageOf(CaregiverView),
  about: 'Own caregivers and what each may see.',
});

export const inviteCaregiver = contract({
  name: 'caregiver.invite',
  method: 'POST',
  path: '/api/caregivers',
  who: ['participant'],
  reach: 'own',
  once: true,
  body: z.strictObject({ name: PersonName, email: Email, shares: Shares }),
  answer: CaregiverView,
  status: 201,
  refusals: [
    'caregiver.already_invited',
    'caregiver.address_is_staff_or_participant',
    'caregiver.too_many',
    'participant.withdrawn',
  ],
  touches: ['caregiver'],
  about: 'Invites a caregiver by mail.',
  example: {
    body: {
      name: 'Tam Marlow',
      email: 'tam.marlow@harrowmere.example',
      shares: { adherence: true, diary: false, missedMail: true },
    },
  },
});

export const changeShares = contract({
  name: 'caregiver.change-shares',
  method: 'POST',
  path: '/api/caregivers/:caregiverId/shares',
  who: ['participant'],
  reach: 'own',
  once: true,
  params: z.strictObject({ caregiverId: Uuid }),
  body: Shares,
  answer: CaregiverView,
  touches: ['caregiver'],
  about: 'Switches what a caregiver may see, from now on.',
  example: { body: { adherence: true, diary: true, missedMail: false } },
});

export const removeCaregiver = contract({
  name: 'caregiver.remove',
  method: 'POST',
  path: '/api/caregivers/:caregiverId/removal',
  who: ['participant'],
  reach: 'own',
  once: true,
  params: z.strictObject({ caregiverId: Uuid }),
  body: z.strictObject({}),
  answer: z.strictObject({ removedAt: Instant }),
  touches: ['caregiver'],
  about: 'Removes a caregiver at once. Idempotent.',
});

export const SharedPerson = z.strictObject({
  caregiverId: Uuid,
  participantId: Uuid,
  firstName: z.string(),
  shares: Shares,
  assisted: z.boolean(),
  /** Null unless adherence is shared. */
  course: z.strictObject({ marks: z.array(CourseMark), adherence: Adherence, nextFrom: Instant.nullable() }).nullable(),
  zone: z.string(),
  sitePhone: z.string(),
  siteName: z.string(),
  emergencyNumber: z.string(),
});
export type SharedPerson = z.infer<typeof SharedPerson>;

export const readShared = contract({
  name: 'caregiver.read-shared',
  method: 'GET',
  path: '/api/shared',
  who: ['caregiver'],
  reach: 'shared',
  query: z.strictObject(pageQuery),
  answer: pageOf(SharedPerson),
  about: 'The people who share something with this caregiver, and only that.',
});

export const readSharedDiary = contract({
  name: 'caregiver.read-shared-diary',
  method: 'GET',
  path: '/api/shared/:participantId/diary',
  who: ['caregiver'],
  reach: 'shared',
  params: z.strictObject({ participantId: Uuid }),
  query: z.strictObject(pageQuery),
  answer: pageOf(
    z.strictObject({
      number: z.number().int(),
      startedAt: Instant,
      headache: z.number().nullable(),
      effects: z.array(z.strictObject({ kind: z.string(), strength: z.number() })),
      skin: z.string().nullable(),
    }),
  ),
  about: 'The diary of a participant who shares it: what was felt, no dose.',
});

export const setCaregiverCode = contract({
  name: 'caregiver.set-code',
  method: 'POST',
  path: '/api/shared/code',
  who: ['caregiver'],
  reach: 'shared',
  body: z.strictObject({ code: z.string().regex(/^[0-9]{6}$/) }),
  answer: z.strictObject({ set: z.literal(true) }),
  touches: ['caregiver'],
  about: 'The caregiver’s own six digits, typed on the participant’s phone at an assisted session. Idempotent.',
  example: { body: { code: '274913' } },
});
