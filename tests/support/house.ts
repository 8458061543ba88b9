// What: the whole server in this process, on a database of its own, with people who can sign in; mails go into a list.
// Must not: open a port, or say what is right; tests do.
import { createHmac, randomUUID } from 'node:crypto';
import { sql } from 'drizzle-orm';
import request from 'supertest';
import { giveParticipantAccount, insertAccount, insertMembership } from '@/db/queries/account';
import { insertParticipant } from '@/db/queries/participant';
import { insertSite } from '@/db/queries/site';
import { readEnv } from '@/server/env';
import { createHouse, type House } from '@/server/house/open-house';
import type { Mail } from '@/server/mail/render-mail';
import { hashSecret } from '@/server/password';
import { isStaffRole, type Role } from '@/shared/values/roles';
import { createDatabase, databaseUrl, dropDatabase } from './postgres';

export const password = 'a long enough password';
export const origin = 'http://127.0.0.1:8080';

export interface SentMail extends Mail {
  to: string;
  key: string;
}

export interface TestHouse {
  house: House;
  /** What was mailed, oldest first. */
  mails: SentMail[];
  /** Set to make the mail server refuse. */
  mailFault: { error: Error | null };
  site(code: string): Promise<string>;
  person(
    role: Role,
    siteId: string,
    name?: string,
  ): Promise<{ email: string; accountId: string; participantId: string | null }>;
  /** A browser: keeps its cookies, sends our own origin. */
  browser(): ReturnType<typeof request.agent>;
  /** Signed in with the password, as a person does: a tenth of a second of hashing. */
  signedIn(email: string): Promise<ReturnType<typeof request.agent>>;
  /** With a session that is there already, for tests about something else. */
  inSession(accountId: string): Promise<ReturnType<typeof request.agent>>;
  rows(text: string, values?: unknown[]): Promise<Record<string, unknown>[]>;
  close(): Promise<void>;
}

export async function openTestHouse(settings: Record<string, string> = {}): Promise<TestHouse> {
  const name = await createDatabase();
  const env = readEnv({
    ...{ DATABASE_URL: databaseUrl(name), DEMO: '1', SECRET: 'a secret that only these tests have, long enough' },
    ...{ BASE_URL: origin, LOG_LEVEL: 'silent' },
    ...settings,
  });
  const mails: SentMail[] = [];
  const mailFault: { error: Error | null } = { error: null };
  const transport = {
    async send(to: string, mail: Mail, key: string) {
      if (mailFault.error) throw mailFault.error;
      mails.push({ to, key, ...mail });
    },
    close: () => undefined,
  };
  const house = createHouse(env, { transport });
  const { db } = house.client;
  const passwordHash = await hashSecret(password);
  const browser = () => request.agent(house.app).set('origin', origin);
  return {
    house,
    mails,
    mailFault,
    async site(code) {
      const id = randomUUID();
      const contact = { phone: '020 7946 0100', emergencyNumber: '999', zone: 'Europe/London' };
      const createdAt = await house.transact.now();
      await insertSite(db, { id, name: `Site ${code}`, code, kind: 'service', ...contact, createdAt });
      return id;
    },
    async person(role, siteId, fullName = `The ${role}`) {
      const accountId = randomUUID();
      const email = `${role}.${accountId.slice(0, 8)}@harrowmere.example`;
      const createdAt = await house.transact.now();
      const ids = { id: accountId, credentialId: randomUUID() };
      await insertAccount(db, { ...ids, role, name: fullName, email, passwordHash, language: 'en', createdAt });
      if (isStaffRole(role)) await insertMembership(db, accountId, siteId, createdAt);
      if (role !== 'participant') return { email, accountId, participantId: null };
      const participantId = randomUUID();
      const who = { code: `T-${participantId.slice(0, 6)}`, name: fullName, email, phone: '020 7946 0142' };
      const facts = { bornOn: '1984-03-02', zone: 'Europe/London', language: 'en', enrolledBy: accountId, createdAt };
      const emergency = { emergencyName: 'Tam', emergencyPhone: '020 7946 0143' };
      await insertParticipant(db, { id: participantId, siteId, ...who, ...facts, ...emergency });
      await giveParticipantAccount(db, participantId, accountId);
      return { email, accountId, participantId };
    },
    browser,
    async signedIn(email) {
      const agent = browser();
      await agent.post('/api/auth/sign-in/email').send({ email, password }).expect(200);
      return agent;
    },
    async inSession(accountId) {
      const token = randomUUID();
      await db.execute(
        sql`insert into auth_session (id, token, user_id, expires_at) values (${randomUUID()}, ${token}, ${accountId}, now() + interval '1 hour')`,
      );
      // The sign-in library signs its cookie so: HMAC-SHA-256 of the token under the server's secret, in base64.
      const signature = createHmac('sha256', env.secret).update(token).digest('base64');
      return browser().set('cookie', `rampwell.session_token=${encodeURIComponent(`${token}.${signature}`)}`);
    },
    rows: async (text, values = []) => (await house.client.pool.query<Record<string, unknown>>(text, values)).rows,
    async close() {
      await house.close();
      await dropDatabase(name);
    },
  };
}
