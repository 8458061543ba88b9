// Everything that happened to one person, newest first, a page at a time.

import { cutPage, decodeCursor } from '@/db/queries/cursor';
import { listTimeline } from '@/db/queries/participant-timeline';
import { findParticipantInReach } from '@/db/queries/reach';
import { action, invalid, notFound } from '@/server/action';
import { readTimeline as contract } from '@/shared/contracts/participant';
import { isInstant } from '@/shared/values/list-position';

export const readTimeline = action(contract, async ({ actor, params, query }, tx) => {
  const participant = await findParticipantInReach(tx.db, actor, params.participantId);
  if (!participant) return notFound();
  const after = query.cursor === undefined ? null : positionOf(decodeCursor(query.cursor));
  if (after === undefined) return invalid([{ path: 'cursor', code: 'cursor_unknown' }]);
  const rows = await listTimeline(tx.db, participant.id, { limit: query.limit + 1, after });
  const { page, nextCursor } = cutPage(rows, query.limit, ({ at, id }) => [at, id]);
  const { id, siteId } = participant;
  tx.record({ participantId: id, siteId, kind: 'read', subject: { kind: 'timeline', id } });
  return { items: page, nextCursor };
});

/** Entries are named by kind and row, so any text will do as the second key. */
function positionOf(values: readonly unknown[] | null): { at: string; id: string } | undefined {
  const [at, id] = values ?? [];
  return isInstant(at) && typeof id === 'string' ? { at, id } : undefined;
}
