// The form of a contract: one description of a door, from which come the route, the typed call, the form, OpenAPI and the
// access matrix. A contract holds shapes and who may knock; it holds no limit and no decision.

import type { z } from 'zod';
import type { Role } from '@/shared/values/roles';

export type Who = Role | 'anyone';

/**
 * How far a door reaches. The predicate of each stands in db/queries/reach.ts.
 * - open: nobody's record (health, keys, own sign-in)
 * - own: the asker's own record
 * - own-or-assisted: own, or the participant whom this caregiver assists
 * - shared: what participants switched on for this caregiver
 * - site: records of sites that the asker belongs to
 * - own-or-site: own for the participant, own sites for staff
 */
export type Reach = 'open' | 'own' | 'own-or-assisted' | 'shared' | 'site' | 'own-or-site';

export interface ContractShape {
  /** noun.verb; also the query key, and the name in the audit trail. */
  name: string;
  method: 'GET' | 'POST';
  /** Express path, params as `:participantId`. */
  path: string;
  who: readonly Who[];
  reach: Reach;
  params?: z.ZodType;
  query?: z.ZodType;
  body?: z.ZodType;
  answer: z.ZodType;
  /** Status of a good answer; 200 unless said. */
  status?: 200 | 201;
  /** Answers 503 while its `status` is not `ok`: health alone. */
  health?: true;
  /** Honours the header `Idempotency-Key` (the same key and body give the same answer); `required`: refuses without it. */
  once?: true | 'required';
  /** A repeated key is not answered from what was kept: the action answers it afresh (a permit with its present state). */
  replay?: 'action';
  /** The body's `password` is checked against the asker's before anything runs: this is a signature. */
  confirm?: true;
  /** Exists only with DEMO=1. */
  demo?: true;
  /** A file comes in the multipart field `file`; `body` describes the other fields. */
  upload?: true;
  /** The answer is bytes, not JSON; the answer schema describes `{type, bytes}` inside the server. */
  raw?: true;
  /** Codes of refusal (409) beyond the usual ones of shape, role and reach. */
  refusals?: readonly string[];
  /** Nouns whose reads go stale after this write. */
  touches?: readonly string[];
  /** One sentence for OpenAPI. */
  about: string;
  /** Example for OpenAPI. */
  example?: { body?: unknown; answer?: unknown };
}

/** Keeps the literal types of a contract. */
export function contract<const C extends ContractShape>(shape: C): C {
  return shape;
}

type OutputOf<C, K extends PropertyKey> = C extends { [P in K]: infer S }
  ? S extends z.ZodType
    ? z.output<S>
    : undefined
  : undefined;
type InputOf<C, K extends PropertyKey> = C extends { [P in K]: infer S }
  ? S extends z.ZodType
    ? z.input<S>
    : undefined
  : undefined;

/** What the action receives, after parsing. */
export type ParamsOf<C> = OutputOf<C, 'params'>;
export type QueryOf<C> = OutputOf<C, 'query'>;
export type BodyOf<C> = OutputOf<C, 'body'>;
export type AnswerOf<C extends Pick<ContractShape, 'answer'>> = z.output<C['answer']>;
/** What the caller sends, before parsing. */
export type ParamsIn<C> = InputOf<C, 'params'>;
export type QueryIn<C> = InputOf<C, 'query'>;
export type BodyIn<C> = InputOf<C, 'body'>;
