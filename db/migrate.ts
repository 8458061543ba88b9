// Brings the tables to the newest version. Changes structure only, and must not be run by two processes at once: hence the lock.

import { existsSync } from 'node:fs';
import path from 'node:path';
import { drizzle } from 'drizzle-orm/node-postgres';
import { migrate as runMigrations } from 'drizzle-orm/node-postgres/migrator';
import pg from 'pg';

/** Any fixed number; whoever else uses advisory locks in this database must take another. */
const migrationLock = 7_261_001;

/** The folder beside the sources, found from wherever this file was bundled to. */
function migrationsFolder(): string {
  let folder = __dirname;
  while (path.dirname(folder) !== folder) {
    const candidate = path.join(folder, 'db', 'migrations');
    if (existsSync(path.join(candidate, 'meta', '_journal.json'))) return candidate;
    folder = path.dirname(folder);
  }
  throw new Error(`No folder db/migrations above ${__dirname}.`);
}

/**
 * Migrates. The migrator itself takes no lock: of three started together on an empty database two failed, so one client holds
 * an advisory lock around it and the others wait.
 * @param url postgres://…
 */
export async function migrate(url: string): Promise<void> {
  const client = new pg.Client({
    connectionString: url,
    application_name: 'rampwell-migrate',
    options: '-c timezone=UTC',
  });
  await client.connect();
  try {
    await client.query('select pg_advisory_lock($1)', [migrationLock]);
    await runMigrations(drizzle(client), { migrationsFolder: migrationsFolder(), migrationsSchema: 'drizzle' });
  } finally {
    // Ending the connection lets go of the lock.
    await client.end();
  }
}
