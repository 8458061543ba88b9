// The asker's own caregivers, oldest first.

import { listCaregivers as listRecords } from '@/db/queries/caregiver';
import { cutPage, decodeCursor } from '@/db/queries/cursor';
import { action, invalid, notFound } from '@/server/action';
import { viewCaregiver } from '@/server/features/caregiver/view-caregiver';
import { listCaregivers as contract } from '@/shared/contracts/caregiver';
import { positionOf } from '@/shared/values/list-position';

export const listCaregivers = action(contract, async ({ actor, query }, tx) => {
  const { participantId } = actor;
  if (participantId === null) return notFound();
  const after = query.cursor === undefined ? null : positionOf(decodeCursor(query.cursor));
  if (after === undefined) return invalid([{ path: 'cursor', code: 'cursor_unknown' }]);
  const rows = await listRecords(tx.db, participantId, {
    limit: query.limit + 1,
    after: after && { createdAt: after.at, id: after.id },
  });
  const { page, nextCursor } = cutPage(rows, query.limit, ({ createdAt, id }) => [createdAt, id]);
  tx.record({ participantId, kind: 'read', subject: { kind: 'caregiver', id: participantId } });
  return { items: page.map(viewCaregiver), nextCursor };
});
