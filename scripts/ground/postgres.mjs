// What: a PostgreSQL cluster of the project's own, on loopback, run by somebody who is not root: the lasting one of
// `npm start` and the throw-away one of the tests. Must not: listen to the network, or touch a cluster it did not make.
import { createHash, randomBytes } from 'node:crypto';
import { spawnSync } from 'node:child_process';
import {
  chmodSync,
  chownSync,
  existsSync,
  mkdirSync,
  mkdtempSync,
  readdirSync,
  readFileSync,
  renameSync,
  rmSync,
  statSync,
  writeFileSync,
} from 'node:fs';
import { connect } from 'node:net';
import os from 'node:os';
import path from 'node:path';
import { isRoot } from './install.mjs';
import { root, workFolder } from './paths.mjs';
import { freePort, Plainly, run } from './processes.mjs';

const host = '127.0.0.1';
const version = '15';
const throwAwayPrefix = 'rampwell-test-';

/** PostgreSQL refuses to run as root, so root hands its cluster to the account that Debian made for it. */
function runner() {
  // Away from the terminal's Ctrl-C, which would cut off initdb and pg_ctl halfway; this program stops what they began.
  if (!isRoot) return { detached: true };
  const line = readFileSync('/etc/passwd', 'utf8')
    .split('\n')
    .find((entry) => entry.startsWith('postgres:'));
  if (!line) throw new Plainly('There is no account "postgres" on this machine, and PostgreSQL does not run as root.');
  const [, , uid, gid] = line.split(':').map(Number);
  // The folder we stand in may be closed to that account.
  return { uid, gid, cwd: '/', detached: true };
}

function own(file, { uid, gid }) {
  if (uid !== undefined) chownSync(file, uid, gid);
}

function canEnter(folder, as) {
  return spawnSync('test', ['-x', folder], as).status === 0;
}

/** `.rampwell`, or a folder outside when the checkout lies where the database's account cannot go (a closed home folder). */
function lastingFolder(as, say) {
  mkdirSync(workFolder, { recursive: true });
  if (canEnter(workFolder, as)) return workFolder;
  const name = createHash('sha256').update(root).digest('hex').slice(0, 12);
  const folder = path.join(os.tmpdir(), `rampwell-${name}`);
  mkdirSync(folder, { recursive: true });
  if (statSync(folder).uid !== process.getuid())
    throw new Plainly(`${folder} belongs to somebody else. Set DATABASE_URL instead.`);
  say(`Database: its account cannot enter ${workFolder}, so it lies in ${folder}`);
  return folder;
}

async function initialise(binaries, folder, as, extra) {
  // Made beside its place and moved when whole: an interrupted start must not leave half a cluster that looks like one.
  const fresh = `${folder}.new`;
  rmSync(fresh, { recursive: true, force: true });
  mkdirSync(fresh);
  chmodSync(fresh, 0o700);
  own(fresh, as);
  const args = ['-D', fresh, '-U', 'postgres', '-E', 'UTF8', '--locale=C.UTF-8', ...extra];
  await run(path.join(binaries, 'initdb'), args, { quiet: true, ...as });
  renameSync(fresh, folder);
}

async function launch(binaries, folder, as, settings) {
  const port = await freePort(host);
  const log = path.join(folder, 'postgres.log');
  const options = [
    `listen_addresses=${host}`,
    'unix_socket_directories=',
    `port=${port}`,
    'timezone=UTC',
    'log_timezone=UTC',
    ...settings,
  ];
  const start = [
    '-D',
    folder,
    '-l',
    log,
    '-w',
    '-t',
    '60',
    '-o',
    options.map((option) => `-c ${option}`).join(' '),
    'start',
  ];
  try {
    // The server inherits what pg_ctl has: with pipes the wait for their end would never be over.
    await run(path.join(binaries, 'pg_ctl'), start, { stdio: 'ignore', ...as });
  } catch {
    const words = existsSync(log) ? readFileSync(log, 'utf8').trim().split('\n').slice(-8).join('\n') : '(no log)';
    throw new Plainly(`PostgreSQL did not start. The end of ${log}:\n${words}`);
  }
  return port;
}

function stopper(binaries, folder, as) {
  return () =>
    run(path.join(binaries, 'pg_ctl'), ['-D', folder, '-m', 'fast', '-w', '-t', '60', 'stop'], { quiet: true, ...as });
}

function answers(port) {
  return new Promise((resolve) => {
    const socket = connect({ port, host }, () => resolve(true) || socket.destroy());
    socket.once('error', () => resolve(false));
  });
}

/** Port of a cluster that is running in this folder: left by a start that was ended the hard way. */
async function runningPort(folder) {
  const note = path.join(folder, 'postmaster.pid');
  if (!existsSync(note)) return undefined;
  const port = Number(readFileSync(note, 'utf8').split('\n')[3]);
  return port > 0 && (await answers(port)) ? port : undefined;
}

/** Runs SQL as the cluster's superuser. Values put into it are our own: hexadecimal passwords and fixed names. */
export function administer({ binaries, port, password }, sql, database = 'postgres') {
  const result = spawnSync(
    path.join(binaries, 'psql'),
    ['-X', '-q', '-A', '-t', '-v', 'ON_ERROR_STOP=1', '-h', host, '-p', String(port), '-U', 'postgres', '-d', database],
    {
      input: sql,
      encoding: 'utf8',
      env: { PATH: process.env.PATH, PGPASSWORD: password ?? '', PGOPTIONS: '--client-min-messages=warning' },
    },
  );
  if (result.status !== 0) throw new Plainly(`The database refused: ${result.stderr || result.error}`);
  return result.stdout.trim();
}

/** The product connects as `rampwell`, which owns its database but is no superuser: revoked rights and triggers bind it. */
function prepareOwner(cluster, password) {
  administer(
    cluster,
    `select 'create role rampwell login createrole' where not exists (select from pg_roles where rolname = 'rampwell') \\gexec
     alter role rampwell password '${password}';`,
  );
}

function ensureDatabase(cluster) {
  administer(
    cluster,
    `select 'create database rampwell owner rampwell' where not exists (select from pg_database where datname = 'rampwell') \\gexec`,
  );
}

/** The cluster of `npm start` and `npm run dev`: made once, kept, guarded by passwords that only this account can read. */
export async function startLastingCluster(binaries, { reset = false, say }) {
  const as = runner();
  const base = lastingFolder(as, say);
  const folder = path.join(base, 'pg');
  const secrets = path.join(base, 'pg-passwords');

  if (!existsSync(path.join(folder, 'PG_VERSION'))) {
    say('Database: making a new PostgreSQL cluster');
    // Any account of this machine reaches a port on loopback, so "trust" would open the records to all of them.
    // initdb reads the first line as the superuser's password; the second is the product's.
    rmSync(secrets, { force: true });
    writeFileSync(secrets, `${randomBytes(24).toString('hex')}\n${randomBytes(24).toString('hex')}\n`, { mode: 0o600 });
    own(secrets, as);
    await initialise(binaries, folder, as, ['--auth=scram-sha-256', `--pwfile=${secrets}`]);
  }
  const made = readFileSync(path.join(folder, 'PG_VERSION'), 'utf8').trim();
  if (made !== version)
    throw new Plainly(
      `${folder} was made by PostgreSQL ${made}; Rampwell runs on ${version}. Move the folder away and start again.`,
    );

  const port = (await runningPort(folder)) ?? (await launch(binaries, folder, as, []));
  const [password, ownerPassword] = readFileSync(secrets, 'utf8').split('\n');
  const cluster = { binaries, port, password };
  const stop = stopper(binaries, folder, as);
  try {
    prepareOwner(cluster, ownerPassword);
    if (reset) administer(cluster, 'drop database if exists rampwell with (force);');
    ensureDatabase(cluster);
  } catch (error) {
    await stop();
    throw error;
  }
  return { databaseUrl: `postgres://rampwell:${ownerPassword}@${host}:${port}/rampwell`, stop };
}

function isAlive(pid) {
  try {
    process.kill(pid, 0);
    return true;
  } catch (error) {
    return error.code === 'EPERM';
  }
}

/** Test runs that were ended the hard way leave a cluster behind; the next run clears it away. */
async function clearAbandoned(binaries, as) {
  const left = readdirSync(os.tmpdir()).filter((name) => name.startsWith(throwAwayPrefix));
  for (const name of left) {
    const folder = path.join(os.tmpdir(), name, 'pg');
    if (isAlive(Number(name.slice(throwAwayPrefix.length).split('-')[0]))) continue;
    try {
      if (await runningPort(folder)) await stopper(binaries, folder, as)();
      rmSync(path.dirname(folder), { recursive: true, force: true });
    } catch {
      // Somebody else's, or being cleared by another run at this moment: nothing of ours depends on it.
    }
  }
}

/** A cluster for one run of the tests, fast because it may lose everything. Passwords would protect nothing: it holds invented rows for minutes. */
export async function startThrowAwayCluster(binaries) {
  const as = runner();
  await clearAbandoned(binaries, as);
  const base = mkdtempSync(path.join(os.tmpdir(), `${throwAwayPrefix}${process.pid}-`));
  chmodSync(base, 0o755);
  const folder = path.join(base, 'pg');
  await initialise(binaries, folder, as, ['--auth=trust', '--no-sync']);
  const port = await launch(binaries, folder, as, [
    'fsync=off',
    'synchronous_commit=off',
    'full_page_writes=off',
    'max_connections=300',
  ]);
  const cluster = { binaries, port };
  const stopServer = stopper(binaries, folder, as);
  const stop = async () => {
    await stopServer();
    rmSync(base, { recursive: true, force: true });
  };
  try {
    prepareOwner(cluster, 'rampwell');
    ensureDatabase(cluster);
  } catch (error) {
    await stop();
    throw error;
  }
  return {
    adminUrl: `postgres://postgres@${host}:${port}/postgres`,
    databaseUrl: `postgres://rampwell@${host}:${port}/rampwell`,
    port,
    stop,
  };
}
