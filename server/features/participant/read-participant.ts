// One person as staff see them: who, how far, what must still stand, the course, what is locked.

import { listCaregivers } from '@/db/queries/caregiver';
import { countUnansweredMessages } from '@/db/queries/message';
import { listLockoutsWithItems } from '@/db/queries/participant';
import { loadStanding } from '@/db/queries/participant-standing';
import { findParticipantInReach } from '@/db/queries/reach';
import { findSite } from '@/db/queries/site';
import { action, notFound } from '@/server/action';
import { viewCourse } from '@/server/features/participant/view-course';
import { seesNames } from '@/server/features/participant/view-rows';
import { readParticipant as contract } from '@/shared/contracts/participant';
import { mostCaregivers } from '@/shared/rules/house-limits';
import { standingOf } from '@/shared/rules/participant-standing';

export const readParticipant = action(contract, async ({ actor, params }, tx) => {
  const participant = await findParticipantInReach(tx.db, actor, params.participantId);
  const site = participant && (await findSite(tx.db, participant.siteId));
  const now = await tx.now();
  const standing = participant && (await loadStanding(tx.db, [participant.id], now)).get(participant.id);
  if (!participant || !site || !standing) return notFound();
  const { id, code, email, phone, bornOn } = participant;
  const isNamed = seesNames(actor.role);
  const { state, readiness, ageYears } = standingOf(standing, now);
  const caregivers = await listCaregivers(tx.db, id, { limit: mostCaregivers, after: null });
  tx.record({ participantId: id, siteId: site.id, kind: 'read', subject: { kind: 'participant', id } });
  return {
    id,
    code,
    name: isNamed ? participant.name : code,
    contact: isNamed
      ? {
          email,
          phone,
          bornOn,
          emergencyContact: { name: participant.emergencyName, phone: participant.emergencyPhone },
        }
      : null,
    siteId: site.id,
    siteName: site.name,
    zone: participant.zone,
    ageYears,
    state,
    enrolledAt: participant.createdAt,
    withdrawnAt: participant.closedAt,
    readiness,
    course: standing.course && (await viewCourse(tx.db, standing.course.id, now)),
    lockouts: await listLockoutsWithItems(tx.db, id, now),
    caregivers: isNamed
      ? caregivers.map(({ id: caregiverId, name, accountId }) => ({
          ...{ id: caregiverId, name, state: accountId === null ? ('invited' as const) : ('active' as const) },
        }))
      : [],
    unreadMessages: await countUnansweredMessages(tx.db, id),
  };
});
