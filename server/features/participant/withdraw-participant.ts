// Records that a person withdraws: permits, plan and consents end at once, the record stays. A device that is still at home is asked back.

import { closeConsents } from '@/db/queries/consent';
import { cancelOpenPlanned } from '@/db/queries/course-plan';
import { closeCourse, closePause, findActiveCourse, findOpenPause, lockCourse } from '@/db/queries/course-state';
import { loadDeviceFor } from '@/db/queries/device';
import { closeInvitationsOf } from '@/db/queries/invitation';
import { closeParticipant } from '@/db/queries/participant';
import { voidLivePermit } from '@/db/queries/permit';
import { closePrescription, discardDrafts, findPrescriptionInForce } from '@/db/queries/prescription';
import { lockParticipantInReach } from '@/db/queries/reach';
import { setAccountState } from '@/db/queries/site';
import { openItem } from '@/db/queries/worklist';
import { action, notFound, refuse, type Tx } from '@/server/action';
import { withdrawParticipant as contract } from '@/shared/contracts/participant';

export const withdrawParticipant = action(contract, async ({ actor, params, body }, tx) => {
  const participant = await lockParticipantInReach(tx.db, actor, params.participantId);
  if (!participant) return notFound();
  const course = await findActiveCourse(tx.db, participant.id);
  if (course) await lockCourse(tx.db, course.id);
  const now = await tx.now();
  const whose = { participantId: participant.id, siteId: participant.siteId };
  if (participant.closedAt !== null) return refuse('participant.withdrawn', whose);

  const voided = await voidLivePermit(tx.db, participant.id, now, 'withdrawn');
  if (course) await endCourse(tx, course.id, now);
  await closeConsents(tx.db, participant.id, now);
  await closeInvitationsOf(tx.db, participant.id, now, 'withdrawn');
  await closeParticipant(tx.db, participant.id, now);
  // A closed account still reads and takes away its own record; it is cleared for nothing any more.
  if (participant.accountId !== null) await setAccountState(tx.db, participant.accountId, 'closed');
  const device = await loadDeviceFor(tx.db, participant.id);
  if (device) {
    await openItem(tx.db, {
      ...{ id: crypto.randomUUID(), ...whose, level: 'due', why: 'device_return', facts: { label: device.label } },
      ...{ matter: `device_return:${device.id}`, openedAt: now },
    });
  }
  tx.record({
    ...whose,
    subject: { kind: 'participant', id: participant.id },
    after: { withdrawnAt: now, courseId: course?.id ?? null, voidedPermitId: voided?.id ?? null },
    why: body.reason,
  });
  return { withdrawnAt: now };
});

async function endCourse(tx: Tx, courseId: string, now: string): Promise<void> {
  await cancelOpenPlanned(tx.db, courseId, now);
  await discardDrafts(tx.db, courseId, now);
  const inForce = await findPrescriptionInForce(tx.db, courseId);
  if (inForce) await closePrescription(tx.db, inForce.id, now, 'course_ended');
  const pause = await findOpenPause(tx.db, courseId);
  if (pause) await closePause(tx.db, pause.id, now);
  await closeCourse(tx.db, courseId, now, 'withdrawn');
}
