// All sessions of own sites as CSV, by pseudonym, read and written slice by slice.

import { listSessionRows, type SessionRow } from '@/db/queries/report';
import { action, notFound } from '@/server/action';
import { csvLine } from '@/server/features/report/csv';
import { reachSites } from '@/server/features/report/reach-sites';
import { exportSessions as contract } from '@/shared/contracts/report';
import { exportSliceRows } from '@/shared/rules/house-limits';

/** Columns in their order: the names are the file's, and other programs read them. */
const columns = [
  ...(['site', 'participant', 'session', 'number', 'window_from', 'started_at', 'ended_at', 'end_reason'] as const),
  ...(['prescription_version', 'waveform', 'intensity_mA', 'planned_min', 'planned_C'] as const),
  ...(['delivered_min', 'delivered_C', 'delivered_upper_C', 'fraction', 'completeness'] as const),
  ...(['headache_after', 'headache_next_day', 'worst_effect', 'effects', 'skin', 'diary_at'] as const),
] satisfies readonly (keyof SessionRow)[];

export const exportSessions = action(contract, async ({ actor, query }, tx) => {
  const siteIds = reachSites(actor.siteIds, query.siteId);
  if (siteIds === null) return notFound();
  const parts: Uint8Array[] = [Buffer.from(csvLine(columns), 'utf8')];
  let rows = 0;
  let after: SessionRow | null = null;
  for (;;) {
    const slice: SessionRow[] = await listSessionRows(tx.db, siteIds, { limit: exportSliceRows, after });
    rows += slice.length;
    const lines = slice.map((row) => csvLine(columns.map((column) => row[column])));
    parts.push(Buffer.from(lines.join(''), 'utf8'));
    after = slice.at(-1) ?? null;
    if (slice.length < exportSliceRows) break;
  }
  for (const siteId of siteIds) {
    tx.record({ siteId, kind: 'read', subject: { kind: 'export', id: siteId }, after: { rows } });
  }
  return { type: 'text/csv' as const, bytes: new Uint8Array(Buffer.concat(parts)) };
});
