// What an action is: load, decide, write, inside one transaction, for one contract. Types and small makers only, no IO.

import type { Db } from '@/db/client';
import type { AnswerOf, BodyOf, ContractShape, ParamsOf, QueryOf } from '@/shared/contracts/contract';
import type { Reason } from '@/shared/contracts/problem';
import type { OutboxKind } from '@/shared/values/outbox-kinds';
import type { Role } from '@/shared/values/roles';

export interface AccountActor {
  kind: 'account';
  accountId: string;
  role: Role;
  name: string;
  email: string;
  language: 'en';
  /** Own sites, for staff; empty for others. */
  siteIds: readonly string[];
  /** The participant's own row; null for everybody else. */
  participantId: string | null;
}
export interface AnyoneActor {
  kind: 'anyone';
}
export interface SystemActor {
  kind: 'system';
  job: string;
}
export type Actor = AccountActor | AnyoneActor | SystemActor;

/** Who an action may meet: somebody signed in, unless the contract serves anyone. */
export type ActorOf<C extends ContractShape> = 'anyone' extends C['who'][number]
  ? AccountActor | AnyoneActor
  : AccountActor;

type Json = string | number | boolean | null | readonly Json[] | { readonly [key: string]: Json | undefined };

/** One entry of the audit trail. The chain is the participant's, else the site's, else the house's. */
export interface RecordEntry {
  participantId?: string;
  siteId?: string;
  /** write unless said; reads of a person's record say read; refusals are recorded by the house. */
  kind?: 'write' | 'read' | 'refusal';
  subject?: { kind: string; id: string };
  before?: Json;
  after?: Json;
  why?: string;
}

/** One mail or page, kept in the outbox by the same transaction. */
export interface OutboxMessage {
  kind: OutboxKind;
  toEmail: string;
  language: string;
  /**
   * Names and ids; `path` is where the mail's button leads (`/invitation#token=…`), `stopPath` where "stop these mails" does.
   * Never a treatment, dose or condition.
   */
  facts: Readonly<Record<string, string | number | boolean | null>>;
  /** One mail for one matter: the same key is kept once. */
  key: string;
  urgent?: boolean;
  /** Not before; now unless said. */
  dueAt?: string;
  /** Not after: a stale nudge is dropped and recorded. */
  dropAt?: string;
}

export interface Tx {
  readonly db: Db;
  /** The one clock: read once a transaction, at the first call, so call it after the locks. ISO, UTC. */
  now(): Promise<string>;
  /** Collected; written as the last statements before COMMIT. */
  record(entry: RecordEntry): void;
  /** Collected; written before COMMIT. */
  tell(message: OutboxMessage): void;
  /** Base address of this server, for links in mails. */
  readonly baseUrl: string;
  /** True with DEMO=1: invented people, and no second factor asked of staff. */
  readonly isDemo: boolean;
  /**
   * The token of a caregiver's "stop these mails" link, made again from the server's secret whenever a mail needs it (`stopTokenFor` in
   * server/mail-stop.ts); the database holds its SHA-256 alone.
   */
  stopTokenFor(caregiverId: string): string;
  /** Keeps small secrets (the permits' signing key) under a key derived from the server's secret: `vaultOf` of server/vault.ts. */
  readonly vault: Vault;
  /** Rules' reasons with the sentence and the contact that a refusal's reasons get, for answers that carry reasons. */
  explain(reasons: readonly BareReason[], participantId: string): Promise<Reason[]>;
  /** For the demo's own door alone: moves the house's clock and runs what comes due, outside this transaction. */
  readonly moveClock?: ((seconds: number) => Promise<{ now: string; jobsRun: number }>) | undefined;
}

export interface Vault {
  seal(bytes: Uint8Array): string;
  /** Throws for what this server's secret did not seal. */
  open(sealed: string): Uint8Array;
}

/** A reason as rules give it; the http layer adds the sentence and the contact. */
export interface BareReason {
  code: string;
  until?: string | undefined;
  fact?: string | undefined;
  resolvedBy: 'participant' | 'coordinator' | 'clinician' | 'administrator' | 'guardian' | 'time' | 'staff';
}

/** A bad field as actions and rules give it: the http layer adds the sentence from locales/<lang>/errors.json. */
export interface BareField {
  path: string;
  code: string;
  facts?: Readonly<Record<string, string | number>>;
}

export interface Refusal {
  refused: true;
  status: 403 | 404 | 409 | 413 | 415 | 422;
  code: string;
  reasons?: readonly BareReason[];
  fields?: readonly BareField[];
  /** For the sentence of the code. */
  facts?: Readonly<Record<string, string | number>>;
  /** Whose record the refusal concerns, for the audit trail. */
  participantId?: string;
  siteId?: string;
}

/** Out of reach, or not there: the asker cannot tell which. */
export function notFound(): Refusal {
  return { refused: true, status: 404, code: 'not_found' };
}

/** Refused by a rule: 409 with a stable code, and whatever the rule found. Nothing may have been written before. */
export function refuse(
  code: string,
  found: Omit<Refusal, 'refused' | 'status' | 'code'> & { status?: 403 | 409 | 413 | 415 } = {},
): Refusal {
  const { status = 409, ...rest } = found;
  return { refused: true, status, code, ...rest };
}

/** The shape was right but a field is not allowed: 422 with each field's path and code. */
export function invalid(fields: readonly BareField[]): Refusal {
  return { refused: true, status: 422, code: 'invalid', fields };
}

export function isRefusal(value: unknown): value is Refusal {
  return typeof value === 'object' && value !== null && 'refused' in value && value.refused === true;
}

export interface UploadedFile {
  bytes: Uint8Array;
  /** As the client named it; never trusted. */
  claimedType: string;
}

export interface ActionInput<C extends ContractShape> {
  actor: ActorOf<C>;
  params: ParamsOf<C>;
  query: QueryOf<C>;
  body: BodyOf<C>;
  /** The Idempotency-Key, when sent. */
  key: string | null;
  /** The file of an `upload` contract. */
  file: UploadedFile | null;
  /** Of a `confirm` contract: when the house checked the password that came with it. */
  confirmedAt: string | null;
  requestId: string;
}

export interface Action<C extends ContractShape = ContractShape> {
  contract: C;
  /** Set where the asker's own scope is too narrow: a site that is only being made, a link from a mail that is the authority (D22). */
  scope?: 'house';
  run(input: ActionInput<C>, tx: Tx): Promise<AnswerOf<C> | Refusal>;
}

/** The moment for a signature; nothing is signed without the password, so a door that does not ask for it is a fault. */
export function confirmedOf(confirmedAt: string | null): string {
  if (confirmedAt === null) throw new Error('A signature needs a contract with `confirm`.');
  return confirmedAt;
}

/** Ties an action to its contract. */
export function action<const C extends ContractShape>(
  contract: C,
  run: (input: ActionInput<C>, tx: Tx) => Promise<AnswerOf<C> | Refusal>,
  more: Pick<Action<C>, 'scope'> = {},
): Action<C> {
  return { contract, run, ...more };
}

/**
 * Scheduled work. `listDue` names what is due at `now` (ids, at most a few hundred); `run` does one in its own transaction, reads
 * afresh, and may run twice. `nextDue` says when something will next be due, so that a moved clock can stop there.
 */
export interface Job {
  name: string;
  listDue(db: Db, now: string): Promise<string[]>;
  nextDue(db: Db): Promise<string | null>;
  run(id: string, tx: Tx): Promise<void>;
}
