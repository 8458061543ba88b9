// How to reach a site, for answers, refusals and mails. Reads only.

import { eq, inArray } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { participant } from '@/db/schema/participant';
import { site } from '@/db/schema/site';

export interface SiteContactRow {
  id: string;
  name: string;
  code: string;
  phone: string;
  emergencyNumber: string;
  zone: string;
}

const columns = {
  id: site.id,
  name: site.name,
  code: site.code,
  phone: site.phone,
  emergencyNumber: site.emergencyNumber,
  zone: site.zone,
};

export async function listSiteContacts(db: Db, siteIds: readonly string[]): Promise<SiteContactRow[]> {
  if (siteIds.length === 0) return [];
  return db
    .select(columns)
    .from(site)
    .where(inArray(site.id, [...siteIds]))
    .orderBy(site.name, site.id);
}

/** The site of a participant, with the zone and the language that the person lives by. */
export async function findContactOfParticipant(
  db: Db,
  participantId: string,
): Promise<{ site: SiteContactRow; code: string; zone: string; language: string } | null> {
  const [row] = await db
    .select({ site: columns, code: participant.code, zone: participant.zone, language: participant.language })
    .from(participant)
    .innerJoin(site, eq(site.id, participant.siteId))
    .where(eq(participant.id, participantId))
    .limit(1);
  return row ?? null;
}

/** What a page may name: the site and the participant's code. */
export async function findPageFacts(db: Db, participantId: string): Promise<{ siteName: string; code: string } | null> {
  const [row] = await db
    .select({ siteName: site.name, code: participant.code })
    .from(participant)
    .innerJoin(site, eq(site.id, participant.siteId))
    .where(eq(participant.id, participantId))
    .limit(1);
  return row ?? null;
}

/** The site of each participant; those that do not exist are left out. */
export async function listSitesOfParticipants(db: Db, participantIds: readonly string[]): Promise<Map<string, string>> {
  if (participantIds.length === 0) return new Map();
  const rows = await db
    .select({ id: participant.id, siteId: participant.siteId })
    .from(participant)
    .where(inArray(participant.id, [...participantIds]));
  return new Map(rows.map((row) => [row.id, row.siteId]));
}
