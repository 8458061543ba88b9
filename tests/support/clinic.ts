// What: a site or two with people, in a database of their own, and a way to call actions as one of them: the shape is checked by
// the contract going in and coming out, the transaction, audit and outbox are the real ones. No HTTP; the demo's clock moves time.
// Must not: say what is right; tests do.
import { randomUUID } from 'node:crypto';
import { z } from 'zod';
import { connect, type Client } from '@/db/client';
import { insertAccount, insertMembership, giveParticipantAccount } from '@/db/queries/account';
import { setOffset } from '@/db/queries/clock';
import { insertParticipant } from '@/db/queries/participant';
import { insertProtocol } from '@/db/queries/protocol';
import { insertSite } from '@/db/queries/site';
import type { AccountActor, Action, Refusal } from '@/server/action';
import { readEnv } from '@/server/env';
import { makeTransact, type Transact } from '@/server/transact';
import type { AnswerOf, BodyIn, ContractShape, ParamsIn, QueryIn } from '@/shared/contracts/contract';
import { defaultProtocolSettings } from '@/shared/rules/protocol-defaults';
import { ProtocolSettings, type SiteLimits } from '@/shared/values/protocol-settings';
import type { Role } from '@/shared/values/roles';
import { createDatabase, databaseUrl, dropDatabase } from './postgres';

interface Given<C> {
  params?: ParamsIn<C>;
  query?: QueryIn<C>;
  body?: BodyIn<C>;
  key?: string;
}

export interface Patient extends AccountActor {
  participantId: string;
  code: string;
}

export interface Clinic {
  client: Client;
  transact: Transact;
  now(): Promise<string>;
  /** Moves the house's clock. */
  advance(seconds: number): Promise<void>;
  site(code: string, limits?: Partial<SiteLimits>): Promise<string>;
  staff(name: string, role: Role, ...siteIds: string[]): Promise<AccountActor>;
  patient(name: string, siteId: string, more?: { zone?: string; bornOn?: string }): Promise<Patient>;
  /** The answer; throws for a refusal. */
  call<C extends ContractShape>(who: AccountActor, action: Action<C>, given: Given<C>): Promise<AnswerOf<C>>;
  /** The refusal; throws for an answer. */
  refused<C extends ContractShape>(who: AccountActor, action: Action<C>, given: Given<C>): Promise<Refusal>;
  rows<T extends z.ZodRawShape>(shape: T, text: string, values?: unknown[]): Promise<z.infer<z.ZodObject<T>>[]>;
  close(): Promise<void>;
}

export const secretOfTests = 'a secret that only these tests have, long enough';

export async function openClinic(): Promise<Clinic> {
  const name = await createDatabase();
  const url = databaseUrl(name);
  const client = connect(url, 4, () => undefined);
  const env = readEnv({ DATABASE_URL: url, DEMO: '1', SECRET: secretOfTests });
  const transact = makeTransact(client, env);
  const { db } = client;
  let ahead = 0;

  async function account(fullName: string, role: Role): Promise<AccountActor> {
    const id = randomUUID();
    const email = `${id}@harrowmere.example`;
    const row = { id, credentialId: randomUUID(), role, name: fullName, email, passwordHash: 'none', language: 'en' };
    await insertAccount(db, { ...row, createdAt: await transact.now() });
    return {
      kind: 'account',
      accountId: id,
      role,
      name: fullName,
      email,
      language: 'en',
      siteIds: [],
      participantId: null,
    };
  }

  async function run<C extends ContractShape>(actor: AccountActor, action: Action<C>, given: Given<C>) {
    const { contract } = action;
    const body: unknown = contract.body ? contract.body.parse(given.body) : undefined;
    const params: unknown = contract.params ? contract.params.parse(given.params) : undefined;
    const query: unknown = contract.query ? contract.query.parse(given.query ?? {}) : undefined;
    return transact.run(action, {
      actor,
      params,
      query,
      body,
      key: given.key ?? null,
      file: null,
      confirmedAt: contract.confirm ? await transact.now() : null,
      requestId: randomUUID(),
    });
  }

  return {
    client,
    transact,
    now: () => transact.now(),
    async advance(seconds) {
      ahead += seconds;
      await setOffset(db, ahead);
    },
    async site(code, limits = {}) {
      const id = randomUUID();
      const createdAt = await transact.now();
      await insertSite(db, {
        id,
        name: `Site ${code}`,
        code,
        kind: 'service',
        phone: '020 7946 0100',
        emergencyNumber: '999',
        zone: 'Europe/London',
        createdAt,
      });
      const contacts = [{ name: 'On call', email: 'oncall@harrowmere.example', phone: '020 7946 0101' }];
      const settings = ProtocolSettings.parse(defaultProtocolSettings({ contacts, consentRequiredFrom: createdAt }));
      const signed = {
        version: 1,
        reason: 'First',
        signedBy: 'x',
        signedByName: 'x',
        signedAt: createdAt,
        contentHash: 'x',
      };
      await insertProtocol(db, {
        ...signed,
        id: randomUUID(),
        siteId: id,
        settings: { ...settings, limits: { ...settings.limits, ...limits } },
      });
      return id;
    },
    async staff(fullName, role, ...siteIds) {
      const actor = await account(fullName, role);
      for (const siteId of siteIds) await insertMembership(db, actor.accountId, siteId, await transact.now());
      return { ...actor, siteIds };
    },
    async patient(fullName, siteId, { zone = 'Europe/London', bornOn = '1984-03-02' } = {}) {
      const actor = await account(fullName, 'participant');
      const id = randomUUID();
      const code = `P-${id.slice(0, 8)}`;
      const person = { name: fullName, email: actor.email, phone: '020 7946 0142', bornOn, zone, language: 'en' };
      const contact = {
        emergencyName: 'Tam',
        emergencyPhone: '020 7946 0143',
        enrolledBy: 'x',
        createdAt: await transact.now(),
      };
      await insertParticipant(db, { id, siteId, code, ...person, ...contact });
      await giveParticipantAccount(db, id, actor.accountId);
      return { ...actor, participantId: id, code };
    },
    async call(who, action, given) {
      const { answer, refusal } = await run(who, action, given);
      if (refusal)
        throw new Error(`refused: ${refusal.code} ${JSON.stringify(refusal.fields ?? refusal.reasons ?? '')}`);
      return action.contract.answer.parse(answer) as AnswerOf<typeof action.contract>;
    },
    async refused(who, action, given) {
      const { answer, refusal } = await run(who, action, given);
      if (!refusal) throw new Error(`answered: ${JSON.stringify(answer)}`);
      return refusal;
    },
    async rows(shape, text, values = []) {
      const { rows } = await client.pool.query(text, values);
      return z.array(z.object(shape)).parse(rows);
    },
    async close() {
      await client.close();
      await dropDatabase(name);
    },
  };
}
