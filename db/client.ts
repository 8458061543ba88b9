// The one way to the database. Values from here go to server/transact.ts and server/auth/ alone; everybody else imports the type.

import { drizzle, type NodePgDatabase, type NodePgQueryResultHKT } from 'drizzle-orm/node-postgres';
import type { PgDatabase } from 'drizzle-orm/pg-core';
import pg from 'pg';

/** A pool's handle or a transaction's: queries take either. */
export type Db = PgDatabase<NodePgQueryResultHKT, Record<string, never>>;

/** Runs plain SQL on the connection of a transaction, for the queue that wants to join it. */
export type Execute = (text: string, values: unknown[]) => Promise<{ rows: unknown[] }>;

/** Whose rows a transaction may touch: everybody's, or those that the person signed in reaches. The database itself holds to it (D22). */
export type Scope =
  'house' | { accountId: string; role: string; siteIds: readonly string[]; participantId: string | null };

export interface Client {
  /** As the house: for sign-in, jobs and what the start of the process asks. */
  db: NodePgDatabase;
  pool: pg.Pool;
  /** One connection, one transaction within its scope: committed when `work` ends, undone when it throws. */
  transaction<T>(scope: Scope, work: (db: Db, execute: Execute) => Promise<T>): Promise<T>;
  close(): Promise<void>;
}

/**
 * Fifty who ask for the same thing at once wait for each other's lock; on a busy machine that is many seconds, and each of them must get
 * an answer. Beyond this something hangs (own choices).
 */
const waitForConnectionMilliseconds = 20_000;
const statementMilliseconds = 60_000;
/** Part of the connections that the house's own work has: who is asking, jobs, mails; the rest is for what people ask (own choice). */
const houseShare = 0.4;

/** The roles of migration 0004; neither owns a table, and row security binds both. */
const houseRole = 'rampwell_house';
const appRole = 'rampwell_app';

/**
 * Opens the pools. A connection that breaks is replaced at the next use, so a restart of PostgreSQL needs no restart of the server.
 * @param url postgres://…, of a user who may take both roles
 * @param maxConnections most connections of this process
 * @param onError told of errors on idle connections, which would otherwise end the process
 */
export function connect(url: string, maxConnections: number, onError: (error: Error) => void): Client {
  const poolAs = (role: string, max: number) => {
    const pool = new pg.Pool({
      connectionString: url,
      max,
      connectionTimeoutMillis: waitForConnectionMilliseconds,
      statement_timeout: statementMilliseconds,
      application_name: 'rampwell',
      options: `-c timezone=UTC -c jit=off -c role=${role}`,
    });
    pool.on('error', onError);
    return pool;
  };
  const ofHouse = Math.max(1, Math.round(maxConnections * houseShare));
  const house = poolAs(houseRole, ofHouse);
  const app = poolAs(appRole, Math.max(1, maxConnections - ofHouse));
  return {
    db: drizzle(house),
    pool: house,
    async transaction(scope, work) {
      const connection = await (scope === 'house' ? house : app).connect();
      let broken: Error | undefined;
      // An error while the connection is out of the pool is the connection's own event; unheard, it would end the process.
      const note = (error: Error) => {
        broken = error;
      };
      connection.on('error', note);
      try {
        await connection.query(beginWithin(scope));
        try {
          const result = await work(drizzle(connection), (text, values) => connection.query(text, values));
          await connection.query('commit');
          return result;
        } catch (error) {
          await connection.query('rollback').catch(note);
          throw error;
        }
      } finally {
        connection.off('error', note);
        connection.release(broken);
      }
    },
    close: async () => {
      await Promise.all([house.end(), app.end()]);
    },
  };
}

/** Who keeps people's records, and therefore reaches those of the own sites. */
const recordKeepers: readonly string[] = ['coordinator', 'clinician', 'monitor'];

/** Begins and sets the scope in one go: a second round trip would be felt by every request. `true`: gone with the transaction. */
function beginWithin(scope: Scope): string {
  if (scope === 'house') return 'begin';
  const { accountId, role, siteIds, participantId } = scope;
  const set = (name: string, value: string) => `set_config('rampwell.${name}', ${value}, true)`;
  const said = (ids: readonly string[]) => pg.escapeLiteral(ids.join(','));
  const own = participantId === null ? [] : [participantId];
  const keys = said(recordKeepers.includes(role) ? siteIds : own);
  const begun = `begin; select ${set('account', said([accountId]))}, ${set('sites', said(siteIds))}, ${set('keys', keys)}`;
  // Whom a caregiver stands beside is asked of the database, once a transaction.
  return role === 'caregiver' ? `${begun}; select ${set('keys', `array_to_string(scope_charges(), ',')`)}` : begun;
}
