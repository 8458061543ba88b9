// Stimulators of own sites, by label.

import { cutPage, decodeCursor } from '@/db/queries/cursor';
import { listDevices as listRecords } from '@/db/queries/device';
import { action, invalid } from '@/server/action';
import { viewDevice } from '@/server/features/device/view-device';
import { listDevices as contract } from '@/shared/contracts/device';
import { textPositionOf } from '@/shared/values/list-position';

export const listDevices = action(contract, async ({ actor, query }, tx) => {
  const after = query.cursor === undefined ? null : textPositionOf(decodeCursor(query.cursor));
  if (after === undefined) return invalid([{ path: 'cursor', code: 'cursor_unknown' }]);
  const rows = await listRecords(tx.db, actor.siteIds, {
    state: query.state,
    limit: query.limit + 1,
    after: after && { label: after.text, id: after.id },
  });
  const { page, nextCursor } = cutPage(rows, query.limit, ({ label, id }) => [label, id]);
  // Whose each stimulator is stands in the list: that is a look at people's records.
  for (const siteId of new Set(page.flatMap((device) => (device.assignedTo ? [device.siteId] : []))))
    tx.record({ siteId, kind: 'read', subject: { kind: 'device_list', id: siteId } });
  return { items: page.map((device) => viewDevice(device, actor.role)), nextCursor };
});
