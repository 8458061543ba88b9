// A site's own worked cases through the server's rules, and what came of the last ones.

import { z } from 'zod';
import { Instant, Line, Uuid } from '@/shared/values/primitives';
import { contract } from './contract';

/** What is kept of a run for ever: an entry of the site's audit trail. */
export const QualificationRun = z.strictObject({
  siteId: Uuid,
  at: Instant,
  byName: z.string(),
  fileName: z.string(),
  /** SHA-256 in hex: which file it was, and which result was signed. */
  fileSha256: z.string(),
  resultSha256: z.string(),
  passed: z.number().int(),
  failed: z.number().int(),
  /** Of the program whose rules were asked. */
  version: z.string(),
  /** Of the key that signed the result. */
  kid: z.string(),
});
export type QualificationRun = z.infer<typeof QualificationRun>;

export const readQualification = contract({
  name: 'qualification.read',
  method: 'GET',
  path: '/api/qualification',
  who: ['coordinator', 'clinician', 'monitor', 'administrator'],
  reach: 'site',
  answer: z.strictObject({ runs: z.array(QualificationRun) }),
  about: 'The last qualification run of each own site that had one.',
});

export const runQualification = contract({
  name: 'qualification.run',
  method: 'POST',
  path: '/api/qualification',
  who: ['administrator'],
  reach: 'site',
  once: true,
  body: z.strictObject({
    siteId: Uuid,
    fileName: Line,
    /** The file as it is: JSON in one of the forms of worked cases. */
    content: z.string().min(1).max(900_000),
  }),
  answer: z.strictObject({
    run: QualificationRun,
    /** The first that did not pass; all of them stand in the signed result. */
    failures: z.array(z.strictObject({ id: z.string(), error: z.string().nullable() })),
    /** The signed result as a file: JSON with the result, a compact JWS (RFC 7515, Ed25519) over it, and the public key. */
    signed: z.string(),
  }),
  refusals: ['qualification.too_much'],
  touches: ['qualification'],
  about: 'Runs worked cases against the rules that this server decides with, and signs the result.',
  example: {
    body: {
      siteId: '7d2a9e4c-3b5f-4d6e-8a1c-0f9e8d7c6b5a',
      fileName: 'own-cases.json',
      content:
        '{"cases":[{"id":"half","kind":"fraction","input":{"prescribed_C":2,"delivered_C":1},"expected":{"fraction":0.5}}]}',
    },
  },
});
