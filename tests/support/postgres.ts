// What: makes and drops databases on the test cluster, copied from the migrated template.
// Must not: start the cluster (tests/support/jest/test-cluster.mjs does, before any test) or reach any other one.
import { Client } from 'pg';

const template = 'rampwell_template';

function port(): string {
  const given = process.env.RAMPWELL_TEST_PORT;
  if (!given)
    throw new Error('No test cluster is running: start these tests by `npm test -- api` or `npm test -- browser`.');
  return given;
}

/** As the product connects: owner of its database, no superuser. */
export function databaseUrl(name: string): string {
  return `postgres://rampwell@127.0.0.1:${port()}/${name}`;
}

/** As the superuser of the test cluster, for what the product itself may not do. */
export async function asSuperuser<T>(work: (client: Client) => Promise<T>, database = 'postgres'): Promise<T> {
  const client = new Client({ connectionString: `postgres://postgres@127.0.0.1:${port()}/${database}` });
  await client.connect();
  try {
    return await work(client);
  } finally {
    await client.end();
  }
}

/** In the database that a client is connected to, as the superuser: what neither the server nor the owner may do. */
export function pastTheGuards<T>(
  { pool }: { pool: { options: { connectionString?: string | undefined } } },
  work: (client: Client) => Promise<T>,
): Promise<T> {
  return asSuperuser(work, pool.options.connectionString?.split('/').at(-1));
}

let made = 0;

/** A new database from the template (or from another one that nobody is connected to); answers with its name. */
export async function createDatabase(from: string = template): Promise<string> {
  made += 1;
  const name = `rampwell_t${process.pid}_${made}`;
  await asSuperuser(async (client) => {
    await client.query(`drop database if exists ${name} with (force)`);
    await client.query(`create database ${name} template ${from} owner rampwell`);
  });
  return name;
}

export async function dropDatabase(name: string): Promise<void> {
  await asSuperuser((client) => client.query(`drop database if exists ${name} with (force)`));
}
