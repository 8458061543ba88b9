// Who needs somebody, most urgent first, a page at a time.

import { countWorklist, listItems } from '@/db/queries/worklist';
import { action, invalid } from '@/server/action';
import { cursorOf, positionAfter } from '@/server/features/worklist/item-cursor';
import { viewItems } from '@/server/features/worklist/view-items';
import { readWorklist as contract } from '@/shared/contracts/worklist';

export const readWorklist = action(contract, async ({ actor, query }, tx) => {
  const after = positionAfter(query.cursor);
  if (after === undefined) return invalid([{ path: 'cursor', code: 'cursor_unknown' }]);
  const asOf = await tx.now();

  const found = await listItems(tx.db, {
    siteIds: actor.siteIds,
    accountId: query.whose === 'mine_and_nobodys' ? actor.accountId : undefined,
    search: query.search,
    byName: actor.role !== 'monitor',
    limit: query.limit + 1,
    after,
  });
  const page = found.slice(0, query.limit);
  const last = page.at(-1);
  for (const siteId of new Set(page.map((item) => item.siteId))) {
    const participantIds = [
      ...new Set(page.filter((item) => item.siteId === siteId).map((item) => item.participantId)),
    ];
    tx.record({ siteId, kind: 'read', subject: { kind: 'worklist', id: siteId }, after: { participantIds } });
  }
  return {
    items: await viewItems(tx.db, actor, page, asOf),
    nextCursor: last && found.length > page.length ? cursorOf(last) : null,
    ...(await countWorklist(tx.db, actor.siteIds)),
    asOf,
  };
});
