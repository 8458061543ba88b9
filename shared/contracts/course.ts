// The course: planned sessions, the strip's marks, pausing, and moving a session. What a mark looks like is the picture's business.

import { z } from 'zod';
import { Instant, Line, LocalDate, Uuid } from '@/shared/values/primitives';
import { contract } from './contract';

export const markStates = [
  'delivered',
  'partial',
  'planned',
  'next',
  'missed',
  'held',
  'running',
  'excused',
  'cancelled',
] as const;

export const CourseMark = z.strictObject({
  plannedSessionId: Uuid,
  sessionId: Uuid.nullable(),
  number: z.number().int(),
  state: z.enum(markStates),
  /** Delivered part of the planned charge, 0 to 1; null while nothing was delivered. */
  fraction: z.number().nullable(),
  windowFrom: Instant,
  windowTo: Instant,
  startedAt: Instant.nullable(),
  deliveredMinutes: z.number().nullable(),
  plannedMinutes: z.number(),
  /** Headache of the diary, 0 to 10. */
  headache: z.number().nullable(),
});
export type CourseMark = z.infer<typeof CourseMark>;

export const Adherence = z.strictObject({
  complete: z.number().int(),
  planned: z.number().int(),
  /** Wilson 95 % (Wilson 1927); null while nothing was planned. */
  interval: z.strictObject({ low: z.number(), high: z.number() }).nullable(),
  missedRunning: z.number().int(),
});

export const DoseView = z.strictObject({
  waveform: z.enum(['tDCS']),
  intensityMilliamp: z.number(),
  rampUpSeconds: z.number(),
  holdSeconds: z.number(),
  rampDownSeconds: z.number(),
  chargeCoulomb: z.number(),
  minutes: z.number(),
  electrodes: z.array(
    z.strictObject({
      position: z.string(),
      polarity: z.enum(['anode', 'cathode']),
      areaSquareCentimetre: z.number(),
      share: z.number(),
    }),
  ),
});
export type DoseView = z.infer<typeof DoseView>;

export const CourseView = z.strictObject({
  id: Uuid,
  participantId: Uuid,
  state: z.enum(['active', 'paused', 'finished', 'withdrawn']),
  startsOn: LocalDate,
  zone: z.string(),
  prescriptionId: Uuid.nullable(),
  prescriptionVersion: z.number().int().nullable(),
  /** A signed version that waits for the participant's acknowledgement. */
  awaitingAcknowledgement: z.boolean(),
  dose: DoseView.nullable(),
  sessionsTotal: z.number().int(),
  sessionsDone: z.number().int(),
  marks: z.array(CourseMark),
  adherence: Adherence,
});
export type CourseView = z.infer<typeof CourseView>;

export const readCourse = contract({
  name: 'course.read',
  method: 'GET',
  path: '/api/courses/:courseId',
  who: ['participant', 'coordinator', 'clinician', 'monitor'],
  reach: 'own-or-site',
  params: z.strictObject({ courseId: Uuid }),
  answer: CourseView,
  about: 'A course with the marks of its strip.',
});

export const pauseCourse = contract({
  name: 'course.pause',
  method: 'POST',
  path: '/api/courses/:courseId/pause',
  who: ['clinician'],
  reach: 'site',
  once: true,
  params: z.strictObject({ courseId: Uuid }),
  body: z.strictObject({ paused: z.boolean(), reason: Line }),
  answer: CourseView,
  refusals: ['course.not_active', 'course.already_so'],
  touches: ['course', 'clearance', 'permit', 'participant', 'worklist'],
  about: 'Pauses a course, which voids a live permit at once, or lets it go on.',
  example: { body: { paused: true, reason: 'A cold, until it is over' } },
});

export const rescheduleSession = contract({
  name: 'course.reschedule-session',
  method: 'POST',
  path: '/api/planned-sessions/:plannedSessionId/reschedule',
  who: ['coordinator', 'clinician'],
  reach: 'site',
  once: true,
  params: z.strictObject({ plannedSessionId: Uuid }),
  body: z.strictObject({ day: LocalDate, reason: Line }),
  answer: CourseView,
  refusals: ['planned_session.closed', 'planned_session.day_taken', 'planned_session.outside_prescription'],
  touches: ['course', 'clearance', 'participant'],
  about: 'Moves one planned session to another day, in the prescription’s hours.',
  example: { body: { day: '2026-05-14', reason: 'Away on Wednesday' } },
});
