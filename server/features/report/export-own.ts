// Everything that is kept about the asker, as one JSON file.

import { readOwnRecord } from '@/db/queries/own-record';
import { action, notFound } from '@/server/action';
import { exportOwn as contract } from '@/shared/contracts/report';

export const exportOwn = action(contract, async ({ actor }, tx) => {
  const { participantId } = actor;
  if (participantId === null) return notFound();
  const exportedAt = await tx.now();
  const record = await readOwnRecord(tx.db, participantId);
  tx.record({ participantId, kind: 'read', subject: { kind: 'export', id: participantId } });
  const text = JSON.stringify({ exportedAt, participantId, record }, null, 1);
  return { type: 'application/json' as const, bytes: new Uint8Array(Buffer.from(text, 'utf8')) };
});
