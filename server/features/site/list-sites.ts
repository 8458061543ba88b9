// The sites that the asker belongs to, by name.

import { cutPage, decodeCursor } from '@/db/queries/cursor';
import { listSites as listRecords } from '@/db/queries/site';
import { action, invalid } from '@/server/action';
import { listSites as contract } from '@/shared/contracts/site';
import { textPositionOf } from '@/shared/values/list-position';

export const listSites = action(contract, async ({ actor, query }, tx) => {
  const after = query.cursor === undefined ? null : textPositionOf(decodeCursor(query.cursor));
  if (after === undefined) return invalid([{ path: 'cursor', code: 'cursor_unknown' }]);
  const rows = await listRecords(tx.db, actor.siteIds, {
    limit: query.limit + 1,
    after: after && { name: after.text, id: after.id },
  });
  const { page, nextCursor } = cutPage(rows, query.limit, ({ name, id }) => [name, id]);
  return { items: page, nextCursor };
});
