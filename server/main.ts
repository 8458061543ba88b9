// The start: environment, database, tables, keys, the demo's people, then requests and jobs; and the orderly end. Decides nothing else.

import { createServer, type Server } from 'node:http';
import { setTimeout as pause } from 'node:timers/promises';
import { migrate } from '@/db/migrate';
import { beat, forgetBeats } from '@/db/queries/house';
import { startCatcher, type Catcher } from '@/server/demo/catcher';
import { seedDemo } from '@/server/demo/seed';
import { EnvError, readEnv, type Env } from '@/server/env';
import { ensureSigningKey } from '@/server/signing-key';
import { firstAdministrator } from '@/server/house/first-administrator';
import { anchorKeeper } from '@/server/house/keep-anchors';
import { connectHouse, openHouse, transportOf, type House } from '@/server/house/open-house';
import { makeLog } from '@/server/http/log';
import { openQueue, type Queue } from '@/server/queue';

/** Own choices. */
const triesAtDatabase = 60;
const waitMilliseconds = 1000;
const graceMilliseconds = 10_000;
const daySeconds = 86_400;
/** Slow uploads over a phone's network are real; a connection that says nothing for this long is not. */
const requestMilliseconds = 60_000;

/** Progress for people: plain lines beside the log's JSON. */
function say(line: string): void {
  process.stdout.write(`${line}\n`);
}

async function untilMigrated(env: Env): Promise<void> {
  for (let attempt = 1; ; attempt += 1) {
    try {
      return await migrate(env.databaseUrl);
    } catch (error) {
      const isAway =
        error instanceof Error &&
        'code' in error &&
        /^(ECONN|ENOTFOUND|ETIMEDOUT|EAI_AGAIN|57P03)/.test(String(error.code));
      if (!isAway || attempt === triesAtDatabase) throw error;
      if (attempt === 1) say('Waiting for the database');
      await pause(waitMilliseconds);
    }
  }
}

function listen(server: Server, env: Env): Promise<void> {
  return new Promise((resolve, reject) => {
    server.once('error', reject);
    server.listen(env.port, env.host, resolve);
  });
}

interface Running {
  house: House;
  server: Server | null;
  queue: Queue;
  catcher: Catcher | null;
}

async function start(env: Env): Promise<Running> {
  const log = makeLog(env.logLevel);
  const client = connectHouse(env, log);
  const late: { queue?: Queue } = {};
  const catcher = env.isDemo && env.smtpUrl === null ? await startCatcher(client) : null;
  if (!catcher && env.smtpUrl === null) say('SMTP_URL is not set: mails are kept and not sent until it is.');
  const house = openHouse(env, {
    ...{ log, client, transport: transportOf(env, catcher?.url ?? null) },
    wake: async (execute) => late.queue?.wake(execute),
  });
  const server = env.role === 'worker' ? null : createServer({ requestTimeout: requestMilliseconds }, house.app);
  // The port is ours before the tables are: whoever asks meanwhile hears that the house is starting.
  if (server) await listen(server, env);

  await untilMigrated(env);
  const { transact } = house;
  await transact.note(
    { kind: 'system', job: 'house.start' },
    'house.start',
    null,
    async (tx) => void (await ensureSigningKey(tx)),
  );
  if (env.firstAdministrator) await firstAdministrator(transact, env.firstAdministrator);
  if (env.fillsDemo && env.role !== 'worker') await seedDemo(house, say);

  const queue = await openQueue(env.databaseUrl, (error) => log.error({ err: error }, 'queue'));
  late.queue = queue;
  if (env.role !== 'web') {
    await beat(client.db, processName());
    await forgetBeats(client.db, daySeconds);
    const keepAnchors = anchorKeeper(client.db, env.dataFolder);
    await queue.work(() => runJobs(house, keepAnchors));
  }
  house.open();
  return { house, server, queue, catcher };
}

function processName(): string {
  return `jobs:${process.pid}`;
}

async function runJobs({ client, runner, log }: House, keepAnchors: () => Promise<void>): Promise<void> {
  await runner.runDue();
  // A full disk must not stop the jobs; the file gets what it lacks at the next run.
  await keepAnchors().catch((error: unknown) => log.error({ err: error }, 'audit anchors'));
  await beat(client.db, processName());
}

/** Takes no more requests, lets those in hand end, then the jobs, then the database. */
async function stop({ house, server, queue, catcher }: Running): Promise<void> {
  if (server) {
    const ended = new Promise<void>((resolve) => server.close(() => resolve()));
    server.closeIdleConnections();
    await Promise.race([ended, pause(graceMilliseconds)]);
    server.closeAllConnections();
  }
  await queue.stop(graceMilliseconds);
  await catcher?.close();
  await house.close();
}

async function main(): Promise<void> {
  const starting = start(readEnv());
  let isStarted = false;
  let isStopping = false;
  for (const signal of ['SIGTERM', 'SIGINT'] as const) {
    process.on(signal, () => {
      // A second wish to end, or one that came before the start was over, does not wait.
      if (isStopping) process.exit(1);
      if (!isStarted) process.exit(0);
      isStopping = true;
      void starting.then(stop).then(
        () => process.exit(0),
        () => process.exit(1),
      );
    });
  }
  await starting;
  isStarted = true;
}

main().catch((error: unknown) => {
  process.stderr.write(`${error instanceof EnvError ? error.message : `The start failed: ${plainly(error)}`}\n`);
  process.exit(1);
});

function plainly(error: unknown): string {
  if (!(error instanceof Error)) return String(error);
  const cause = error.cause instanceof Error ? ` (${error.cause.message})` : '';
  return `${error.message.split('\n')[0]}${cause}`;
}
