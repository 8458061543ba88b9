// The one way to the database. Values from here go to server/transact.ts and server/auth/ alone; everybody else imports the type.

import { drizzle, type NodePgDatabase, type NodePgQueryResultHKT } from 'drizzle-orm/node-postgres';
import type { PgDatabase } from 'drizzle-orm/pg-core';
import pg from 'pg';

/** A pool's handle or a transaction's: queries take either. */
export type Db = PgDatabase<NodePgQueryResultHKT, Record<string, never>>;

export interface Client {
  db: NodePgDatabase;
  pool: pg.Pool;
  close(): Promise<void>;
}

/**
 * Opens a pool. A connection that breaks is replaced at the next use, so a restart of PostgreSQL needs no restart of the server.
 * @param url postgres://…
 * @param maxConnections most connections of this process
 * @param onError told of errors on idle connections, which would otherwise end the process
 */
export function connect(url: string, maxConnections: number, onError: (error: Error) => void): Client {
  const pool = new pg.Pool({
    connectionString: url,
    max: maxConnections,
    connectionTimeoutMillis: 3000,
    statement_timeout: 15_000,
    application_name: 'rampwell',
  });
  pool.on('error', onError);
  return { db: drizzle(pool), pool, close: () => pool.end() };
}
