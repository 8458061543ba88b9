// Takes a stimulator back, quarantines, recalls, loses or retires it. A live permit on it is void at once.

import { findActiveCourse, lockCourse } from '@/db/queries/course-state';
import {
  closeAssignment,
  findDevice,
  findPersonWithPermitOn,
  insertDeviceState,
  lockDevice,
} from '@/db/queries/device';
import { voidLivePermit } from '@/db/queries/permit';
import { closeMatter } from '@/db/queries/worklist';
import { action, notFound, refuse, type Tx } from '@/server/action';
import { viewDevice } from '@/server/features/device/view-device';
import { changeDeviceState as contract } from '@/shared/contracts/device';
import { deviceStateReachable, endsAssignment, voidsPermit } from '@/shared/rules/device-state';

export const changeDeviceState = action(contract, async ({ actor, params, body }, tx) => {
  const seen = await findDevice(tx.db, actor.siteIds, params.deviceId);
  // Whoever asks for a permit holds the course: its lock comes first, so that no permit is issued on what was seen before.
  const course = seen?.assignedTo && (await findActiveCourse(tx.db, seen.assignedTo.participantId));
  if (course) await lockCourse(tx.db, course.id);
  const device = await lockDevice(tx.db, actor.siteIds, params.deviceId);
  if (!seen || !device) return notFound();
  const now = await tx.now();
  const { id, siteId, assignedTo } = device;
  if (assignedTo?.participantId !== seen.assignedTo?.participantId) return refuse('version.stale', { siteId });
  if (!deviceStateReachable(device.state, body.state)) {
    const facts = { from: device.state, to: body.state };
    return refuse('device.state_not_reachable', { siteId, participantId: assignedTo?.participantId, facts });
  }

  await insertDeviceState(tx.db, {
    ...{ id: crypto.randomUUID(), deviceId: id, state: body.state, reason: body.reason },
    ...{ by: actor.accountId, createdAt: now },
  });
  const voidedPermitId = voidsPermit(body.state) ? await voidPermitOn(tx, id, now) : null;
  if (assignedTo && endsAssignment(body.state)) {
    await closeAssignment(tx.db, id, now, body.state === 'stock' ? 'returned' : body.state);
    await closeMatter(tx.db, assignedTo.participantId, `device_return:${id}`, now, body.state);
  }
  tx.record({
    ...{ siteId, participantId: assignedTo?.participantId, subject: { kind: 'device', id } },
    before: { state: device.state, assignedTo: assignedTo?.code ?? null },
    after: { state: body.state, voidedPermitId },
    why: body.reason,
  });
  const changed = await findDevice(tx.db, actor.siteIds, id);
  return changed ? viewDevice(changed, actor.role) : notFound();
});

async function voidPermitOn(tx: Tx, deviceId: string, now: string): Promise<string | null> {
  const participantId = await findPersonWithPermitOn(tx.db, deviceId);
  const voided = participantId === null ? null : await voidLivePermit(tx.db, participantId, now, 'device');
  return voided?.id ?? null;
}
