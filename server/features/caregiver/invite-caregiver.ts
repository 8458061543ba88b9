// A person invites somebody who helps, by mail, and says what this one may see.

import { countCaregivers, findCaregiver, insertCaregiver, insertShares } from '@/db/queries/caregiver';
import { findRoleOfAddress, insertInvitation } from '@/db/queries/invitation';
import { lockOwnParticipant } from '@/db/queries/reach';
import { action, notFound, refuse } from '@/server/action';
import { viewCaregiver } from '@/server/features/caregiver/view-caregiver';
import { hashOfMailToken, newMailToken } from '@/server/invitation';
import { inviteCaregiver as contract } from '@/shared/contracts/caregiver';
import { caregiverRefusal } from '@/shared/rules/caregiver-invitation';
import { invitationEnd } from '@/shared/rules/house-terms';
import { firstNameOf } from '@/shared/values/first-name';

export const inviteCaregiver = action(contract, async ({ actor, body }, tx) => {
  const participant = await lockOwnParticipant(tx.db, actor.participantId);
  if (!participant) return notFound();
  const now = await tx.now();
  const { id: participantId, siteId } = participant;
  const { name, email, shares } = body;
  const facts = {
    isWithdrawn: participant.closedAt !== null,
    roleOfAddress: email === participant.email ? 'participant' : await findRoleOfAddress(tx.db, email),
    caregivers: await countCaregivers(tx.db, participantId),
  } as const;
  const refusal = caregiverRefusal(facts);
  if (refusal) return refuse(refusal, { participantId, siteId, fields: [{ path: 'email', code: refusal }] });

  const id = crypto.randomUUID();
  const stopTokenHash = hashOfMailToken(tx.stopTokenFor(id));
  if (!(await insertCaregiver(tx.db, { id, participantId, name, email, createdAt: now, stopTokenHash }))) {
    const code = 'caregiver.already_invited';
    return refuse(code, { participantId, siteId, fields: [{ path: 'email', code }] });
  }
  await insertShares(tx.db, { id: crypto.randomUUID(), caregiverId: id, ...shares, createdAt: now });
  const { token, hash } = newMailToken();
  const participantName = firstNameOf(participant.name);
  const expiresAt = invitationEnd(now);
  await insertInvitation(tx.db, {
    ...{ id: crypto.randomUUID(), role: 'caregiver', email, name, siteId, subjectId: id, tokenHash: hash },
    ...{ invitedBy: participantName, createdAt: now, expiresAt },
  });
  tx.tell({
    kind: 'caregiver_invitation',
    toEmail: email,
    language: participant.language,
    facts: { name, participantName, path: `/invitation#token=${token}` },
    key: `caregiver_invitation:${id}`,
    dropAt: expiresAt,
  });
  tx.record({ participantId, siteId, subject: { kind: 'caregiver', id }, after: { name, email, shares } });
  const made = await findCaregiver(tx.db, participantId, id);
  return made ? viewCaregiver(made) : notFound();
});
