// What: the PostgreSQL of a Jest run: started when the first project needs it, with the migrated template to copy from.
// Must not: start a second one when `npm test` already has (it says so by RAMPWELL_TEST_PORT).
import { mkdirSync, rmSync } from 'node:fs';
import { createRequire } from 'node:module';
import path from 'node:path';
import { build } from 'esbuild';
import { postgresFolder } from '../../../scripts/ground/install.mjs';
import { root, workFolder } from '../../../scripts/ground/paths.mjs';
import { administer, startThrowAwayCluster } from '../../../scripts/ground/postgres.mjs';

const template = 'rampwell_template';
let cluster;
let binaries;

async function migrate(databaseUrl) {
  // Jest loads this file without its own transforms, so the migration is bundled like the server is.
  const outfile = path.join(workFolder, `migrate-for-tests-${process.pid}.cjs`);
  mkdirSync(workFolder, { recursive: true });
  await build({
    absWorkingDir: root,
    entryPoints: ['db/migrate.ts'],
    outfile,
    bundle: true,
    platform: 'node',
    format: 'cjs',
    packages: 'external',
    logLevel: 'error',
  });
  try {
    await createRequire(import.meta.url)(outfile).migrate(databaseUrl);
  } finally {
    rmSync(outfile, { force: true });
  }
}

function admin(sql) {
  return administer({ binaries, port: process.env.RAMPWELL_TEST_PORT }, sql);
}

function exists(database) {
  return admin(`select 1 from pg_database where datname = '${database}';`) === '1';
}

/** Starts the cluster if nobody has, and migrates the template if nobody has. */
export async function openCluster() {
  binaries = await postgresFolder(console.log);
  if (!process.env.RAMPWELL_TEST_PORT) {
    cluster = await startThrowAwayCluster(binaries);
    process.env.RAMPWELL_TEST_PORT = String(cluster.port);
  }
  if (exists(template)) return;
  admin(`create database ${template} owner rampwell;`);
  await migrate(`postgres://rampwell@127.0.0.1:${process.env.RAMPWELL_TEST_PORT}/${template}`);
}

/** A copy for each Jest worker: tests of one file follow each other, files run side by side. */
export function copyForWorkers(count) {
  for (let worker = 1; worker <= count; worker += 1) {
    admin(`drop database if exists rampwell_w${worker} with (force);`);
    admin(`create database rampwell_w${worker} template ${template} owner rampwell;`);
  }
}

export async function closeCluster() {
  const ours = cluster;
  cluster = undefined;
  await ours?.stop();
}
