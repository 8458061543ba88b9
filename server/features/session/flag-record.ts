// Two contents for one event, or two events for one place: the first is kept, the second was refused by name, and staff are told.

import type { SessionRecord } from '@/db/queries/session';
import { openItem } from '@/db/queries/worklist';
import type { Tx } from '@/server/action';
import type { EventVerdict } from '@/shared/rules/session-record';

export async function flagRecord(
  tx: Tx,
  session: SessionRecord,
  verdicts: readonly EventVerdict[],
  now: string,
): Promise<void> {
  const conflicts = verdicts.filter(
    (each) => each.verdict === 'refused' && (each.code === 'other_content' || each.code === 'sequence_taken'),
  );
  if (conflicts.length === 0) return;
  await openItem(tx.db, {
    id: crypto.randomUUID(),
    siteId: session.siteId,
    participantId: session.participantId,
    sessionId: session.id,
    level: 'flag',
    why: 'record_conflict',
    facts: { events: conflicts.length },
    matter: `record_conflict:${session.id}`,
    openedAt: now,
  });
}
