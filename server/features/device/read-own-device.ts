// The stimulator that the asker holds, so that the phone can tell it from any other.

import { loadDeviceFor } from '@/db/queries/device';
import { action } from '@/server/action';
import { readOwnDevice as contract } from '@/shared/contracts/permit';

export const readOwnDevice = action(contract, async ({ actor }, tx) => {
  const { participantId } = actor;
  const device = participantId === null ? null : await loadDeviceFor(tx.db, participantId);
  if (!device || participantId === null) return null;
  const { id, label, model, serial, lastCounter, state } = device;
  tx.record({ participantId, kind: 'read', subject: { kind: 'device', id } });
  // Whatever is not out must not run: for the phone that is all one.
  return { id, label, model, serial, lastCounter, recalled: state !== 'out' };
});
