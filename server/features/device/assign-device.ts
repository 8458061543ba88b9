// Hands a stimulator from the stock to one person of the same site.

import { findDevice, insertAssignment, insertDeviceState, loadDeviceFor, lockDevice } from '@/db/queries/device';
import { lockParticipantInReach } from '@/db/queries/reach';
import { action, notFound, refuse } from '@/server/action';
import { viewDevice } from '@/server/features/device/view-device';
import { assignDevice as contract } from '@/shared/contracts/device';
import { mayAssign } from '@/shared/rules/device-state';

export const assignDevice = action(contract, async ({ actor, params, body }, tx) => {
  const participant = await lockParticipantInReach(tx.db, actor, body.participantId);
  const device = participant && (await lockDevice(tx.db, actor.siteIds, params.deviceId));
  if (!participant || !device) return notFound();
  const now = await tx.now();
  const whose = { participantId: participant.id, siteId: participant.siteId };
  if (participant.closedAt !== null) return refuse('participant.withdrawn', whose);
  if (device.siteId !== participant.siteId) return refuse('device.other_site', whose);
  if (!mayAssign(device.state) || device.assignedTo) return refuse('device.not_in_stock', whose);
  if (await loadDeviceFor(tx.db, participant.id)) return refuse('device.person_has_one', whose);

  const by = { by: actor.accountId, createdAt: now };
  const assignment = { id: crypto.randomUUID(), deviceId: device.id, participantId: participant.id, ...by };
  if (!(await insertAssignment(tx.db, assignment))) return refuse('device.not_in_stock', whose);
  await insertDeviceState(tx.db, {
    ...{ id: crypto.randomUUID(), deviceId: device.id, state: 'out', reason: body.reason ?? null, ...by },
  });
  tx.record({
    ...whose,
    subject: { kind: 'device', id: device.id },
    before: { state: device.state },
    after: { state: 'out', label: device.label, serial: device.serial },
    why: body.reason,
  });
  const handed = await findDevice(tx.db, actor.siteIds, device.id);
  return handed ? viewDevice(handed, actor.role) : notFound();
});
