// Every action runs in here: one client, one transaction, and with it the audit entries and the outbox rows. Decides nothing, and does
// nothing over the network: what must be sent is kept and sent after the commit.

import { createHash, randomUUID } from 'node:crypto';
import type { Client, Db, Execute, Scope } from '@/db/client';
import { sqlStateOf } from '@/db/sql-state';
import { appendAudit, type AuditContent } from '@/db/queries/audit';
import { findKeySeen, insertKeySeen, insertOutbox, lockName, tryLockName } from '@/db/queries/house';
import { listSitesOfParticipants } from '@/db/queries/site-contact';
import type {
  AccountActor,
  Actor,
  AnyoneActor,
  Job,
  OutboxMessage,
  RecordEntry,
  Refusal,
  Tx,
  UploadedFile,
} from '@/server/action';
import { isRefusal, refuse } from '@/server/action';
import { houseNow } from '@/server/clock';
import type { Env } from '@/server/env';
import { stopTokenFor } from '@/server/mail-stop';
import { explainReasons } from '@/server/reasons';
import { vaultOf } from '@/server/vault';
import type { ContractShape } from '@/shared/contracts/contract';
import { canonicalJson } from '@/shared/values/canonical';

/** An action whose contract is not known at compile time: the mount has parsed what it is given. */
export interface AnyAction {
  contract: ContractShape;
  scope?: 'house';
  run(input: AnyInput & { confirmedAt: string | null }, tx: Tx): Promise<unknown>;
}

export interface AnyInput {
  actor: AccountActor | AnyoneActor;
  params: unknown;
  query: unknown;
  body: unknown;
  key: string | null;
  file: UploadedFile | null;
  /** When the house checked the password, where the contract asks for it. */
  confirmedAt?: string | null;
  requestId: string;
}

export type Outcome = { answer: unknown; refusal: null } | { answer: null; refusal: Refusal };

export interface Transact {
  /** Runs an action once; a refusal leaves nothing behind but its audit entry. */
  run(action: AnyAction, input: AnyInput): Promise<Outcome>;
  /** Runs one piece of scheduled work; false when another process has it in hand. */
  job(job: Job, id: string): Promise<boolean>;
  /** Writes what the house itself has to say (sign-in, refusals at the door): entries, mails. */
  note(actor: Actor, action: string, requestId: string | null, work: (tx: Tx) => Promise<void> | void): Promise<void>;
  /** Reads outside any action (who is signed in, what is due). */
  readonly db: Db;
  now(): Promise<string>;
}

export interface Outside {
  /** Tells whoever sends mails and runs jobs that there is work; joins the transaction, so it is undone with it. */
  wake?: (execute: Execute) => Promise<void>;
  /** The demo's clock, moved outside the transaction of the door that asks for it. */
  moveClock?: Tx['moveClock'];
  /**
   * For one test alone, which has the server take people for somebody else, to see what the database then refuses by itself. Nothing that
   * starts a server sets it.
   */
  mistake?: (actor: AccountActor) => AccountActor;
}

/** A deadlock or a serialization failure is chance, not fault: again, this often (own choice). */
const attemptsMost = 3;
const byChance: readonly (string | undefined)[] = ['40P01', '40001'];

/** Undoes what a refusing action may have written. */
class Refused extends Error {
  constructor(readonly refusal: Refusal) {
    super(refusal.code);
  }
}

interface Collected {
  entries: RecordEntry[];
  messages: OutboxMessage[];
}

export function makeTransact(client: Client, env: Env, outside: Outside = {}): Transact {
  const vault = vaultOf(env.secret);

  /** One transaction: what `work` collects is written last, audit heads last of all. */
  async function transaction<T>(
    scope: Scope,
    actor: Actor,
    actionName: string,
    requestId: string | null,
    work: (tx: Tx) => Promise<T>,
  ): Promise<T> {
    return client.transaction(scope, async (db, execute) => {
      let moment: string | undefined;
      const collected: Collected = { entries: [], messages: [] };
      const now = async () => (moment ??= await houseNow(db, env.isDemo));
      const tx: Tx = {
        db,
        now,
        record: (entry) => void collected.entries.push(entry),
        tell: (message) => void collected.messages.push(message),
        baseUrl: env.baseUrl,
        isDemo: env.isDemo,
        stopTokenFor: (caregiverId) => stopTokenFor(env.secret, caregiverId),
        vault,
        explain: (reasons, participantId) => explainReasons(db, reasons, participantId),
        moveClock: outside.moveClock,
      };
      const result = await work(tx);
      const { entries, messages } = collected;
      if (messages.length > 0) {
        await insertOutbox(db, outboxRows(messages, await now()));
        await outside.wake?.(execute);
      }
      if (entries.length > 0)
        await appendAudit(db, await auditRows(db, entries, { actor, actionName, requestId, at: await now() }));
      return result;
    });
  }

  async function again<T>(work: () => Promise<T>): Promise<T> {
    for (let attempt = 1; ; attempt += 1) {
      try {
        return await work();
      } catch (error) {
        if (attempt >= attemptsMost || !byChance.includes(sqlStateOf(error))) throw error;
      }
    }
  }

  function note(
    actor: Actor,
    action: string,
    requestId: string | null,
    work: (tx: Tx) => Promise<void> | void,
  ): Promise<void> {
    return again(() => transaction('house', actor, action, requestId, async (tx) => work(tx)));
  }

  async function run(action: AnyAction, asked: AnyInput): Promise<Outcome> {
    const { contract } = action;
    const { requestId } = asked;
    const scope = scopeOf(action, asked.actor);
    const actor = outside.mistake && asked.actor.kind === 'account' ? outside.mistake(asked.actor) : asked.actor;
    const input = { ...asked, actor, confirmedAt: asked.confirmedAt ?? null };
    try {
      const answer = await again(() =>
        transaction(scope, actor, contract.name, requestId, async (tx) => {
          const seen = await openKey(tx, contract, input);
          if (seen && 'stored' in seen) return seen.stored;
          const result = await action.run(input, tx);
          if (isRefusal(result)) throw new Refused(result);
          if (seen)
            await insertKeySeen(tx.db, {
              ...seen,
              contract: contract.name,
              status: contract.status ?? 200,
              answer: isReplayed(contract) ? result : {},
              createdAt: await tx.now(),
            });
          return result;
        }),
      );
      return { answer, refusal: null };
    } catch (error) {
      if (!(error instanceof Refused)) throw error;
      const { refusal } = error;
      await note(actor, contract.name, requestId, (tx) => tx.record(refusalEntry(refusal, actor)));
      return { answer: null, refusal };
    }
  }

  return {
    run,
    note,
    db: client.db,
    now: () => houseNow(client.db, env.isDemo),
    job: (job, id) =>
      again(() =>
        transaction('house', { kind: 'system', job: job.name }, job.name, null, async (tx) => {
          if (!(await tryLockName(tx.db, `job:${job.name}:${id}`))) return false;
          await job.run(id, tx);
          return true;
        }),
      ),
  };
}

/** Doors for anyone have their authority elsewhere: a link from a mail, or nothing to protect. */
function scopeOf({ scope, contract }: AnyAction, actor: AccountActor | AnyoneActor): Scope {
  if (scope === 'house' || actor.kind === 'anyone' || contract.who.includes('anyone')) return 'house';
  const { accountId, role, siteIds, participantId } = actor;
  return { accountId, role, siteIds, participantId };
}

/** False where the action answers a repeated key itself (a permit with its present state). */
function isReplayed(contract: ContractShape): boolean {
  return contract.replay !== 'action';
}

/**
 * What this key got before, or what to keep with it. Two requests with one key follow each other: the second waits here for the first.
 * Only good answers are kept. A refusal wrote nothing, so the same request may be allowed later.
 */
async function openKey(
  tx: Tx,
  contract: ContractShape,
  input: AnyInput,
): Promise<{ stored: unknown } | { accountId: string; key: string; bodyHash: string } | null> {
  const { actor, key } = input;
  if (!contract.once || key === null || actor.kind !== 'account') return null;
  await lockName(tx.db, `key:${actor.accountId}:${key}`);
  const bodyHash = hashOfRequest(contract, input);
  const seen = await findKeySeen(tx.db, actor.accountId, key);
  if (!seen) return { accountId: actor.accountId, key, bodyHash };
  if (seen.contract !== contract.name || seen.bodyHash !== bodyHash)
    throw new Refused(refuse('idempotency.other_body'));
  return isReplayed(contract) ? { stored: seen.answer } : { accountId: actor.accountId, key, bodyHash };
}

/** Passwords are left out: their hash would be a plain one, and they say nothing about what was asked. */
function hashOfRequest(contract: ContractShape, { params, body, file }: AnyInput): string {
  const asked =
    typeof body === 'object' && body !== null
      ? Object.fromEntries(Object.entries(body).filter(([field]) => field !== 'password'))
      : body;
  const hash = createHash('sha256').update(
    canonicalJson(JSON.parse(JSON.stringify({ contract: contract.name, params, asked }))),
  );
  return (file ? hash.update(file.bytes) : hash).digest('hex');
}

function outboxRows(messages: readonly OutboxMessage[], now: string) {
  return messages.map((message) => ({
    id: randomUUID(),
    kind: message.kind,
    facts: message.facts,
    toEmail: message.toEmail,
    language: message.language,
    key: message.key,
    urgent: message.urgent ?? false,
    createdAt: now,
    dueAt: message.dueAt ?? now,
    dropAt: message.dropAt ?? null,
  }));
}

/** A refusal stands in the chain of whoever it concerns: the participant named, else the asker's own, else the asker's site. */
export function refusalEntry(refusal: Refusal, actor: Actor): RecordEntry {
  const own = actor.kind === 'account' ? actor : null;
  const participantId = refusal.participantId ?? own?.participantId ?? undefined;
  const siteId = refusal.siteId ?? own?.siteIds[0];
  const reasons = refusal.reasons?.map((reason) => reason.code);
  const fields = refusal.fields?.map((field) => ({ path: field.path, code: field.code }));
  return { participantId, siteId, kind: 'refusal', after: { code: refusal.code, reasons, fields } };
}

interface Circumstances {
  actor: Actor;
  actionName: string;
  requestId: string | null;
  at: string;
}

async function auditRows(
  db: Db,
  entries: readonly RecordEntry[],
  { actor, actionName, requestId, at }: Circumstances,
): Promise<AuditContent[]> {
  const siteOf = await sitesOf(db, entries);
  const who = whoOf(actor);
  return entries.map((entry) => {
    const siteId = entry.participantId
      ? (siteOf.get(entry.participantId) ?? entry.siteId ?? null)
      : (entry.siteId ?? null);
    return {
      chain: entry.participantId ? `participant:${entry.participantId}` : siteId ? `site:${siteId}` : 'house',
      at,
      ...who,
      action: actionName,
      kind: entry.kind ?? 'write',
      siteId,
      participantId: entry.participantId ?? null,
      subjectKind: entry.subject?.kind ?? null,
      subjectId: entry.subject?.id ?? null,
      before: entry.before ?? null,
      after: entry.after ?? null,
      why: entry.why ?? null,
      requestId,
    };
  });
}

function whoOf(actor: Actor): Pick<AuditContent, 'actorId' | 'actorName' | 'actorRole'> {
  if (actor.kind === 'account') return { actorId: actor.accountId, actorName: actor.name, actorRole: actor.role };
  return { actorId: null, actorName: actor.kind, actorRole: actor.kind };
}

/** A participant never changes site (the table refuses it), so each is asked for once a process. */
const knownSites = new Map<string, string>();

async function sitesOf(db: Db, entries: readonly RecordEntry[]): Promise<ReadonlyMap<string, string>> {
  const unknown = new Set(
    entries.flatMap(({ participantId }) => (participantId && !knownSites.has(participantId) ? [participantId] : [])),
  );
  for (const [participantId, siteId] of await listSitesOfParticipants(db, [...unknown]))
    knownSites.set(participantId, siteId);
  return knownSites;
}
