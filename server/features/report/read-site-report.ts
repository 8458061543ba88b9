// Adherence and effects over a site, with the rows behind each number. The database counts; the rule makes the interval.

import { cutPage, decodeCursor } from '@/db/queries/cursor';
import { listEffectCounts, listReportRows, readReportTotals } from '@/db/queries/report';
import { action, invalid, notFound } from '@/server/action';
import { reachSites } from '@/server/features/report/reach-sites';
import { readSiteReport as contract } from '@/shared/contracts/report';
import { countedOf } from '@/shared/rules/counted';
import { textPositionOf } from '@/shared/values/list-position';

export const readSiteReport = action(contract, async ({ actor, query }, tx) => {
  const siteIds = reachSites(actor.siteIds, query.siteId);
  if (siteIds === null) return notFound();
  const after = query.cursor === undefined ? null : textPositionOf(decodeCursor(query.cursor));
  if (after === undefined) return invalid([{ path: 'cursor', code: 'cursor_unknown' }]);
  const now = await tx.now();
  const rows = await listReportRows(tx.db, siteIds, now, {
    limit: query.limit + 1,
    after: after && { code: after.text, id: after.id },
  });
  const { page, nextCursor } = cutPage(rows, query.limit, ({ code, participantId }) => [code, participantId]);
  const { participants, openLockouts, complete, missed, ...rest } = await readReportTotals(tx.db, siteIds, now);
  for (const siteId of siteIds) {
    tx.record({
      siteId,
      kind: 'read',
      subject: { kind: 'report', id: siteId },
      after: { shown: page.map(({ code }) => code) },
    });
  }
  return {
    items: page.map((row) => ({ ...row, ...countedOf(row) })),
    nextCursor,
    totals: {
      ...{ participants, openLockouts, complete, missed, ...countedOf({ complete, missed, ...rest }) },
      effects: await listEffectCounts(tx.db, siteIds),
    },
  };
});
