// The worklist and the reviews that take a row off it.

import { z } from 'zod';
import { Instant, Paragraph, PasswordAgain, Uuid, pageOf, pageQuery } from '@/shared/values/primitives';
import { contract } from './contract';
import { CourseMark } from './course';

export const worklistLevels = ['safety', 'review', 'look', 'device', 'flag', 'due'] as const;

export const WorklistItem = z.strictObject({
  id: Uuid,
  participantId: Uuid,
  name: z.string(),
  code: z.string(),
  level: z.enum(worklistLevels),
  /** Why it is here: a lockout, flag or task code; the screen makes the sentence with `facts`. */
  why: z.string(),
  facts: z.record(z.string(), z.union([z.string(), z.number(), z.boolean(), z.null()])),
  openedAt: Instant,
  owner: z.strictObject({ accountId: z.string(), name: z.string(), isMe: z.boolean() }).nullable(),
  next: z.enum(['review', 'open_session', 'sign', 'call', 'device', 'train', 'look']),
  sessionId: Uuid.nullable(),
  prescriptionId: Uuid.nullable(),
  lockoutId: Uuid.nullable(),
  marks: z.array(CourseMark),
});
export type WorklistItem = z.infer<typeof WorklistItem>;

export const readWorklist = contract({
  name: 'worklist.read',
  method: 'GET',
  path: '/api/worklist',
  who: ['coordinator', 'clinician', 'monitor'],
  reach: 'site',
  query: z.strictObject({
    ...pageQuery,
    whose: z.enum(['all', 'mine_and_nobodys']).default('all'),
    search: z.string().trim().max(100).optional(),
  }),
  answer: pageOf(WorklistItem).extend({ needing: z.number().int(), goingOn: z.number().int(), asOf: Instant }),
  about: 'Who needs somebody, most urgent first, each row with why, since when, whose and the next step.',
});

export const claimItem = contract({
  name: 'worklist.claim',
  method: 'POST',
  path: '/api/worklist/:itemId/claim',
  who: ['coordinator', 'clinician'],
  reach: 'site',
  once: true,
  params: z.strictObject({ itemId: Uuid }),
  body: z.strictObject({ claim: z.boolean() }),
  answer: WorklistItem,
  refusals: ['worklist.closed'],
  touches: ['worklist'],
  about: 'Takes a row (which acknowledges a page and stops its escalation), or gives it back.',
  example: { body: { claim: true } },
});

export const reviewDecisions = ['lift', 'keep', 'noted', 'done'] as const;

export const Grading = z.strictObject({
  severity: z.enum(['mild', 'moderate', 'severe']),
  serious: z.boolean(),
  /** Four levels (MDCG 2020-10/1); unsure = possible. */
  causality: z.enum(['not_related', 'possible', 'probable', 'causal']),
  expected: z.boolean(),
});

export const recordReview = contract({
  name: 'review.record',
  method: 'POST',
  path: '/api/reviews',
  who: ['coordinator', 'clinician'],
  reach: 'site',
  once: true,
  confirm: true,
  body: z.strictObject({
    itemId: Uuid,
    finding: Paragraph,
    /** lift: a lockout ends; keep: seen, the lockout stays and so does the row; noted / done: the row closes. */
    decision: z.enum(reviewDecisions),
    reason: Paragraph,
    grading: Grading.optional(),
    password: PasswordAgain,
  }),
  answer: z.strictObject({ id: Uuid, at: Instant, itemClosed: z.boolean(), lockoutClosed: z.boolean() }),
  status: 201,
  refusals: ['worklist.closed', 'review.clinician_decides', 'review.nothing_to_lift', 'review.lockout_open'],
  touches: ['worklist', 'review', 'participant', 'clearance'],
  about:
    'A signed look at a row: finding, decision, reason. A safety or review lockout is a clinician’s; a device hold also a coordinator’s.',
  example: {
    body: {
      itemId: '7d2a9e4c-3b5f-4d6e-8a1c-0f9e8d7c6b5a',
      finding: 'Redness gone by noon, skin intact',
      decision: 'lift',
      reason: 'Pad was dry; shown again how to wet it',
      grading: { severity: 'mild', serious: false, causality: 'probable', expected: true },
      password: 'the password again',
    },
  },
});

export const listReviews = contract({
  name: 'review.list',
  method: 'GET',
  path: '/api/participants/:participantId/reviews',
  who: ['coordinator', 'clinician', 'monitor'],
  reach: 'site',
  params: z.strictObject({ participantId: Uuid }),
  query: z.strictObject(pageQuery),
  answer: pageOf(
    z.strictObject({
      id: Uuid,
      at: Instant,
      by: z.string(),
      why: z.string(),
      finding: z.string(),
      decision: z.enum(reviewDecisions),
      reason: z.string(),
      grading: Grading.nullable(),
      /** False: it is not what was signed. */
      isIntact: z.boolean(),
    }),
  ),
  about: 'Reviews of a participant, newest first.',
});
