// "May I start now?" — the answer, and the pre-check that comes before it.

import { z } from 'zod';
import { precheckAnswersSchema } from '@/shared/values/precheck-answers';
import { Instant, Language, Uuid } from '@/shared/values/primitives';
import { SiteContact } from './account';
import { contract } from './contract';
import { DoseView } from './course';
import { Reason } from './problem';

export const PrecheckView = z.strictObject({
  id: Uuid,
  answeredAt: Instant,
  /** Over at this instant (30 min after the answers). */
  expiresAt: Instant,
  complete: z.boolean(),
  open: z.array(z.string()),
  outcome: z.enum(['go_on', 'caution', 'hold_tomorrow', 'hold_review', 'emergency']).nullable(),
  findings: z.array(z.strictObject({ code: z.string(), outcome: z.string() })),
  emergencyAdvice: z.boolean(),
});
export type PrecheckView = z.infer<typeof PrecheckView>;

export const ClearanceView = z.strictObject({
  participantId: Uuid,
  courseId: Uuid.nullable(),
  /** The server's clock when it answered. */
  asOf: Instant,
  zone: z.string(),
  allowed: z.boolean(),
  /** Nothing but a pre-check (and what only a pre-check tells) stands in the way. */
  readyForPrecheck: z.boolean(),
  reasons: z.array(Reason),
  /** When time alone would have cleared what time clears; null when somebody must act, or nothing waits. */
  earliestStartAt: Instant.nullable(),
  nextSession: z
    .strictObject({ plannedSessionId: Uuid, number: z.number().int(), of: z.number().int(), windowFrom: Instant, windowTo: Instant })
    .nullable(),
  dose: DoseView.nullable(),
  assisted: z.boolean(),
  /** Facts that decide which questions the pre-check asks. */
  precheckFacts: z.strictObject({ excludesPregnancy: z.boolean(), helperAsked: z.boolean() }),
  precheck: PrecheckView.nullable(),
  livePermitId: Uuid.nullable(),
  /** The session of that permit, or one that is not closed. */
  openSessionId: Uuid.nullable(),
  /** A closed session that has no diary yet. */
  diaryDueSessionId: Uuid.nullable(),
  /** A closed session of yesterday or before whose next-day questions are due. */
  nextDayDueSessionId: Uuid.nullable(),
  prescriptionToAcknowledgeId: Uuid.nullable(),
  /** The last version that the participant has confirmed; 0 = none yet. */
  acknowledgedVersion: z.number().int(),
  site: SiteContact,
});
export type ClearanceView = z.infer<typeof ClearanceView>;

export const readClearance = contract({
  name: 'clearance.read',
  method: 'GET',
  path: '/api/clearance',
  who: ['participant', 'caregiver', 'coordinator', 'clinician', 'monitor'],
  reach: 'own-or-site',
  query: z.strictObject({ courseId: Uuid.optional() }),
  answer: ClearanceView,
  about: 'May a session start now? Allowed, or every reason why not. One’s own; staff and assisting caregivers name `courseId`.',
});

export const answerPrecheck = contract({
  name: 'precheck.answer',
  method: 'POST',
  path: '/api/prechecks',
  who: ['participant'],
  reach: 'own',
  once: true,
  body: z.strictObject({
    answers: precheckAnswersSchema,
    /** The caregiver's own code, where the prescription demands a helper. */
    helperCode: z.string().regex(/^[0-9]{6}$/).optional(),
    language: Language.default('en'),
  }),
  answer: PrecheckView,
  status: 201,
  refusals: ['course.none', 'precheck.helper_code_wrong'],
  touches: ['clearance', 'precheck', 'worklist'],
  about: 'Stores the answers with the outcome of each rule. A hold found is stored and no later answer clears it.',
  example: {
    body: {
      answers: {
        seizure: 'no',
        faint: 'no',
        headInjury: 'no',
        implantOrMetal: false,
        skin: 'ok',
        mood: [],
        headache: 0,
        sleptHours: 7,
        drinksLast12h: 0,
        drinks12To24h: 0,
        feelsAlcohol: false,
        drugs24h: false,
        newMedicine: 'none',
        unwell: false,
        ready: true,
      },
      language: 'en',
    },
  },
});
