// A session as delivered, its diary and photos.

import { z } from 'zod';
import { diaryAnswersSchema, nextDayAnswersSchema } from '@/shared/values/diary-answers';
import { Instant, Uuid, pageOf, pageQuery } from '@/shared/values/primitives';
import { SiteContact } from './account';
import { contract } from './contract';
import { DoseView } from './course';

export const Delivered = z.strictObject({
  /** From the device's samples by the trapezoid rule, on the server. */
  chargeCoulomb: z.number(),
  /** The same with every gap counted at the planned current; limits use this one. */
  upperChargeCoulomb: z.number(),
  minutes: z.number(),
  fraction: z.number(),
  completeness: z.enum(['complete', 'partial', 'not_delivered']),
  gaps: z.array(z.strictObject({ fromSeconds: z.number(), toSeconds: z.number() })),
  conflicts: z.number().int(),
});

export const PhotoView = z.strictObject({ id: Uuid, takenAt: Instant, width: z.number().int(), height: z.number().int() });

export const DiaryView = z.strictObject({
  id: Uuid,
  sessionId: Uuid,
  kind: z.enum(['after', 'next_day']),
  writtenAt: Instant,
  after: diaryAnswersSchema.nullable(),
  nextDay: nextDayAnswersSchema.nullable(),
  photos: z.array(PhotoView),
  lockouts: z.array(z.strictObject({ code: z.string(), level: z.string() })),
  emergencyAdvice: z.boolean(),
});
export type DiaryView = z.infer<typeof DiaryView>;

export const SessionView = z.strictObject({
  id: Uuid,
  permitId: Uuid,
  courseId: Uuid,
  participantId: Uuid,
  number: z.number().int(),
  of: z.number().int(),
  /** permitted: not begun; awaiting_record: begun, but its record is not whole. */
  state: z.enum(['permitted', 'running', 'awaiting_record', 'closed', 'void']),
  permitState: z.enum(['live', 'used', 'expired', 'void']),
  startedAt: Instant.nullable(),
  endedAt: Instant.nullable(),
  endReason: z.string().nullable(),
  dose: DoseView,
  delivered: Delivered.nullable(),
  /** Thinned curve `[seconds, mA]`, at most 400 points. */
  curve: z.array(z.tuple([z.number(), z.number()])),
  contact: z.array(z.strictObject({ position: z.string(), worstKiloohm: z.number().nullable(), lastKiloohm: z.number().nullable() })),
  pauses: z.array(z.strictObject({ atSeconds: z.number(), lengthSeconds: z.number() })),
  sensations: z.array(z.strictObject({ atSeconds: z.number(), sensation: z.string(), strength: z.number() })),
  missingSequences: z.array(z.number().int()),
  diary: DiaryView.nullable(),
  nextDay: DiaryView.nullable(),
  /** After this session: when the next one may be, for the receipt. */
  nextFrom: Instant.nullable(),
  zone: z.string(),
  site: SiteContact,
});
export type SessionView = z.infer<typeof SessionView>;

const sessionParams = z.strictObject({ sessionId: Uuid });

export const readSession = contract({
  name: 'session.read',
  method: 'GET',
  path: '/api/sessions/:sessionId',
  who: ['participant', 'coordinator', 'clinician', 'monitor'],
  reach: 'own-or-site',
  params: sessionParams,
  answer: SessionView,
  about: 'One session: planned, delivered as the server computed it, felt.',
});

export const writeDiary = contract({
  name: 'diary.write',
  method: 'POST',
  path: '/api/sessions/:sessionId/diary',
  who: ['participant'],
  reach: 'own',
  once: true,
  params: sessionParams,
  body: z.discriminatedUnion('kind', [
    z.strictObject({ kind: z.literal('after'), answers: diaryAnswersSchema }),
    z.strictObject({ kind: z.literal('next_day'), answers: nextDayAnswersSchema }),
  ]),
  answer: DiaryView,
  status: 201,
  refusals: ['session.not_ended', 'diary.already_written'],
  touches: ['diary', 'session', 'clearance', 'worklist', 'course'],
  about: 'The diary of a session, or the next day’s questions. Lockouts that follow open in the same transaction.',
  example: {
    body: {
      kind: 'after',
      answers: {
        nothingFelt: false,
        effects: [{ kind: 'tingling', strength: 3, stillThere: false }],
        headacheAfter: 0,
        skin: 'ok',
        redFlags: [],
      },
    },
  },
});

export const listDiary = contract({
  name: 'diary.list',
  method: 'GET',
  path: '/api/diary',
  who: ['participant'],
  reach: 'own',
  query: z.strictObject(pageQuery),
  answer: pageOf(
    z.strictObject({
      sessionId: Uuid,
      number: z.number().int(),
      startedAt: Instant,
      deliveredMinutes: z.number().nullable(),
      intensityMilliamp: z.number(),
      completeness: z.string().nullable(),
      diary: DiaryView.nullable(),
      nextDay: DiaryView.nullable(),
      nextDayDue: z.boolean(),
    }),
  ),
  about: 'Own sessions with their diaries, newest first.',
});

export const addPhoto = contract({
  name: 'photo.add',
  method: 'POST',
  path: '/api/sessions/:sessionId/photos',
  who: ['participant'],
  reach: 'own',
  once: true,
  upload: true,
  params: sessionParams,
  body: z.strictObject({ consent: z.literal('true') }),
  answer: PhotoView,
  status: 201,
  refusals: ['photo.type_not_allowed', 'photo.too_large', 'photo.unreadable', 'photo.too_many', 'photo.no_consent'],
  touches: ['session', 'diary'],
  about: 'A skin photo: JPEG, PNG or WebP by content, at most 8 MB; re-encoded, without its metadata.',
});

export const readPhoto = contract({
  name: 'photo.read',
  method: 'GET',
  path: '/api/photos/:photoId',
  who: ['participant', 'coordinator', 'clinician'],
  reach: 'own-or-site',
  raw: true,
  params: z.strictObject({ photoId: Uuid }),
  answer: z.strictObject({ type: z.literal('image/jpeg'), bytes: z.instanceof(Uint8Array) }),
  about: 'The bytes of a photo, for those allowed.',
});
