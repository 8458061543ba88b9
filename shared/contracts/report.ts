// The audit trail, the site report, and exports.

import { z } from 'zod';
import { Instant, Uuid, pageOf, pageQuery } from '@/shared/values/primitives';
import { contract } from './contract';

export const AuditEntry = z.strictObject({
  id: z.string(),
  at: Instant,
  chain: z.string(),
  sequence: z.number().int(),
  actor: z.strictObject({ name: z.string(), role: z.string() }),
  /** Contract or job name. */
  action: z.string(),
  /** write, read or refusal. */
  kind: z.enum(['write', 'read', 'refusal']),
  participantCode: z.string().nullable(),
  subject: z.strictObject({ kind: z.string(), id: z.string() }).nullable(),
  before: z.unknown().nullable(),
  after: z.unknown().nullable(),
  why: z.string().nullable(),
  hash: z.string(),
  previousHash: z.string(),
});
export type AuditEntry = z.infer<typeof AuditEntry>;

export const readAudit = contract({
  name: 'audit.read',
  method: 'GET',
  path: '/api/audit',
  who: ['monitor', 'clinician', 'administrator'],
  reach: 'site',
  query: z.strictObject({ ...pageQuery, participantId: Uuid.optional(), siteId: Uuid.optional(), kind: z.enum(['write', 'read', 'refusal']).optional() }),
  answer: pageOf(AuditEntry),
  about: 'Who did what, when, before and after, why, newest first. An administrator sees the site’s own chain alone.',
});

export const ReportRow = z.strictObject({
  participantId: Uuid,
  code: z.string(),
  complete: z.number().int(),
  partial: z.number().int(),
  notDelivered: z.number().int(),
  missed: z.number().int(),
  planned: z.number().int(),
  interval: z.strictObject({ low: z.number(), high: z.number() }).nullable(),
  worstEffect: z.number().nullable(),
  openLockouts: z.number().int(),
});

export const readSiteReport = contract({
  name: 'report.read-site',
  method: 'GET',
  path: '/api/reports/site',
  who: ['coordinator', 'clinician', 'monitor'],
  reach: 'site',
  query: z.strictObject({ ...pageQuery, siteId: Uuid.optional() }),
  answer: pageOf(ReportRow).extend({
    totals: z.strictObject({
      participants: z.number().int(),
      complete: z.number().int(),
      planned: z.number().int(),
      missed: z.number().int(),
      interval: z.strictObject({ low: z.number(), high: z.number() }).nullable(),
      openLockouts: z.number().int(),
      effects: z.array(z.strictObject({ kind: z.string(), sessions: z.number().int(), ofSessions: z.number().int() })),
    }),
  }),
  about: 'Adherence and effects over a site, with the rows behind each number.',
});

export const exportSessions = contract({
  name: 'report.export-sessions',
  method: 'GET',
  path: '/api/reports/sessions.csv',
  who: ['coordinator', 'clinician', 'monitor'],
  reach: 'site',
  raw: true,
  query: z.strictObject({ siteId: Uuid.optional() }),
  answer: z.strictObject({ type: z.literal('text/csv'), bytes: z.instanceof(Uint8Array) }),
  about: 'All sessions of own sites as CSV, by pseudonym.',
});

export const exportOwn = contract({
  name: 'report.export-own',
  method: 'GET',
  path: '/api/me/export',
  who: ['participant'],
  reach: 'own',
  raw: true,
  answer: z.strictObject({ type: z.literal('application/json'), bytes: z.instanceof(Uint8Array) }),
  about: 'Everything that is kept about the participant, as JSON.',
});
