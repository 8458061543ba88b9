// Registers a stimulator; it begins in stock.

import { findDevice, insertDevice, insertDeviceState } from '@/db/queries/device';
import { action, notFound, refuse } from '@/server/action';
import { viewDevice } from '@/server/features/device/view-device';
import { addDevice as contract } from '@/shared/contracts/device';

export const addDevice = action(contract, async ({ actor, body }, tx) => {
  const { siteId } = body;
  if (!actor.siteIds.includes(siteId)) return notFound();
  const now = await tx.now();
  const id = crypto.randomUUID();
  if (!(await insertDevice(tx.db, { id, ...body, createdAt: now }))) {
    return refuse('device.serial_taken', { siteId, fields: [{ path: 'serial', code: 'serial_taken' }] });
  }
  await insertDeviceState(tx.db, {
    ...{ id: crypto.randomUUID(), deviceId: id, state: 'stock', reason: null, by: actor.accountId, createdAt: now },
  });
  tx.record({ siteId, subject: { kind: 'device', id }, after: body });
  const device = await findDevice(tx.db, [siteId], id);
  return device ? viewDevice(device, actor.role) : notFound();
});
