// Participants of own sites, a page at a time: searched, sorted, by state.

import { decodeCursor } from '@/db/queries/cursor';
import { action, invalid } from '@/server/action';
import { findPage } from '@/server/features/participant/find-page';
import { seesNames, viewRows } from '@/server/features/participant/view-rows';
import { listParticipants as contract } from '@/shared/contracts/participant';
import { textPositionOf } from '@/shared/values/list-position';

export const listParticipants = action(contract, async ({ actor, query }, tx) => {
  const after = query.cursor === undefined ? null : textPositionOf(decodeCursor(query.cursor));
  if (after === undefined) return invalid([{ path: 'cursor', code: 'cursor_unknown' }]);
  const now = await tx.now();
  const byName = seesNames(actor.role);
  const { page, nextCursor } = await findPage(
    tx.db,
    {
      siteIds: actor.siteIds,
      search: query.search,
      byName,
      state: query.state,
      // The order of names would tell a pseudonymous reader something about them.
      sort: query.sort === 'name' && !byName ? 'code' : query.sort,
      limit: query.limit,
      after: after && { key: after.text, id: after.id },
    },
    now,
  );
  const items = await viewRows(tx.db, page, actor.role, now);
  for (const siteId of new Set(page.map(({ listed }) => listed.siteId))) {
    const shown = page.filter(({ listed }) => listed.siteId === siteId).map(({ listed }) => listed.code);
    tx.record({ siteId, kind: 'read', subject: { kind: 'participant_list', id: siteId }, after: { shown } });
  }
  return { items, nextCursor };
});
