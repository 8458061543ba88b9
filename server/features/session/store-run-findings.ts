// What the run itself shows, while it runs: a red flag, strong pain at a pad, more current than permitted. Each locks at once; a device that
// gave too much is quarantined.

import { lockDevice, insertDeviceState } from '@/db/queries/device';
import { listLockoutsFrom, listOpenLockouts, storeConsequences } from '@/db/queries/lockout';
import { listEventBodies, type SessionRecord } from '@/db/queries/session';
import type { Tx } from '@/server/action';
import { eventsOf } from '@/server/features/session/event-row';
import { tellPages } from '@/server/features/session/tell-pages';
import type { SessionEvent } from '@/shared/contracts/permit';
import { consequencesOf } from '@/shared/rules/consequences';
import { lockoutsAfterDiary } from '@/shared/rules/lockout';
import { findingsOfEffects } from '@/shared/rules/lockout-findings';
import { runFactsOf } from '@/shared/rules/session-run-facts';

export async function storeRunFindings(
  tx: Tx,
  session: SessionRecord,
  accepted: readonly SessionEvent[],
  now: string,
): Promise<void> {
  const { id, participantId, siteId, dose, permit } = session;
  const hasSamples = accepted.some(({ kind }) => kind === 'samples');
  const kept = hasSamples ? eventsOf(await listEventBodies(tx.db, id, { kinds: ['samples'] })) : [];
  const found = lockoutsAfterDiary({ during: runFactsOf(accepted, kept, dose.intensityMilliamp) });
  if (found.effects.length === 0) return;
  const known = [...(await listLockoutsFrom(tx.db, [id])), ...(await listOpenLockouts(tx.db, participantId, now))];
  const consequences = consequencesOf(
    findingsOfEffects(found, {}),
    { participantId, siteId, source: 'session', sourceId: id, sessionId: id, at: now },
    known,
    () => crypto.randomUUID(),
  );
  if (consequences.lockouts.length === 0) return;
  if (found.deviceQuarantined) {
    const device = await lockDevice(tx.db, [siteId], permit.deviceId);
    if (device?.state === 'out') {
      await insertDeviceState(tx.db, {
        id: crypto.randomUUID(),
        deviceId: device.id,
        state: 'quarantined',
        reason: 'over_current',
        by: 'system',
        createdAt: now,
      });
    }
  }
  await storeConsequences(tx.db, consequences, participantId, now);
  await tellPages(tx, consequences, participantId, siteId);
}
