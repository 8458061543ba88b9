// Enrols a person at an own site: a code, a record, an invitation by mail.

import { findRoleOfAddress, lockAddress } from '@/db/queries/invitation';
import { insertParticipant, takeNumber } from '@/db/queries/participant';
import { findSite } from '@/db/queries/site';
import { action, notFound, refuse } from '@/server/action';
import { inviteByMail } from '@/server/features/participant/invite-by-mail';
import { enrolParticipant as contract } from '@/shared/contracts/participant';
import { enrolmentRefusal, participantCode } from '@/shared/rules/enrolment';

export const enrolParticipant = action(contract, async ({ actor, body }, tx) => {
  const site = actor.siteIds.includes(body.siteId) ? await findSite(tx.db, body.siteId) : null;
  if (!site) return notFound();
  await lockAddress(tx.db, body.email);
  const now = await tx.now();
  const tooYoung = enrolmentRefusal(body, now);
  if (tooYoung) return refuse(tooYoung, { siteId: site.id, fields: [{ path: 'bornOn', code: tooYoung }] });
  if ((await findRoleOfAddress(tx.db, body.email)) !== null) {
    return refuse('participant.address_taken', { siteId: site.id, fields: [{ path: 'email', code: 'address_taken' }] });
  }

  const { emergencyContact, siteId, ...said } = body;
  const participant = {
    ...{ id: crypto.randomUUID(), siteId, code: participantCode(site.code, await takeNumber(tx.db, siteId)), ...said },
    ...{ emergencyName: emergencyContact.name, emergencyPhone: emergencyContact.phone },
    ...{ enrolledBy: actor.accountId, createdAt: now },
  };
  await insertParticipant(tx.db, participant);
  const invitationExpiresAt = await inviteByMail(tx, actor, participant, site.name, now);
  tx.record({
    participantId: participant.id,
    siteId,
    subject: { kind: 'participant', id: participant.id },
    after: { code: participant.code, ...said, emergencyContact },
  });
  return { id: participant.id, code: participant.code, invitationExpiresAt };
});
