// All versions of a participant's prescriptions, newest first, a page at a time.

import { decodeCursor, encodeCursor } from '@/db/queries/cursor';
import { listPrescriptions as listRecords } from '@/db/queries/prescription';
import { findParticipantInReach } from '@/db/queries/reach';
import { action, invalid, notFound } from '@/server/action';
import { viewPrescriptions } from '@/server/features/prescription/view-prescription';
import { listPrescriptions as contract } from '@/shared/contracts/prescription';
import { positionOf } from '@/shared/values/list-position';

export const listPrescriptions = action(contract, async ({ actor, params, query }, tx) => {
  const participant = await findParticipantInReach(tx.db, actor, params.participantId);
  if (!participant) return notFound();
  const after = query.cursor === undefined ? null : positionOf(decodeCursor(query.cursor));
  if (after === undefined) return invalid([{ path: 'cursor', code: 'cursor_unknown' }]);
  const now = await tx.now();

  const found = await listRecords(tx.db, {
    participantId: participant.id,
    signedOnly: actor.role === 'participant',
    limit: query.limit + 1,
    after: after && { createdAt: after.at, id: after.id },
  });
  const page = found.slice(0, query.limit);
  const last = page.at(-1);
  tx.record({
    participantId: participant.id,
    siteId: participant.siteId,
    kind: 'read',
    subject: { kind: 'prescription', id: participant.id },
  });
  return {
    items: await viewPrescriptions(tx.db, participant, page, actor.role, now),
    nextCursor: last && found.length > page.length ? encodeCursor([last.createdAt, last.id]) : null,
  };
});
