// The house's own doors: is it well, and the demo's doors, which exist only with DEMO=1.

import { z } from 'zod';
import { Instant } from '@/shared/values/primitives';
import { roles } from '@/shared/values/roles';
import { contract } from './contract';

const everyone = ['anyone', ...roles] as const;

export const readHealth = contract({
  name: 'house.read-health',
  method: 'GET',
  path: '/api/health',
  who: everyone,
  reach: 'open',
  health: true,
  answer: z.strictObject({
    status: z.enum(['ok', 'starting', 'failing']),
    database: z.boolean(),
    jobs: z.boolean(),
    version: z.string(),
  }),
  about: '200 when the database answers and jobs run; 503 while not.',
});

export const listDemoAccounts = contract({
  name: 'demo.list-accounts',
  method: 'GET',
  path: '/api/demo/accounts',
  who: everyone,
  reach: 'open',
  demo: true,
  answer: z.array(
    z.strictObject({
      email: z.string(),
      password: z.string(),
      role: z.enum(roles),
      site: z.string(),
      state: z.string().nullable(),
      name: z.string(),
    }),
  ),
  about: 'The demo’s accounts; for participants, `state` says where they are.',
});

export const listDemoMail = contract({
  name: 'demo.list-mail',
  method: 'GET',
  path: '/api/demo/mail',
  who: everyone,
  reach: 'open',
  demo: true,
  query: z.strictObject({
    to: z.string().max(254).optional(),
    limit: z.coerce.number().int().min(1).max(1000).default(200),
  }),
  answer: z.array(
    z.strictObject({
      id: z.string(),
      to: z.string(),
      subject: z.string(),
      text: z.string(),
      html: z.string(),
      sentAt: Instant,
    }),
  ),
  about: 'Mails that the local catcher took, newest first.',
});

export const moveDemoClock = contract({
  name: 'demo.move-clock',
  method: 'POST',
  path: '/api/demo/clock',
  who: everyone,
  reach: 'open',
  demo: true,
  /** At most 90 days a call. */
  body: z.strictObject({ advanceSeconds: z.number().int().min(0).max(7_776_000) }),
  answer: z.strictObject({ now: Instant, jobsRun: z.number().int() }),
  touches: [
    'account',
    'clearance',
    'course',
    'worklist',
    'participant',
    'session',
    'diary',
    'permit',
    'message',
    'caregiver',
  ],
  about:
    'Moves the clock of rules, jobs and permits forward, and answers once the jobs that came due have run. Not idempotent.',
  example: { body: { advanceSeconds: 86_400 } },
});
