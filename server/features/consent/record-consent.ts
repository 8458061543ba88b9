// Records a signed consent by the version of its document. The newest of a kind counts; earlier ones stay.

import { insertConsent } from '@/db/queries/consent';
import { readProtocolInForce } from '@/db/queries/protocol';
import { lockParticipantInReach } from '@/db/queries/reach';
import { action, notFound, refuse } from '@/server/action';
import { recordConsent as contract } from '@/shared/contracts/readiness';
import { consentRefusal } from '@/shared/rules/enrolment';

export const recordConsent = action(contract, async ({ actor, params, body }, tx) => {
  const participant = await lockParticipantInReach(tx.db, actor, params.participantId);
  if (!participant) return notFound();
  const now = await tx.now();
  const whose = { participantId: participant.id, siteId: participant.siteId };
  if (participant.closedAt !== null) return refuse('participant.withdrawn', whose);
  const protocol = await readProtocolInForce(tx.db, participant.siteId);
  if (!protocol) return refuse('protocol.none', whose);
  const site = { newestVersion: protocol.settings.consentVersion, zone: participant.zone };
  const refusal = consentRefusal(body, site, now);
  if (refusal) {
    const { code, fields } = refusal;
    return refuse(code, { ...whose, fields: fields.map((path) => ({ path, code })) });
  }

  const { kind, documentVersion, signedOn, ...answers } = body;
  const { remark, ...ticked } = answers;
  const id = crypto.randomUUID();
  await insertConsent(tx.db, {
    ...{ id, participantId: participant.id, kind, documentVersion, signedOn },
    ...{ answers: remark === undefined ? ticked : { ...ticked, remark }, recordedBy: actor.accountId, createdAt: now },
  });
  tx.record({
    ...whose,
    subject: { kind: 'consent', id },
    after: { kind, documentVersion, signedOn, ...ticked, remark },
  });
  return { id };
});
