// Who am I, invitations, and the mails' links. Signing in itself is the library's door under /api/auth.

import { z } from 'zod';
import { Email, Instant, Language, MailToken, NewPassword, PersonName, Uuid } from '@/shared/values/primitives';
import { roles } from '@/shared/values/roles';
import { contract } from './contract';

export const SiteContact = z.strictObject({
  id: Uuid,
  name: z.string(),
  code: z.string(),
  phone: z.string(),
  emergencyNumber: z.string(),
  zone: z.string(),
});

export const Me = z.strictObject({
  account: z.strictObject({
    id: z.string(),
    email: z.string(),
    name: z.string(),
    role: z.enum(roles),
    language: Language,
  }),
  sites: z.array(SiteContact),
  participant: z
    .strictObject({ id: Uuid, code: z.string(), zone: z.string(), courseId: Uuid.nullable(), state: z.string() })
    .nullable(),
  secondFactor: z.strictObject({ enabled: z.boolean(), required: z.boolean() }),
  demo: z.boolean(),
  /** The server's clock, for showing; the phone's own is never trusted. */
  now: Instant,
});
export type Me = z.infer<typeof Me>;

export const readMe = contract({
  name: 'account.read-me',
  method: 'GET',
  path: '/api/me',
  who: roles,
  reach: 'own',
  answer: Me,
  about: 'Who is signed in, with role, sites and the server’s clock.',
});

export const InvitationView = z.strictObject({
  role: z.enum(roles),
  email: z.string(),
  siteName: z.string(),
  /** Who invited: the site, or the participant's first name for a caregiver. */
  invitedBy: z.string(),
  expiresAt: Instant,
  /** True when an account with this address exists: sign in instead of choosing a password. */
  hasAccount: z.boolean(),
});

export const lookAtInvitation = contract({
  name: 'account.look-at-invitation',
  method: 'POST',
  path: '/api/invitations/look',
  who: ['anyone', ...roles],
  reach: 'open',
  body: z.strictObject({ token: MailToken }),
  answer: InvitationView,
  refusals: ['invitation.unknown', 'invitation.expired', 'invitation.used'],
  about: 'What an invitation is for, before accepting it. Changes nothing.',
  example: { body: { token: 'k3vY0mX9q2LrB7nT5wJ8cD1fG4hS6aZ0pE-uQ_iOx2M' } },
});

export const acceptInvitation = contract({
  name: 'account.accept-invitation',
  method: 'POST',
  path: '/api/invitations/accept',
  who: ['anyone', ...roles],
  reach: 'open',
  body: z.strictObject({ token: MailToken, name: PersonName, password: NewPassword, language: Language.default('en') }),
  answer: z.strictObject({ email: z.string(), role: z.enum(roles) }),
  status: 201,
  refusals: ['invitation.unknown', 'invitation.expired', 'invitation.used', 'invitation.account_exists'],
  touches: ['account'],
  about: 'Accepts an invitation and sets the password. Not idempotent: the second call says that it was used.',
  example: {
    body: {
      token: 'k3vY0mX9q2LrB7nT5wJ8cD1fG4hS6aZ0pE-uQ_iOx2M',
      name: 'Ines Marlow',
      password: 'twelve or more characters',
      language: 'en',
    },
  },
});

export const joinByInvitation = contract({
  name: 'account.join-by-invitation',
  method: 'POST',
  path: '/api/invitations/join',
  who: ['caregiver'],
  reach: 'own',
  body: z.strictObject({ token: MailToken }),
  answer: z.strictObject({ email: Email, role: z.enum(roles) }),
  refusals: ['invitation.unknown', 'invitation.expired', 'invitation.used', 'invitation.other_address'],
  touches: ['account', 'caregiver'],
  about: 'A caregiver who already has an account joins another participant.',
  example: { body: { token: 'k3vY0mX9q2LrB7nT5wJ8cD1fG4hS6aZ0pE-uQ_iOx2M' } },
});

export const stopMails = contract({
  name: 'account.stop-mails',
  method: 'POST',
  path: '/api/mail-stops',
  who: ['anyone', ...roles],
  reach: 'open',
  body: z.strictObject({ token: MailToken }),
  answer: z.strictObject({ stopped: z.literal(true) }),
  refusals: ['mail_stop.unknown'],
  touches: ['caregiver'],
  about: 'Stops the mails that this link stands in. Idempotent.',
  example: { body: { token: 'k3vY0mX9q2LrB7nT5wJ8cD1fG4hS6aZ0pE-uQ_iOx2M' } },
});
