// Records which skills were seen and what the person and the home have. All of it together is the sign-off.

import { readProtocolInForce } from '@/db/queries/protocol';
import { lockParticipantInReach } from '@/db/queries/reach';
import { insertTraining } from '@/db/queries/training';
import { action, notFound, refuse } from '@/server/action';
import { recordTraining as contract } from '@/shared/contracts/readiness';
import { validUntil as validUntilOf } from '@/shared/rules/house-terms';
import { capabilityItems, judgeTraining } from '@/shared/rules/screening';

export const recordTraining = action(contract, async ({ actor, params, body }, tx) => {
  const participant = await lockParticipantInReach(tx.db, actor, params.participantId);
  if (!participant) return notFound();
  const now = await tx.now();
  const whose = { participantId: participant.id, siteId: participant.siteId };
  if (participant.closedAt !== null) return refuse('participant.withdrawn', whose);
  const protocol = await readProtocolInForce(tx.db, participant.siteId);
  if (!protocol) return refuse('protocol.none', whose);
  const { skills, capability, helperName, remark } = body;
  const judged = judgeTraining({ skills, capability, hasHelper: helperName !== undefined });
  if (judged.unknown.length > 0) {
    const pathOf = (item: string) =>
      `${item in capability && !capabilityItems.includes(item) ? 'capability' : 'skills'}.${item}`;
    const fields = judged.unknown.map((item) => ({ path: pathOf(item), code: 'training.skill_unknown' }));
    return refuse('training.skill_unknown', { ...whose, fields });
  }

  const id = crypto.randomUUID();
  const signedOff = judged.complete;
  const validUntil = signedOff ? validUntilOf(now, protocol.settings.trainingValidDays) : null;
  await insertTraining(tx.db, {
    ...{
      id,
      participantId: participant.id,
      skills,
      capability,
      helperName: helperName ?? null,
      remark: remark ?? null,
    },
    ...{ signedOff, validUntil, recordedBy: actor.accountId, createdAt: now },
  });
  tx.record({
    ...whose,
    subject: { kind: 'training', id },
    after: { signedOff, validUntil, open: judged.open, helperName: helperName ?? null, remark },
  });
  return { id, signedOff, open: [...judged.open], validUntil };
});
