// Versions of a site's protocol. Append-only: the highest version of a site is in force.

import { and, desc, eq, inArray, lt, or, sql, type SQL } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { protocol, site } from '@/db/schema/site';
import { ProtocolSettings } from '@/shared/values/protocol-settings';

export interface ProtocolInForce {
  id: string;
  siteId: string;
  version: number;
  settings: ProtocolSettings;
  /** The consent document before the one in force; 0 = there was none. Enough until `settings.consentRequiredFrom`. */
  previousConsentVersion: number;
}

const consentVersionOf = (row: string) => sql.raw(`(${row}.settings ->> 'consentVersion')::int`);

const previousConsentVersion = sql<number>`coalesce((
  select ${consentVersionOf('earlier')} from protocol earlier
  where earlier.site_id = "protocol"."site_id" and earlier.version < "protocol"."version"
    and ${consentVersionOf('earlier')} < ${consentVersionOf('"protocol"')}
  order by earlier.version desc limit 1), 0)`;

/** The protocol in force; null while the site has signed none, and then nothing that depends on it may go on. */
export async function readProtocolInForce(db: Db, siteId: string): Promise<ProtocolInForce | null> {
  return (await listProtocolsInForce(db, [siteId])).get(siteId) ?? null;
}

/** The protocols in force of several sites, by site. */
export async function listProtocolsInForce(db: Db, siteIds: readonly string[]): Promise<Map<string, ProtocolInForce>> {
  if (siteIds.length === 0) return new Map();
  const rows = await db
    .selectDistinctOn([protocol.siteId], {
      id: protocol.id,
      siteId: protocol.siteId,
      version: protocol.version,
      settings: protocol.settings,
      previousConsentVersion,
    })
    .from(protocol)
    .where(inArray(protocol.siteId, [...siteIds]))
    .orderBy(protocol.siteId, desc(protocol.version));
  return new Map(rows.map((row) => [row.siteId, { ...row, settings: ProtocolSettings.parse(row.settings) }]));
}

export interface ProtocolRow {
  id: string;
  siteId: string;
  siteName: string;
  version: number;
  settings: ProtocolSettings;
  reason: string;
  signedBy: string;
  signedAt: string;
  current: boolean;
}

const latestVersion = sql`(select max(newest.version) from protocol newest where newest.site_id = ${protocol.siteId})`;

const columns = {
  id: protocol.id,
  siteId: protocol.siteId,
  siteName: site.name,
  version: protocol.version,
  settings: protocol.settings,
  reason: protocol.reason,
  signedBy: protocol.signedByName,
  signedAt: protocol.signedAt,
  current: sql<boolean>`${protocol.version} = ${latestVersion}`,
};

/** Versions of these sites, newest signature first; with `all` false the ones in force alone. */
export async function listProtocols(
  db: Db,
  want: { siteIds: readonly string[]; all: boolean; limit: number; after: { signedAt: string; id: string } | null },
): Promise<ProtocolRow[]> {
  if (want.siteIds.length === 0) return [];
  const conditions: (SQL | undefined)[] = [inArray(protocol.siteId, [...want.siteIds])];
  if (!want.all) conditions.push(sql`${protocol.version} = ${latestVersion}`);
  if (want.after) {
    const { signedAt, id } = want.after;
    conditions.push(or(lt(protocol.signedAt, signedAt), and(eq(protocol.signedAt, signedAt), lt(protocol.id, id))));
  }
  const rows = await db
    .select(columns)
    .from(protocol)
    .innerJoin(site, eq(site.id, protocol.siteId))
    .where(and(...conditions))
    .orderBy(desc(protocol.signedAt), desc(protocol.id))
    .limit(want.limit);
  return rows.map((row) => ({ ...row, settings: ProtocolSettings.parse(row.settings) }));
}

/** The next version; null when somebody else signed one at the same time. */
export async function insertProtocol(
  db: Db,
  row: {
    id: string;
    siteId: string;
    version: number;
    settings: ProtocolSettings;
    reason: string;
    signedBy: string;
    signedByName: string;
    signedAt: string;
    contentHash: string;
  },
): Promise<{ id: string } | null> {
  const [made] = await db.insert(protocol).values(row).onConflictDoNothing().returning({ id: protocol.id });
  return made ?? null;
}

/** Of two who sign a site's protocol at once the second waits, and then sees the first one's version; released at commit. */
export async function lockProtocol(db: Db, siteId: string): Promise<void> {
  await db.execute(sql`select pg_advisory_xact_lock(hashtext('rampwell.protocol'), hashtext(${siteId}))`);
}
