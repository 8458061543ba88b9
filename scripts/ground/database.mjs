// What: the database that `npm start` and `npm run dev` work on: the one in DATABASE_URL, or the checkout's own cluster.
// Must not: drop anything in a database that somebody else runs.
import { rmSync } from 'node:fs';
import path from 'node:path';
import { postgresFolder } from './install.mjs';
import { claim } from './lock.mjs';
import { workFolder } from './paths.mjs';
import { startLastingCluster } from './postgres.mjs';
import { beforeEnd, Plainly } from './processes.mjs';

export async function openDatabase({ reset, say }) {
  const given = process.env.DATABASE_URL;
  if (given) {
    if (reset)
      throw new Plainly(
        '--reset makes the demo of the own database anew. DATABASE_URL is set: empty that database yourself.',
      );
    return given;
  }
  const other = claim('running.pid');
  if (other)
    throw new Plainly(
      `Rampwell is already running from this folder (process ${other}). Stop it first, or set DATABASE_URL.`,
    );
  const starting = postgresFolder(say).then((binaries) => startLastingCluster(binaries, { reset, say }));
  // Said before it runs: when something else fails meanwhile, the end waits for the cluster and stops it.
  beforeEnd(async () => (await starting.catch(() => undefined))?.stop());
  const cluster = await starting;
  if (reset) {
    rmSync(path.join(workFolder, 'photos'), { recursive: true, force: true });
    say('Database: emptied, the demo is made anew');
  }
  return cluster.databaseUrl;
}

/** The same database for a look at it: beside a server that runs on it, or with the cluster started for the while. */
export async function reachDatabase(say) {
  const given = process.env.DATABASE_URL;
  if (given) return given;
  const isInUse = claim('running.pid') !== undefined;
  const cluster = await startLastingCluster(await postgresFolder(say), { say });
  if (!isInUse) beforeEnd(cluster.stop);
  return cluster.databaseUrl;
}
