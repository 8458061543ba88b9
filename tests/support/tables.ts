// What: a fingerprint of each table, to see whether anything was written. Must not: say which may change; tests do.
import { z } from 'zod';
import type { Clinic } from './clinic';

/** Written by the house about requests themselves, refused or not: the trail, who is signed in, counts of tries, beats. */
const ofRequests = /^(audit_|auth_|rate_limit$|heartbeat$)/;

/** Rows and contents of every table but those, by name; in one statement, since tests ask for it hundreds of times. */
export async function fingerprints(clinic: Clinic): Promise<Record<string, string>> {
  const tables = await clinic.rows(
    { name: z.string() },
    `select tablename::text as name from pg_tables where schemaname = 'public'`,
  );
  const parts = tables
    .filter(({ name }) => !ofRequests.test(name))
    .map(
      ({ name }) =>
        `select '${name}' as name, count(*)::int n, md5(string_agg(md5(t::text), '' order by t::text)) as hash from "${name}" t`,
    );
  const found = await clinic.rows(
    { name: z.string(), n: z.number(), hash: z.string().nullable() },
    parts.join(' union all '),
  );
  return Object.fromEntries(found.map(({ name, n, hash }) => [name, `${n} rows ${hash ?? ''}`]));
}
