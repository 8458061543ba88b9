// The thread between a person and the site, newest first.

import { cutPage, decodeCursor } from '@/db/queries/cursor';
import { listMessages as listRecords } from '@/db/queries/message';
import { action, invalid, isRefusal, notFound } from '@/server/action';
import { findThread } from '@/server/features/message/find-thread';
import { viewMessage } from '@/server/features/message/view-message';
import { listMessages as contract } from '@/shared/contracts/message';
import { positionOf } from '@/shared/values/list-position';

export const listMessages = action(contract, async ({ actor, query }, tx) => {
  const participant = await findThread(tx.db, actor, query.participantId);
  if (isRefusal(participant)) return participant;
  if (!participant) return notFound();
  const after = query.cursor === undefined ? null : positionOf(decodeCursor(query.cursor));
  if (after === undefined) return invalid([{ path: 'cursor', code: 'cursor_unknown' }]);
  const rows = await listRecords(tx.db, participant.id, { limit: query.limit + 1, after });
  const { page, nextCursor } = cutPage(rows, query.limit, ({ at, id }) => [at, id]);
  const { id, siteId } = participant;
  tx.record({ participantId: id, siteId, kind: 'read', subject: { kind: 'message', id } });
  return { items: page.map((message) => viewMessage(message, actor.accountId)), nextCursor };
});
