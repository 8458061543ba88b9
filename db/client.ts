// The one way to the database. Values from here go to server/transact.ts and server/auth/ alone; everybody else imports the type.

import { drizzle, type NodePgDatabase, type NodePgQueryResultHKT } from 'drizzle-orm/node-postgres';
import type { PgDatabase } from 'drizzle-orm/pg-core';
import pg from 'pg';

/** A pool's handle or a transaction's: queries take either. */
export type Db = PgDatabase<NodePgQueryResultHKT, Record<string, never>>;

/** Runs plain SQL on the connection of a transaction, for the queue that wants to join it. */
export type Execute = (text: string, values: unknown[]) => Promise<{ rows: unknown[] }>;

export interface Client {
  db: NodePgDatabase;
  pool: pg.Pool;
  /** One connection, one transaction: committed when `work` ends, undone when it throws. */
  transaction<T>(work: (db: Db, execute: Execute) => Promise<T>): Promise<T>;
  close(): Promise<void>;
}

/**
 * Fifty who ask for the same thing at once wait for each other's lock; on a busy machine that is many seconds, and each of them must get
 * an answer. Beyond this something hangs (own choices).
 */
const waitForConnectionMilliseconds = 20_000;
const statementMilliseconds = 60_000;

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
    connectionTimeoutMillis: waitForConnectionMilliseconds,
    statement_timeout: statementMilliseconds,
    application_name: 'rampwell',
    options: '-c timezone=UTC',
  });
  pool.on('error', onError);
  return {
    db: drizzle(pool),
    pool,
    async transaction(work) {
      const connection = await pool.connect();
      let broken: Error | undefined;
      // An error while the connection is out of the pool is the connection's own event; unheard, it would end the process.
      const note = (error: Error) => {
        broken = error;
      };
      connection.on('error', note);
      try {
        return await drizzle(connection).transaction((db) =>
          work(db, (text, values) => connection.query(text, values)),
        );
      } finally {
        connection.off('error', note);
        connection.release(broken);
      }
    },
    close: () => pool.end(),
  };
}
