// What: starts the server as it is shipped, as a process of its own, on a database of its own; for walks in the browser and
// for tests that need two processes. Must not: reach into the server; a test talks to it by HTTP.
import { execFile, spawn } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { createServer } from 'node:net';
import os from 'node:os';
import path from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { promisify } from 'node:util';
import { asSuperuser, createDatabase, databaseUrl as urlOf, dropDatabase } from './postgres';

const root = path.resolve(__dirname, '..', '..');
const demoDatabase = 'rampwell_demo';
/** One for all servers of the tests: a copied demo is sealed under it. */
const secret = 'only-for-tests-0123456789-0123456789';

export interface ServerOptions {
  demo?: boolean;
  /** `demo`: the invented sites and people, filled once a run and copied from then on. */
  seed?: 'none' | 'demo';
  env?: Record<string, string>;
  /** Join a server that is already up instead of getting a database of one's own. */
  databaseUrl?: string;
}

export interface RunningServer {
  url: string;
  databaseUrl: string;
  /** What it wrote so far, for a failing test to show. */
  output: () => string;
  stop: () => Promise<void>;
}

function freePort(): Promise<number> {
  return new Promise((resolve, reject) => {
    const probe = createServer();
    probe.once('error', reject);
    probe.listen(0, '127.0.0.1', () => {
      const address = probe.address();
      probe.close(() =>
        address && typeof address === 'object' ? resolve(address.port) : reject(new Error('no port')),
      );
    });
  });
}

let built: Promise<unknown> | undefined;

function buildServer(): Promise<unknown> {
  built ??= promisify(execFile)(process.execPath, ['scripts/build.mjs', 'server'], { cwd: root });
  return built;
}

/** Answers when the server can serve; fails with the server's own words when it ends before. */
async function launch(databaseUrl: string, env: Record<string, string>): Promise<RunningServer> {
  await buildServer();
  const port = await freePort();
  const folder = mkdtempSync(path.join(os.tmpdir(), 'rampwell-server-'));
  const child = spawn(process.execPath, ['--enable-source-maps', '.rampwell/server.cjs'], {
    cwd: root,
    stdio: ['ignore', 'pipe', 'pipe'],
    env: {
      PATH: process.env.PATH,
      NODE_ENV: 'production',
      HOST: '127.0.0.1',
      PORT: String(port),
      DATABASE_URL: databaseUrl,
      RAMPWELL_DATA: folder,
      SECRET: secret,
      ...env,
    },
  });
  let output = '';
  child.stdout.on('data', (chunk) => (output += chunk));
  child.stderr.on('data', (chunk) => (output += chunk));
  const ended = new Promise<void>((resolve) => child.once('exit', () => resolve()));

  const url = `http://127.0.0.1:${port}`;
  const ready = async (): Promise<boolean> => {
    const answer = await fetch(`${url}/api/health`).catch(() => undefined);
    await answer?.body?.cancel();
    return answer?.status === 200;
  };
  while (!(await ready())) {
    if (child.exitCode !== null || child.signalCode !== null)
      throw new Error(`The server ended before it was ready:\n${output}`);
    await pause(50);
  }
  const stop = async (): Promise<void> => {
    const insist = setTimeout(() => child.kill('SIGKILL'), 10_000);
    child.kill('SIGTERM');
    await ended;
    clearTimeout(insist);
    rmSync(folder, { recursive: true, force: true });
  };
  return { url, databaseUrl, output: () => output, stop };
}

/** Fills the demo once a run: it is made by the real actions and takes its time. A lock keeps two workers from both doing it. */
async function fillDemo(): Promise<void> {
  await asSuperuser(async (client) => {
    await client.query(`select pg_advisory_lock(hashtext('${demoDatabase}'))`);
    const there = await client.query('select 1 from pg_database where datname = $1', [demoDatabase]);
    if (there.rowCount) return;
    const name = await createDatabase();
    const server = await launch(urlOf(name), { DEMO: '1', DEMO_SEED: '1' });
    await server.stop();
    await client.query(`alter database ${name} rename to ${demoDatabase}`);
  });
}

export async function startServer(options: ServerOptions = {}): Promise<RunningServer> {
  const { seed = 'none', demo = seed === 'demo', env = {} } = options;
  const settings = { DEMO: demo ? '1' : '0', DEMO_SEED: seed === 'demo' ? '1' : '0', ...env };
  if (options.databaseUrl) return launch(options.databaseUrl, settings);

  if (seed === 'demo') await fillDemo();
  const name = await createDatabase(seed === 'demo' ? demoDatabase : undefined);
  const server = await launch(urlOf(name), settings);
  return {
    ...server,
    stop: async () => {
      await server.stop();
      await dropDatabase(name);
    },
  };
}
