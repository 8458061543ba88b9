// The only reader of the environment. A missing or odd value stops the start with one clear line; nothing is guessed.

import { randomBytes } from 'node:crypto';
import { chmodSync, existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { z } from 'zod';
import { version } from '@/package.json';

export interface Env {
  port: number;
  host: string;
  databaseUrl: string;
  isDemo: boolean;
  /** Whether an empty database is filled with the demo's people. */
  fillsDemo: boolean;
  role: 'all' | 'web' | 'worker';
  /** Signs cookies, seals the signing key: whoever has it can be anybody. */
  secret: string;
  /** Folder that this server may write to: its secret, the audit trail's anchors. */
  dataFolder: string;
  /** Null: the demo's own catcher; without the demo, mails wait in the outbox. */
  smtpUrl: string | null;
  mailFrom: string;
  /** Origin under which people reach this server, without a slash at the end. */
  baseUrl: string;
  /** Given, not made from host and port: then no other origin is ours. */
  baseUrlIsGiven: boolean;
  limitsRequests: boolean;
  /** Address of the account that a server without accounts begins with. */
  firstAdministrator: string | null;
  logLevel: string;
  /** Folder of the exported pages. */
  webFolder: string;
  version: string;
}

/** As the environment gives it. */
type Source = Readonly<Record<string, string | undefined>>;

/** The one kind of error whose message is for whoever starts the server. */
export class EnvError extends Error {}

/** 256 bits, in characters of base64url. */
const secretLengthMin = 32;
const demoSender = 'Rampwell <no-reply@harrowmere.example>';

const given = z.string().trim().min(1);
const yesOrNo = z
  .enum(['1', '0', 'true', 'false', 'on', 'off'])
  .transform((word) => ['1', 'true', 'on'].includes(word));

const Variables = z.object({
  PORT: z.coerce.number().int().min(0).max(65535).default(8080),
  HOST: given.default('127.0.0.1'),
  DATABASE_URL: given.regex(/^postgres(ql)?:\/\//),
  DEMO: yesOrNo.default(false),
  DEMO_SEED: yesOrNo.default(true),
  ROLE: z.enum(['all', 'web', 'worker']).default('all'),
  SECRET: z.string().min(secretLengthMin).optional(),
  RAMPWELL_DATA: given.default('.rampwell'),
  SMTP_URL: given.regex(/^smtps?:\/\//).optional(),
  MAIL_FROM: given.regex(/@/).default(demoSender),
  BASE_URL: z.url({ protocol: /^https?$/ }).optional(),
  RATE_LIMITS: yesOrNo.optional(),
  FIRST_ADMINISTRATOR: z
    .email()
    .transform((email) => email.toLowerCase())
    .optional(),
  LOG_LEVEL: z.enum(['fatal', 'error', 'warn', 'info', 'debug', 'silent']).default('info'),
  WEB_FOLDER: given.default('dist'),
});

const allowed: Record<keyof z.infer<typeof Variables>, string> = {
  PORT: 'a number from 0 to 65535',
  HOST: 'a name or address to listen on',
  DATABASE_URL: 'the address of a PostgreSQL database, postgres://…',
  DEMO: '1 or 0',
  DEMO_SEED: '1 or 0',
  ROLE: 'all, web or worker',
  SECRET: `at least ${secretLengthMin} random characters`,
  RAMPWELL_DATA: 'a folder that the server may write to',
  SMTP_URL: 'the address of a mail server, smtp://… or smtps://…',
  MAIL_FROM: 'the sender of mails, such as Clinic <no-reply@clinic.example>',
  BASE_URL: 'the address under which people reach this server, https://…',
  RATE_LIMITS: 'on or off',
  FIRST_ADMINISTRATOR: 'an e-mail address',
  LOG_LEVEL: 'fatal, error, warn, info, debug or silent',
  WEB_FOLDER: 'the folder of the exported pages',
};

/** Empty means not set: that is how compose files and unit files leave a variable out. */
function withoutEmpty(source: Source): Source {
  return Object.fromEntries(Object.entries(source).filter(([, value]) => value !== ''));
}

export function readEnv(source: Source = process.env): Env {
  const parsed = Variables.safeParse(withoutEmpty(source));
  if (!parsed.success) {
    const names = Object.keys(allowed).filter((name): name is keyof typeof allowed =>
      parsed.error.issues.some((issue) => issue.path[0] === name),
    );
    throw new EnvError(
      names.map((name) => `${name} ${source[name] ? 'is odd' : 'is missing'}: it must be ${allowed[name]}.`).join(' '),
    );
  }
  const v = parsed.data;
  const host = v.HOST.includes(':') ? `[${v.HOST}]` : v.HOST;
  return {
    port: v.PORT,
    host: v.HOST,
    databaseUrl: v.DATABASE_URL,
    isDemo: v.DEMO,
    fillsDemo: v.DEMO && v.DEMO_SEED,
    role: v.ROLE,
    secret: v.SECRET ?? keptSecret(path.resolve(v.RAMPWELL_DATA)),
    dataFolder: path.resolve(v.RAMPWELL_DATA),
    smtpUrl: v.SMTP_URL ?? null,
    mailFrom: v.MAIL_FROM,
    baseUrl: v.BASE_URL ? new URL(v.BASE_URL).origin : `http://${host}:${v.PORT}`,
    baseUrlIsGiven: v.BASE_URL !== undefined,
    limitsRequests: v.RATE_LIMITS ?? !v.DEMO,
    firstAdministrator: v.FIRST_ADMINISTRATOR ?? null,
    logLevel: v.LOG_LEVEL,
    webFolder: path.resolve(v.WEB_FOLDER),
    version,
  };
}

/** A secret made once and kept beside the data, readable by its owner alone. */
function keptSecret(folder: string): string {
  const file = path.join(folder, 'secret');
  try {
    if (!existsSync(file)) {
      mkdirSync(folder, { recursive: true });
      // `wx`: of two processes that start together one makes it, the other reads it.
      writeFileSync(file, randomBytes(secretLengthMin).toString('base64url'), { mode: 0o600, flag: 'wx' });
      chmodSync(file, 0o600);
    }
  } catch (error) {
    if (!existsSync(file))
      throw new EnvError(
        `SECRET is not set and none can be kept in ${folder}: ${error instanceof Error ? error.message : ''}`,
      );
  }
  const secret = readFileSync(file, 'utf8').trim();
  if (secret.length < secretLengthMin)
    throw new EnvError(`The secret in ${file} is too short. Remove the file to have a new one made.`);
  return secret;
}
