// The sign-in library's doors that are open, each with its shape. Whatever else the library offers does not exist here.

import { z } from 'zod';
import { Email, NewPassword, PasswordAgain } from '@/shared/values/primitives';

export interface AuthDoor {
  path: string;
  /** Name in the audit trail. */
  name: string;
  body: z.ZodObject;
  /** What of the library's answer goes out; the session's token stays in its cookie. */
  answer: z.ZodObject;
  about: string;
  example?: unknown;
}

const empty = z.strictObject({});
const done = z.object({});
const Code = z.string().trim().min(6).max(40);

export const authDoors: readonly AuthDoor[] = [
  {
    path: '/sign-in/email',
    name: 'account.sign-in',
    body: z.strictObject({ email: Email, password: z.string().min(1).max(128), rememberMe: z.boolean().optional() }),
    answer: z.object({ twoFactorRedirect: z.boolean().optional() }),
    about:
      'Signs in and sets the session’s cookie; `twoFactorRedirect`: a code must follow at /api/auth/two-factor/verify-totp.',
    example: { email: 'clinician@harrowmere.example', password: 'as the list of demo accounts says' },
  },
  { path: '/sign-out', name: 'account.sign-out', body: empty, answer: done, about: 'Ends this session.' },
  {
    path: '/revoke-sessions',
    name: 'account.sign-out-everywhere',
    body: empty,
    answer: done,
    about: 'Ends every session of the account, this one too.',
  },
  {
    path: '/revoke-other-sessions',
    name: 'account.sign-out-elsewhere',
    body: empty,
    answer: done,
    about: 'Ends the other sessions of the account.',
  },
  {
    path: '/request-password-reset',
    name: 'account.request-reset',
    body: z.strictObject({ email: Email, redirectTo: z.literal('/reset-password').optional() }),
    answer: done,
    about: 'Mails a link to choose a new password; answers alike whether the address is known or not.',
    example: { email: 'ines.marlow@harrowmere.example' },
  },
  {
    path: '/reset-password',
    name: 'account.reset-password',
    body: z.strictObject({ token: z.string().min(1).max(200), newPassword: NewPassword }),
    answer: done,
    about: 'Chooses a new password with the token of the mail and ends all sessions.',
    example: { token: 'k3vY0mX9q2LrB7nT5wJ8cD1f', newPassword: 'twelve or more characters' },
  },
  {
    path: '/change-password',
    name: 'account.change-password',
    body: z.strictObject({
      currentPassword: PasswordAgain,
      newPassword: NewPassword,
      revokeOtherSessions: z.boolean().optional(),
    }),
    answer: done,
    about: 'Changes one’s own password.',
    example: {
      currentPassword: 'the present one',
      newPassword: 'twelve or more characters',
      revokeOtherSessions: true,
    },
  },
  {
    path: '/two-factor/enable',
    name: 'account.begin-second-factor',
    body: z.strictObject({ password: PasswordAgain }),
    answer: z.object({ totpURI: z.string(), backupCodes: z.array(z.string()) }),
    about:
      'Begins the second factor: the key for the authenticator and the emergency codes. It is on after the first code.',
    example: { password: 'the password again' },
  },
  {
    path: '/two-factor/verify-totp',
    name: 'account.sign-in-second-factor',
    body: z.strictObject({ code: Code }),
    answer: done,
    about: 'The six digits of the authenticator: completes a sign-in, or the setting up.',
    example: { code: '274913' },
  },
  {
    path: '/two-factor/verify-backup-code',
    name: 'account.sign-in-backup-code',
    body: z.strictObject({ code: Code }),
    answer: done,
    about: 'One of the emergency codes, each once.',
    example: { code: 'aB3dE-9kLmN' },
  },
  {
    path: '/two-factor/generate-backup-codes',
    name: 'account.new-backup-codes',
    body: z.strictObject({ password: PasswordAgain }),
    answer: z.object({ backupCodes: z.array(z.string()) }),
    about: 'New emergency codes; the old ones end.',
    example: { password: 'the password again' },
  },
  {
    path: '/two-factor/disable',
    name: 'account.end-second-factor',
    body: z.strictObject({ password: PasswordAgain }),
    answer: done,
    about: 'Switches the second factor off.',
    example: { password: 'the password again' },
  },
];
