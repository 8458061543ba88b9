// Qualification runs, which are entries of the sites' audit trails: added with the trail, read here.

import { and, desc, eq, inArray, sql } from 'drizzle-orm';
import { z } from 'zod';
import type { Db } from '@/db/client';
import { auditEntry } from '@/db/schema/house';

const stored = z.object({
  fileName: z.string(),
  fileSha256: z.string(),
  resultSha256: z.string(),
  passed: z.number(),
  failed: z.number(),
  version: z.string(),
  kid: z.string(),
});
export type QualificationFacts = z.infer<typeof stored>;

export interface QualificationRecord extends QualificationFacts {
  siteId: string;
  at: string;
  byName: string;
}

/** The newest of each of these sites. */
export async function listLastQualifications(
  db: Db,
  siteIds: readonly string[],
  action: string,
): Promise<QualificationRecord[]> {
  if (siteIds.length === 0) return [];
  const rows = await db
    .selectDistinctOn([auditEntry.siteId], {
      siteId: auditEntry.siteId,
      at: auditEntry.at,
      byName: auditEntry.actorName,
      after: sql<unknown>`${auditEntry.after}`,
    })
    .from(auditEntry)
    .where(and(inArray(auditEntry.siteId, [...siteIds]), eq(auditEntry.action, action), eq(auditEntry.kind, 'write')))
    .orderBy(auditEntry.siteId, desc(auditEntry.at), desc(auditEntry.sequence));
  return rows.flatMap(({ siteId, at, byName, after }) =>
    siteId === null ? [] : [{ siteId, at, byName, ...stored.parse(after) }],
  );
}
