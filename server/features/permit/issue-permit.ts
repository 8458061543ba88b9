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
import { claimsOf } from '@/server/features/permit/permit-claims';
import { signPermit } from '@/server/features/permit/sign-permit';
import { viewPermit } from '@/server/features/permit/view-permit';
import { issuePermit as contract } from '@/shared/contracts/permit';
import { clearance } from '@/shared/rules/clearance';
import { gatherFacts } from '@/shared/rules/clearance/gather';
import { plannedNow, withDeviceAtHand, withPlan } from '@/shared/rules/clearance/planned';
import { reason } from '@/shared/rules/clearance/reason';
import { permitsPerHour } from '@/shared/rules/permit-rate';
import { permitExpiry } from '@/shared/rules/permit';

export const issuePermit = action(contract, async ({ actor, body, key }, tx) => {
  const course = await lockCourse(tx.db, body.courseId);
  if (!course || course.participantId !== actor.participantId || key === null) return notFound();
  const { participantId, siteId } = course;
  const now = await tx.now();
  const given = await findPermitByKey(tx.db, participantId, key);
  if (given) return viewPermit(tx.db, given, now);
  const gathered = await loadClearanceFacts(tx.db, participantId, now, body.precheckId);
  if (gathered === null || gathered.person.course?.id !== course.id) return notFound();
  const { person, planned } = gathered;
  const { prescription, precheck } = person;

  const facts = withDeviceAtHand(gatherFacts(gathered, now, body.batteryPercent), person.deviceId === body.deviceId);
  const answer = withPlan(clearance(facts, now), planned, now);
  if (!answer.allowed) return refuse('clearance.refused', { reasons: answer.reasons, participantId, siteId });
  if (!permitsPerHour.allows(await countPermitsSince(tx.db, participantId, permitsPerHour.since(now)))) {
    return refuse('permit.too_many', { participantId, siteId });
  }
  const plannedSession = plannedNow(planned, now);
  const expiry = permitExpiry(
    {
      precheckAnsweredAt: precheck?.answeredAt,
      zone: person.participant.zone,
      hoursFrom: prescription?.hoursFrom,
      hoursTo: prescription?.hoursTo,
      prescriptionExpiresAt: prescription?.expiresAt,
    },
    now,
  );
  if (!expiry.known || !prescription || !precheck || !plannedSession) {
    const missing = expiry.known ? ['prescription'] : expiry.facts;
    const reasons = missing.map((fact) => reason('unknown_fact', { fact }));
    return refuse('clearance.refused', { reasons, participantId, siteId });
  }

  await closeExpiredPermits(tx.db, participantId, now);
  const counter = await raiseDeviceCounter(tx.db, body.deviceId);
  if (counter === null) return notFound();
  const { expiresAt, expiresBy } = expiry;
  const permit = {
    id: crypto.randomUUID(),
    participantId,
    courseId: course.id,
    deviceId: body.deviceId,
    counter,
    issuedAt: now,
    expiresAt,
  };
  const sessionId = crypto.randomUUID();
  const token = await signPermit(tx, claimsOf(permit, sessionId, prescription));
  const { intensityUa, chargeUc, onMs } = prescription;
  const isMade = await insertPermit(tx.db, {
    ...permit,
    ...{ key, token, expiresBy, intensityUa, chargeUc, onMs },
    prescriptionId: prescription.id,
    precheckId: precheck.id,
  });
  if (!isMade) return refuse('clearance.refused', { reasons: [reason('live_permit')], participantId, siteId });
  await insertSession(tx.db, {
    id: sessionId,
    permitId: permit.id,
    participantId,
    courseId: course.id,
    plannedSessionId: plannedSession.id,
    createdAt: now,
  });
  tx.record({
    participantId,
    siteId,
    subject: { kind: 'permit', id: permit.id },
    after: {
      sessionId,
      counter,
      expiresAt,
      expiresBy,
      prescriptionVersion: prescription.version,
      intensityUa,
      chargeUc,
      onMs,
    },
  });
  const made = await findPermit(tx.db, permit.id);
  if (!made) throw new Error('The permit just made is not there.');
  return viewPermit(tx.db, made, now);
});
