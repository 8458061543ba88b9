// Staff of own sites, invited ones too, by name.

import { cutPage, decodeCursor } from '@/db/queries/cursor';
import { listStaff as listRecords } from '@/db/queries/site';
import { action, invalid, notFound } from '@/server/action';
import { viewStaff } from '@/server/features/site/view-staff';
import { listStaff as contract } from '@/shared/contracts/site';

export const listStaff = action(contract, async ({ actor, query }, tx) => {
  const { siteId } = query;
  if (siteId !== undefined && !actor.siteIds.includes(siteId)) return notFound();
  const after = query.cursor === undefined ? null : positionOf(decodeCursor(query.cursor));
  if (after === undefined) return invalid([{ path: 'cursor', code: 'cursor_unknown' }]);
  const rows = await listRecords(tx.db, siteId === undefined ? actor.siteIds : [siteId], await tx.now(), {
    limit: query.limit + 1,
    after,
  });
  const { page, nextCursor } = cutPage(rows, query.limit, ({ name, key }) => [name, key]);
  return { items: page.map(viewStaff), nextCursor };
});

/** Accounts' ids are the sign-in library's own texts, so any text will do as the second key. */
function positionOf(values: readonly unknown[] | null): { name: string; key: string } | undefined {
  const [name, key] = values ?? [];
  return typeof name === 'string' && typeof key === 'string' ? { name, key } : undefined;
}
