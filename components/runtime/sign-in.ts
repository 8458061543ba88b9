// The sign-in library's own doors, by plain fetch: signing in, second factor, resetting a password. Everything else goes by contracts.

import { z } from 'zod';

const AuthAnswer = z.object({ twoFactorRedirect: z.boolean().optional() });
const AuthProblem = z.object({ code: z.string().optional() });

export type AuthOutcome =
  { outcome: 'done' } | { outcome: 'second_factor' } | { outcome: 'refused'; code: string } | { outcome: 'offline' };

async function post(path: string, body: unknown): Promise<AuthOutcome> {
  let response: Response;
  try {
    response = await fetch(`/api/auth/${path}`, {
      method: 'POST',
      credentials: 'same-origin',
      headers: { 'content-type': 'application/json', accept: 'application/json' },
      body: JSON.stringify(body),
    });
  } catch {
    return { outcome: 'offline' };
  }
  const answer: unknown = await response.json().catch(() => null);
  if (response.ok)
    return AuthAnswer.safeParse(answer).data?.twoFactorRedirect ? { outcome: 'second_factor' } : { outcome: 'done' };
  return {
    outcome: 'refused',
    code: response.status === 429 ? 'too_many' : (AuthProblem.safeParse(answer).data?.code ?? 'unknown'),
  };
}

/** Signs in; `second_factor` when a code must follow. */
export const signIn = (email: string, password: string) => post('sign-in/email', { email, password });
/** The six digits of the authenticator. */
export const verifyTotp = (code: string) => post('two-factor/verify-totp', { code });
/** One of the codes kept for when the authenticator is lost. */
export const verifyBackupCode = (code: string) => post('two-factor/verify-backup-code', { code });
/** Asks for the mail with a link; answers alike whether the address is known or not. */
export const requestReset = (email: string) => post('request-password-reset', { email, redirectTo: '/reset-password' });
/** Chooses a new password with the mail's token. */
export const resetPassword = (token: string, newPassword: string) => post('reset-password', { token, newPassword });
/** Changes one's own password and ends the other sessions. */
export const changePassword = (currentPassword: string, newPassword: string) =>
  post('change-password', { currentPassword, newPassword, revokeOtherSessions: true });
/** Ends every session of this account, this one too. */
export const signOutEverywhere = () => post('revoke-sessions', {});

const TwoFactorKeys = z.object({ totpURI: z.string(), backupCodes: z.array(z.string()) });

/** Begins the second factor: the key for the authenticator and the emergency codes, or null when refused. It is on after the first code. */
export async function enableSecondFactor(
  password: string,
): Promise<{ uri: string; secret: string; backupCodes: readonly string[] } | null> {
  const response = await fetch('/api/auth/two-factor/enable', {
    method: 'POST',
    credentials: 'same-origin',
    headers: { 'content-type': 'application/json', accept: 'application/json' },
    body: JSON.stringify({ password }),
  }).catch(() => null);
  const keys = TwoFactorKeys.safeParse(response?.ok ? await response.json() : null);
  if (!keys.success) return null;
  return {
    uri: keys.data.totpURI,
    secret: new URL(keys.data.totpURI).searchParams.get('secret') ?? '',
    backupCodes: keys.data.backupCodes,
  };
}
