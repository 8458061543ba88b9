// The first event that tells of current begins the session: its permit is used. An end that is told is kept, though the record may not be
// whole yet. Nothing truly delivered is refused: a start on a void permit is kept, and flagged for staff.

import { closePermit } from '@/db/queries/permit';
import { endSession, startSession, type SessionRecord } from '@/db/queries/session';
import { openItem } from '@/db/queries/worklist';
import type { Tx } from '@/server/action';
import type { SessionEvent } from '@/shared/contracts/permit';
import { permitStateAt } from '@/shared/rules/permit-state';
import { endedAtOf, startedAtOf } from '@/shared/rules/session-record';
import { latestSecondsOf, tellsOfCurrent } from '@/shared/rules/session-summary';

export async function beginSession(
  tx: Tx,
  session: SessionRecord,
  accepted: readonly SessionEvent[],
  now: string,
): Promise<void> {
  const { id, permitId, permit, participantId, siteId } = session;
  const latest = accepted.map(latestSecondsOf).reduce((most, seconds) => Math.max(most, seconds), 0);
  const begins = session.startedAt === null && accepted.some(tellsOfCurrent);
  const startedAt = session.startedAt ?? (begins ? startedAtOf(permit, latest, now) : null);
  if (begins && startedAt !== null) {
    await startSession(tx.db, id, startedAt);
    await closePermit(tx.db, permitId, now, 'used');
    const { state, voidedBy } = permitStateAt(permit, now);
    if (state === 'void') {
      await openItem(tx.db, {
        id: crypto.randomUUID(),
        ...{ siteId, participantId, sessionId: id },
        level: 'flag',
        why: 'started_on_void_permit',
        facts: { voidedBy },
        matter: `started_on_void_permit:${id}`,
        openedAt: now,
      });
    }
  }
  const ended = accepted.find((event) => event.kind === 'ended');
  if (ended?.kind === 'ended' && startedAt !== null) {
    await endSession(tx.db, id, endedAtOf(startedAt, ended.atSeconds, now), ended.reason);
  }
}
