// Somebody asks to start: one permit, or every reason why not. Everything is decided under the course's lock on the server's clock; the
// partial unique index of the permit table is the last guard.

import { loadClearanceFacts } from '@/db/queries/clearance';
import { lockCourse } from '@/db/queries/course-state';
import {
  closeExpiredPermits,
  countPermitsSince,
  findPermit,
  findPermitByKey,
  insertPermit,
  raiseDeviceCounter,
} from '@/db/queries/permit';
import { insertSession } from '@/db/queries/session';
import { action, notFound, refuse } from '@/server/action';
import { decidePermit } from '@/server/features/permit/decide-permit';
import { claimsOf } from '@/server/features/permit/permit-claims';
import { signPermit } from '@/server/features/permit/sign-permit';
import { viewPermit } from '@/server/features/permit/view-permit';
import { issuePermit as contract } from '@/shared/contracts/permit';
import { reason } from '@/shared/rules/clearance/reason';
import { permitsPerHour } from '@/shared/rules/permit-rate';

export const issuePermit = action(contract, async ({ actor, body, key }, tx) => {
  const course = await lockCourse(tx.db, body.courseId);
  if (!course || course.participantId !== actor.participantId || key === null) return notFound();
  const { id: courseId, participantId, siteId } = course;
  const now = await tx.now();
  const given = await findPermitByKey(tx.db, participantId, key);
  if (given) return viewPermit(tx.db, given, now);
  const gathered = await loadClearanceFacts(tx.db, participantId, now, body.precheckId);
  if (gathered === null || gathered.person.course?.id !== courseId) return notFound();
  const issued = await countPermitsSince(tx.db, participantId, permitsPerHour.since(now));
  const decided = decidePermit(gathered, body, issued, now);
  if (decided.refused) return decided;
  const { prescription, precheckId, plannedSessionId, expiresAt, expiresBy } = decided;

  await closeExpiredPermits(tx.db, participantId, now);
  const counter = await raiseDeviceCounter(tx.db, body.deviceId);
  if (counter === null) return notFound();
  const ids = { id: crypto.randomUUID(), participantId, courseId, deviceId: body.deviceId };
  const permit = { ...ids, counter, issuedAt: now, expiresAt };
  const sessionId = crypto.randomUUID();
  const token = await signPermit(tx, claimsOf(permit, sessionId, prescription));
  const { intensityUa, chargeUc, onMs } = prescription;
  const isMade = await insertPermit(tx.db, {
    ...permit,
    ...{ key, token, expiresBy, precheckId, intensityUa, chargeUc, onMs },
    prescriptionId: prescription.id,
  });
  if (!isMade) return refuse('clearance.refused', { reasons: [reason('live_permit')], participantId, siteId });
  const session = { id: sessionId, permitId: permit.id, participantId, courseId, plannedSessionId };
  await insertSession(tx.db, { ...session, createdAt: now });
  tx.record({
    participantId,
    siteId,
    subject: { kind: 'permit', id: permit.id },
    after: { sessionId, counter, expiresAt, expiresBy, version: prescription.version, intensityUa, chargeUc, onMs },
  });
  const made = await findPermit(tx.db, permit.id);
  if (!made) throw new Error('The permit just made is not there.');
  return viewPermit(tx.db, made, now);
});
