// Records that a session was watched, and how it was tolerated, or that somebody is watching now.

import { readProtocolInForce } from '@/db/queries/protocol';
import { lockParticipantInReach } from '@/db/queries/reach';
import { countWatchedSessions, insertWatchedSession } from '@/db/queries/training';
import { action, notFound, refuse } from '@/server/action';
import { recordWatchedSession as contract } from '@/shared/contracts/readiness';
import { watchingEnd } from '@/shared/rules/house-terms';

export const recordWatchedSession = action(contract, async ({ actor, params, body }, tx) => {
  const participant = await lockParticipantInReach(tx.db, actor, params.participantId);
  if (!participant) return notFound();
  const now = await tx.now();
  const whose = { participantId: participant.id, siteId: participant.siteId };
  if (participant.closedAt !== null) return refuse('participant.withdrawn', whose);
  const protocol = await readProtocolInForce(tx.db, participant.siteId);
  if (!protocol) return refuse('protocol.none', whose);
  const { where, when, tolerated, remark } = body;
  if (when === 'done' && tolerated === undefined) {
    const code = 'training.tolerability_missing';
    return refuse(code, { ...whose, fields: [{ path: 'tolerated', code }] });
  }

  const id = crypto.randomUUID();
  const until = when === 'now' ? watchingEnd(now) : null;
  await insertWatchedSession(tx.db, {
    ...{ id, participantId: participant.id, place: where, until, tolerated: tolerated ?? null, remark: remark ?? null },
    ...{ recordedBy: actor.accountId, createdAt: now },
  });
  tx.record({
    ...whose,
    subject: { kind: 'watched_session', id },
    after: { where, when, until, tolerated: tolerated ?? null, remark },
  });
  const watched = await countWatchedSessions(tx.db, participant.id);
  return { id, watched, required: protocol.settings.watchedSessionsRequired };
});
