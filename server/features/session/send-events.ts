// A batch of a session's events: each kept once, in any order, at any delay. What the run shows acts at once; when nothing is missing any
// more, the session is closed with what was truly delivered.

import { findOpenPause, lockCourse } from '@/db/queries/course-state';
import { findDevice } from '@/db/queries/device';
import { listOpenLockouts } from '@/db/queries/lockout';
import { findPrescriptionInForce } from '@/db/queries/prescription';
import {
  findSessionOfPermit,
  insertEvents,
  listEventBodies,
  listKeptEvents,
  type SessionRecord,
} from '@/db/queries/session';
import { action, invalid, notFound, type Tx } from '@/server/action';
import { beginSession } from '@/server/features/session/begin-session';
import { closeRecord } from '@/server/features/session/close-record';
import { eventsOf, incomingOf, rowOf } from '@/server/features/session/event-row';
import { flagRecord } from '@/server/features/session/flag-record';
import { storeRunFindings } from '@/server/features/session/store-run-findings';
import { sendEvents as contract, type SessionEvent } from '@/shared/contracts/permit';
import { permitStateAt } from '@/shared/rules/permit-state';
import { rampDownCause } from '@/shared/rules/running';
import {
  judgeEvents,
  missingSequences,
  secondsSince,
  sessionWordOf,
  type EventVerdict,
  type RefusedCode,
} from '@/shared/rules/session-record';
import { plannedSecondsOf } from '@/shared/rules/session-summary';

/** A batch of nothing but these is answered by its fields: there is nothing in it to keep, or to flag. */
const hopeless: readonly RefusedCode[] = ['from_the_future', 'after_the_end', 'too_many'];

function lastSequenceOf(events: readonly SessionEvent[]): number | null {
  const ended = events.find((event) => event.kind === 'ended');
  return ended?.kind === 'ended' ? ended.lastSequence : null;
}

/** What has happened since the permit was given, asked of the rule: what runs on it goes down, or goes on to its end. */
async function causeToRampDown(tx: Tx, session: SessionRecord, voidedBy: string | null, now: string) {
  const { permit, courseId, participantId, siteId } = session;
  return rampDownCause({
    voidedBy,
    running: session.dose,
    inForce: (await findPrescriptionInForce(tx.db, courseId))?.dose ?? null,
    isPaused: (await findOpenPause(tx.db, courseId)) !== null,
    isLocked: (await listOpenLockouts(tx.db, participantId, now)).length > 0,
    device: (await findDevice(tx.db, [siteId], permit.deviceId))?.state ?? null,
  });
}

async function answerOf(tx: Tx, session: SessionRecord, verdicts: readonly EventVerdict[], now: string) {
  const { state, voidedBy } = permitStateAt(session.permit, now);
  const idsOf = (wanted: 'store' | 'known') => verdicts.flatMap(({ id, verdict }) => (verdict === wanted ? [id] : []));
  const kept = await listKeptEvents(tx.db, session.id);
  const end = lastSequenceOf(eventsOf(await listEventBodies(tx.db, session.id, { kinds: ['ended'] })));
  const isOver = session.closedAt !== null || session.endedAt !== null;
  const cause = isOver ? null : await causeToRampDown(tx, session, voidedBy, now);
  return {
    stored: idsOf('store'),
    known: idsOf('known'),
    refused: verdicts.flatMap((each) => (each.verdict === 'refused' ? [{ id: each.id, code: each.code }] : [])),
    sessionId: session.id,
    sessionState: sessionWordOf({ ...session, plannedSeconds: plannedSecondsOf(session.dose) }, state, now),
    missing: missingSequences(kept, end),
    permit: { state, voidedBy: voidedBy ?? cause, rampDown: cause !== null },
  };
}

export const sendEvents = action(contract, async ({ actor, params, body }, tx) => {
  const found = await findSessionOfPermit(tx.db, params.permitId);
  if (!found || found.participantId !== actor.participantId) return notFound();
  await lockCourse(tx.db, found.courseId);
  const now = await tx.now();
  const session = (await findSessionOfPermit(tx.db, params.permitId)) ?? found;
  const kept = await listKeptEvents(tx.db, session.id);
  const end = lastSequenceOf(eventsOf(await listEventBodies(tx.db, session.id, { kinds: ['ended'] })));

  const verdicts = judgeEvents(body.events.map(incomingOf), kept, secondsSince(session.permit.issuedAt, now), end);
  const refusedAs = (id: string) => verdicts.find((each) => each.id === id && each.verdict === 'refused');
  const isHopeless = verdicts.every((each) => each.verdict === 'refused' && hopeless.includes(each.code));
  if (isHopeless) {
    return invalid(
      body.events.flatMap((event, index) => {
        const refused = refusedAs(event.id);
        const path = `events.${index}.atSeconds`;
        return refused?.verdict === 'refused' ? [{ path, code: `event_${refused.code}` }] : [];
      }),
    );
  }

  const accepted = body.events.filter((_event, index) => verdicts[index]?.verdict === 'store');
  await insertEvents(
    tx.db,
    session.id,
    accepted.map((event) => rowOf(event, now)),
  );
  await storeRunFindings(tx, session, accepted, now);
  await beginSession(tx, session, accepted, now);
  await flagRecord(tx, session, verdicts, now);
  const all = [...kept, ...accepted];
  const endNow = end ?? lastSequenceOf(accepted);
  const isWhole = endNow !== null && missingSequences(all, endNow).length === 0;
  const closed = isWhole && session.closedAt === null ? await closeRecord(tx, session.id, now) : null;

  const after = (await findSessionOfPermit(tx.db, params.permitId)) ?? session;
  if (accepted.length > 0) {
    const { participantId, siteId } = session;
    tx.record({
      participantId,
      siteId,
      subject: { kind: 'session', id: session.id },
      after: { events: accepted.length, startedAt: after.startedAt, endReason: after.endReason, ...(closed ?? {}) },
    });
  }
  return answerOf(tx, after, verdicts, now);
});
