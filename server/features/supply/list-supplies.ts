// Supplies that a person was given, newest first.

import { cutPage, decodeCursor } from '@/db/queries/cursor';
import { findParticipantInReach } from '@/db/queries/reach';
import { listSupplies as listRecords } from '@/db/queries/supply';
import { action, invalid, notFound } from '@/server/action';
import { viewSupply } from '@/server/features/supply/view-supply';
import { listSupplies as contract } from '@/shared/contracts/device';
import { positionOf } from '@/shared/values/list-position';

export const listSupplies = action(contract, async ({ actor, params, query }, tx) => {
  const participant = await findParticipantInReach(tx.db, actor, params.participantId);
  if (!participant) return notFound();
  const after = query.cursor === undefined ? null : positionOf(decodeCursor(query.cursor));
  if (after === undefined) return invalid([{ path: 'cursor', code: 'cursor_unknown' }]);
  const rows = await listRecords(tx.db, participant.id, {
    limit: query.limit + 1,
    after: after && { createdAt: after.at, id: after.id },
  });
  const { page, nextCursor } = cutPage(rows, query.limit, ({ createdAt, id }) => [createdAt, id]);
  const { id, siteId, zone } = participant;
  tx.record({ participantId: id, siteId, kind: 'read', subject: { kind: 'supply', id } });
  return { items: page.map((supply) => viewSupply(supply, zone)), nextCursor };
});
