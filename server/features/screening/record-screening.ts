// Records the screening form; the outcome is the rule's. Going on over a relative item is a clinician's decision.

import { readProtocolInForce } from '@/db/queries/protocol';
import { lockParticipantInReach } from '@/db/queries/reach';
import { insertScreening } from '@/db/queries/screening';
import { action, notFound, refuse } from '@/server/action';
import { recordScreening as contract } from '@/shared/contracts/readiness';
import { validUntil as validUntilOf } from '@/shared/rules/house-terms';
import { screeningRecord } from '@/shared/rules/screening-record';

export const recordScreening = action(contract, async ({ actor, params, body }, tx) => {
  const participant = await lockParticipantInReach(tx.db, actor, params.participantId);
  if (!participant) return notFound();
  const now = await tx.now();
  const whose = { participantId: participant.id, siteId: participant.siteId };
  if (participant.closedAt !== null) return refuse('participant.withdrawn', whose);
  const protocol = await readProtocolInForce(tx.db, participant.siteId);
  if (!protocol) return refuse('protocol.none', whose);
  const judged = screeningRecord(body.answers, actor.role, protocol.settings);
  if (judged.refusal) {
    const { code, items } = judged.refusal;
    return refuse(code, { ...whose, fields: items.map((item) => ({ path: `answers.${item}`, code })) });
  }

  const { outcome } = judged;
  const id = crypto.randomUUID();
  const validUntil = validUntilOf(now, protocol.settings.screeningValidDays);
  await insertScreening(tx.db, {
    ...{ id, participantId: participant.id, answers: body.answers, seizureHistory: body.seizureHistory },
    ...{ outcome, validUntil, recordedBy: actor.accountId, createdAt: now },
  });
  tx.record({
    ...whose,
    subject: { kind: 'screening', id },
    after: { outcome, validUntil, seizureHistory: body.seizureHistory, answers: body.answers },
  });
  return { id, outcome, validUntil };
});
