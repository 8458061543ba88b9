// What was felt, measured and delivered in each session, for charts on one time axis.

import { listMarks } from '@/db/queries/course';
import { listTrends } from '@/db/queries/participant';
import { findParticipantInReach } from '@/db/queries/reach';
import { action, notFound } from '@/server/action';
import { readTrends as contract } from '@/shared/contracts/participant';
import { skinRank } from '@/shared/rules/skin-rank';
import { coulombOf } from '@/shared/values/units';

export const readTrends = action(contract, async ({ actor, params }, tx) => {
  const participant = await findParticipantInReach(tx.db, actor, params.participantId);
  if (!participant) return notFound();
  const rows = await listTrends(tx.db, participant.id);
  const strips = await listMarks(tx.db, [...new Set(rows.map(({ courseId }) => courseId))], await tx.now());
  const numbers = new Map([...strips.values()].flat().map((mark) => [mark.plannedSessionId, mark.number]));
  const { id, siteId } = participant;
  tx.record({ participantId: id, siteId, kind: 'read', subject: { kind: 'trends', id } });
  return {
    points: rows.map((row, index) => ({
      sessionId: row.sessionId,
      number: numbers.get(row.plannedSessionId) ?? index + 1,
      at: row.at,
      headache: row.headache,
      skin: skinRank(row.skin),
      worstEffect: row.worstEffect,
      deliveredCoulomb: row.deliveredUc === null ? null : coulombOf(row.deliveredUc),
      plannedCoulomb: coulombOf(row.plannedUc),
      worstContactKiloohm: row.worstContactKiloohm,
    })),
  };
});
