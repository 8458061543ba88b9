// One session as planned, as delivered by the server's own sum, and as felt. For its participant and for staff of the site.

import { findNumber, findNextWindow } from '@/db/queries/clearance/history';
import { listDiaries, listPhotos } from '@/db/queries/diary';
import { listLockoutsFrom } from '@/db/queries/lockout';
import { findParticipantInReach } from '@/db/queries/reach';
import { findSession, listEventBodies, listKeptEvents } from '@/db/queries/session';
import { findContactOfParticipant } from '@/db/queries/site-contact';
import { action, notFound } from '@/server/action';
import { eventsOf } from '@/server/features/session/event-row';
import { readSession as contract } from '@/shared/contracts/session';
import { pagesOf } from '@/shared/rules/diary-view';
import { permitStateAt } from '@/shared/rules/permit-state';
import { missingSequences, nextFromOf, sessionWordOf } from '@/shared/rules/session-record';
import { amountsOf, plannedSecondsOf, summaryOf } from '@/shared/rules/session-summary';
import { minutesOf } from '@/shared/values/units';

export const readSession = action(contract, async ({ actor, params }, tx) => {
  const session = await findSession(tx.db, params.sessionId);
  const participant = session && (await findParticipantInReach(tx.db, actor, session.participantId));
  const contact = participant && (await findContactOfParticipant(tx.db, participant.id));
  if (!session || !contact) return notFound();
  const now = await tx.now();
  const { id, participantId, siteId, delivered, dose } = session;
  tx.record({ participantId, siteId, kind: 'read', subject: { kind: 'session', id } });

  const pages = await listDiaries(tx.db, [id]);
  const locked = await listLockoutsFrom(
    tx.db,
    pages.map((page) => page.id),
  );
  const reader = actor.role === 'monitor' ? 'pseudonymous' : 'whole';
  // Until the record is whole, what has come in so far.
  const events = session.summary === null ? eventsOf(await listEventBodies(tx.db, id)) : [];
  const {
    curve,
    contact: electrodes,
    pauses,
    sensations,
    gaps,
    conflicts,
  } = session.summary ?? summaryOf(dose, events, amountsOf(dose, events));
  const ended = events.find((event) => event.kind === 'ended');
  const permit = permitStateAt(session.permit, now);
  const { number, of } = await findNumber(tx.db, session.courseId, session.plannedSessionId);
  return {
    id,
    permitId: session.permitId,
    courseId: session.courseId,
    participantId,
    number,
    of: Math.max(of, session.sessionsTotal),
    state: sessionWordOf({ ...session, plannedSeconds: plannedSecondsOf(dose) }, permit.state, now),
    permitState: permit.state,
    startedAt: session.startedAt,
    endedAt: session.endedAt,
    endReason: session.endReason,
    dose,
    delivered:
      delivered === null || session.closedWhy === 'unused'
        ? null
        : {
            chargeCoulomb: delivered.chargeCoulomb ?? 0,
            upperChargeCoulomb: delivered.upperChargeCoulomb,
            minutes: minutesOf(delivered.seconds),
            fraction: delivered.fraction,
            completeness: delivered.completeness,
            gaps,
            conflicts,
          },
    curve,
    contact: electrodes,
    pauses,
    sensations,
    missingSequences:
      session.closedAt !== null
        ? []
        : missingSequences(await listKeptEvents(tx.db, id), ended?.kind === 'ended' ? ended.lastSequence : null),
    ...pagesOf(id, pages, await listPhotos(tx.db, [id]), locked, reader),
    nextFrom: nextFromOf(session.endedAt, session.permit.minGapMs, await findNextWindow(tx.db, session.courseId, now)),
    zone: session.zone,
    site: contact.site,
  };
});
