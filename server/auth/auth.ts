// The sign-in library, set up: e-mail and password, second factor, sessions in the database, everything else off.
// Must not decide what a signed-in person may do; that is the contracts' and the actions' business.

import { betterAuth } from 'better-auth';
import { drizzleAdapter } from 'better-auth/adapters/drizzle';
import { APIError } from 'better-auth/api';
import { twoFactor } from 'better-auth/plugins';
import type { Client } from '@/db/client';
import { findAccount } from '@/db/queries/account';
import { authCredential, authSession, authTwoFactor, authUser, authVerification } from '@/db/schema/account';
import { realNow } from '@/server/clock';
import type { Env } from '@/server/env';
import type { Transact } from '@/server/transact';
import { isStaffRole } from '@/shared/values/roles';

const hourSeconds = 3600;
/** A working day and a bit: a panel left open in the evening is closed by the morning (own choice). */
const staffSessionSeconds = 12 * hourSeconds;
/** A participant's phone stays signed in through a month of daily sessions (own choice). */
const longestSessionSeconds = 30 * 24 * hourSeconds;
/** One hour is the usual life of a reset link (own choice). */
const resetSeconds = hourSeconds;
/** The name of the header that our own middleware overwrites with the caller's address. */
export const addressHeader = 'x-rampwell-address';

export function makeAuth(client: Client, env: Env, transact: Transact) {
  return betterAuth({
    appName: 'Rampwell',
    baseURL: env.baseUrl,
    basePath: '/api/auth',
    secret: env.secret,
    database: drizzleAdapter(client.db, {
      provider: 'pg',
      schema: {
        user: authUser,
        session: authSession,
        account: authCredential,
        verification: authVerification,
        twoFactor: authTwoFactor,
      },
    }),
    telemetry: { enabled: false },
    logger: { disabled: true },
    // server/http/limits.ts counts requests, and server/http/origin.ts has checked the origin before anything comes here.
    rateLimit: { enabled: false },
    emailAndPassword: {
      enabled: true,
      // Accounts come from invitations alone.
      disableSignUp: true,
      minPasswordLength: 12,
      maxPasswordLength: 128,
      resetPasswordTokenExpiresIn: resetSeconds,
      revokeSessionsOnPasswordReset: true,
      sendResetPassword: ({ user, token }) => tellReset(transact, user.id, token),
    },
    session: { expiresIn: longestSessionSeconds, disableSessionRefresh: true, cookieCache: { enabled: false } },
    verification: { storeIdentifier: 'hashed' },
    plugins: [twoFactor({ issuer: 'Rampwell' })],
    advanced: {
      cookiePrefix: 'rampwell',
      useSecureCookies: env.baseUrl.startsWith('https:'),
      defaultCookieAttributes: { httpOnly: true, sameSite: 'lax', path: '/' },
      ipAddress: { ipAddressHeaders: [addressHeader] },
      disableCSRFCheck: true,
    },
    databaseHooks: {
      session: {
        create: {
          before: async (session) => {
            const account = await findAccount(client.db, session.userId);
            // The same answer as to a wrong password: whether somebody is suspended is not for strangers.
            if (!account || account.state === 'suspended')
              throw new APIError('UNAUTHORIZED', { code: 'INVALID_EMAIL_OR_PASSWORD' });
            if (!isStaffRole(account.role)) return { data: session };
            return { data: { ...session, expiresAt: new Date(realNow().getTime() + staffSessionSeconds * 1000) } };
          },
        },
      },
    },
  });
}

export type Auth = ReturnType<typeof makeAuth>;

/** Keeps the mail with the link. Nothing tells the asker whether the address is known. */
async function tellReset(transact: Transact, userId: string, token: string): Promise<void> {
  const account = await findAccount(transact.db, userId);
  if (!account || account.state === 'suspended') return;
  await transact.note({ kind: 'system', job: 'account.request-reset' }, 'account.request-reset', null, (tx) => {
    tx.record({
      participantId: account.participantId ?? undefined,
      siteId: account.siteId ?? undefined,
      subject: { kind: 'account', id: account.id },
    });
    tx.tell({
      kind: 'password_reset',
      toEmail: account.email,
      language: account.language,
      facts: { name: account.name, path: `/reset-password#token=${token}` },
      key: `password_reset:${userId}:${token.slice(0, 8)}`,
      urgent: true,
    });
  });
}
