// Reviews of a participant, newest first, a page at a time. A pseudonymous reader gets no person's own words.

import { decodeCursor, encodeCursor } from '@/db/queries/cursor';
import { findParticipantInReach } from '@/db/queries/reach';
import { listReviews as listRecords } from '@/db/queries/review';
import { action, invalid, notFound } from '@/server/action';
import { listReviews as contract } from '@/shared/contracts/worklist';
import { positionOf } from '@/shared/values/list-position';

export const listReviews = action(contract, async ({ actor, params, query }, tx) => {
  const participant = await findParticipantInReach(tx.db, actor, params.participantId);
  if (!participant) return notFound();
  const after = query.cursor === undefined ? null : positionOf(decodeCursor(query.cursor));
  if (after === undefined) return invalid([{ path: 'cursor', code: 'cursor_unknown' }]);

  const found = await listRecords(tx.db, { participantId: participant.id, limit: query.limit + 1, after });
  const page = found.slice(0, query.limit);
  const last = page.at(-1);
  tx.record({
    participantId: participant.id,
    siteId: participant.siteId,
    kind: 'read',
    subject: { kind: 'review', id: participant.id },
  });
  const isPseudonymous = actor.role === 'monitor';
  return {
    items: page.map((review) => (isPseudonymous ? { ...review, finding: '', reason: '' } : review)),
    nextCursor: last && found.length > page.length ? encodeCursor([last.at, last.id]) : null,
  };
});
