// Protocols of own sites: the one in force of each, or every version, the newest signature first.

import { cutPage, decodeCursor } from '@/db/queries/cursor';
import { listProtocols as listRecords } from '@/db/queries/protocol';
import { action, invalid, notFound } from '@/server/action';
import { listProtocols as contract } from '@/shared/contracts/site';
import { positionOf } from '@/shared/values/list-position';

export const listProtocols = action(contract, async ({ actor, query }, tx) => {
  const { siteId } = query;
  if (siteId !== undefined && !actor.siteIds.includes(siteId)) return notFound();
  const after = query.cursor === undefined ? null : positionOf(decodeCursor(query.cursor));
  if (after === undefined) return invalid([{ path: 'cursor', code: 'cursor_unknown' }]);
  const rows = await listRecords(tx.db, {
    siteIds: siteId === undefined ? actor.siteIds : [siteId],
    all: query.all === 'true',
    limit: query.limit + 1,
    after: after && { signedAt: after.at, id: after.id },
  });
  const { page, nextCursor } = cutPage(rows, query.limit, ({ signedAt, id }) => [signedAt, id]);
  return { items: page, nextCursor };
});
