// Puts the house together: database, transactions, sign-in, jobs, mail, doors. For server/main.ts, and for tests that want it in one
// process. Opens no port and reads no environment.

import type { Express } from 'express';
import type { Logger } from 'pino';
import { connect, type Client } from '@/db/client';
import { api } from '@/server/api';
import { makeAuth } from '@/server/auth/auth';
import { makeWhoIs } from '@/server/auth/actor';
import type { Env } from '@/server/env';
import { makeApp } from '@/server/http/app';
import { makeLimits } from '@/server/http/limits';
import { makeLog } from '@/server/http/log';
import { makeRunner, type Runner } from '@/server/jobs';
import { makeDelivery } from '@/server/mail/deliver-outbox';
import { makeTransport, type Transport } from '@/server/mail/transport';
import { makeTransact, type AnyAction, type Outside, type Transact } from '@/server/transact';

export interface House {
  env: Env;
  log: Logger;
  client: Client;
  app: Express;
  transact: Transact;
  runner: Runner;
  /** Lets requests in; before, every door says that the house is starting. */
  open(): void;
  /** Keeps new requests out. */
  shut(): void;
  close(): Promise<void>;
}

export interface HouseParts {
  /** Where mails go; without one they wait in the outbox. */
  transport?: Transport | undefined;
  wake?: Outside['wake'];
  /** For one test alone; see `Outside`. */
  mistake?: Outside['mistake'];
  log?: Logger;
  /** The database, when somebody opened it already. */
  client?: Client;
}

/** PostgreSQL allows 100 connections by default: room for several processes and for people who look (own choice). */
const connectionsMost = 15;

export function openHouse(env: Env, parts: HouseParts = {}): House {
  const log = parts.log ?? makeLog(env.logLevel);
  const client = parts.client ?? connectHouse(env, log);
  // The demo's door moves the clock by the runner, and the runner runs jobs by transact: one of them must come first.
  const late: { runner?: Runner } = {};
  const transact = makeTransact(client, env, {
    wake: parts.wake,
    mistake: parts.mistake,
    moveClock: env.isDemo ? (seconds) => runnerOf(late).moveClock(seconds) : undefined,
  });
  const auth = makeAuth(client, env, transact);
  const whoIs = makeWhoIs(auth, client.db, !env.isDemo);
  const delivery = makeDelivery(client, env, parts.transport ?? null, (error, key) =>
    log.warn({ err: error, key }, 'mail'),
  );
  const runner = makeRunner(transact, delivery, (error, job) => log.error({ err: error, job }, 'job'));
  late.runner = runner;
  const actions: readonly AnyAction[] = Object.values(api);
  let isOpen = false;
  const limits = makeLimits(client, env.limitsRequests);
  const app = makeApp({ env, log, actions, transact, auth, whoIs, limits, isReady: () => isOpen });
  return {
    ...{ env, log, client, app, transact, runner },
    open: () => {
      isOpen = true;
    },
    shut: () => {
      isOpen = false;
    },
    close: async () => {
      parts.transport?.close();
      await client.close();
    },
  };
}

export function connectHouse(env: Env, log: Logger): Client {
  return connect(env.databaseUrl, connectionsMost, (error) => log.error({ err: error }, 'database connection'));
}

/** A house for tests in one process: open at once, its mails kept or sent as the test says. */
export function createHouse(env: Env, parts: HouseParts = {}): House {
  const house = openHouse(env, parts);
  house.open();
  return house;
}

export function transportOf(env: Env, catcherUrl: string | null): Transport | undefined {
  const url = env.smtpUrl ?? catcherUrl;
  return url === null ? undefined : makeTransport(url, env.mailFrom);
}

function runnerOf({ runner }: { runner?: Runner }): Runner {
  if (!runner) throw new Error('The house is not put together yet.');
  return runner;
}
