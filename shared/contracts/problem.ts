// The shape of every answer that is not the one asked for: RFC 9457 problem details with a stable code.

import { z } from 'zod';
import { Instant } from '@/shared/values/primitives';

/** A bad field: where, which stable code, what is allowed, in a sentence. */
export const FieldProblem = z.strictObject({
  path: z.string(),
  code: z.string(),
  message: z.string(),
});
export type FieldProblem = z.infer<typeof FieldProblem>;

/** One reason why not: code, sentence, who can resolve it and how to reach them, until when if time does. */
export const Reason = z.strictObject({
  code: z.string(),
  sentence: z.string(),
  resolvedBy: z.enum(['participant', 'coordinator', 'clinician', 'administrator', 'guardian', 'time', 'staff']),
  contact: z.strictObject({ name: z.string(), phone: z.string() }).nullable(),
  until: Instant.nullable(),
  fact: z.string().nullable(),
});
export type Reason = z.infer<typeof Reason>;

export const Problem = z.object({
  type: z.string(),
  title: z.string(),
  status: z.number().int(),
  detail: z.string(),
  code: z.string(),
  requestId: z.string(),
  fields: z.array(FieldProblem).optional(),
  reasons: z.array(Reason).optional(),
});
export type Problem = z.infer<typeof Problem>;
