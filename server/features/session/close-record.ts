// The record of a session is whole: what was delivered is computed from the samples and stored once, the planned session is done, and
// whatever the record shows goes to staff. What the device counted itself is kept beside it and never used.

import { findNumber } from '@/db/queries/clearance/history';
import { closePlanned } from '@/db/queries/course-plan';
import { listLockoutsFrom, listOpenLockouts, storeConsequences } from '@/db/queries/lockout';
import { closeSession, findSession, listEndReasons, listEventBodies, type SessionRecord } from '@/db/queries/session';
import { closeMatter } from '@/db/queries/worklist';
import type { Tx } from '@/server/action';
import { closeCourseIfDone } from '@/server/course-end';
import { eventsOf } from '@/server/features/session/event-row';
import { tellPages } from '@/server/features/session/tell-pages';
import { consequencesOf } from '@/shared/rules/consequences';
import { lockoutsAfterDiary } from '@/shared/rules/lockout';
import { findingsOfEffects, looksOfRecord } from '@/shared/rules/lockout-findings';
import { lostContactLooksBack } from '@/shared/rules/house-limits';
import { closingOf } from '@/shared/rules/session-closing';
import { noWordMatter } from '@/shared/rules/matters';
import type { SessionSummary } from '@/shared/rules/session-summary';

export async function closeRecord(tx: Tx, sessionId: string, now: string) {
  const session = await findSession(tx.db, sessionId);
  if (!session) return null;
  const { amounts, row, summary } = closingOf(session.dose, eventsOf(await listEventBodies(tx.db, sessionId)));
  await closeSession(tx.db, sessionId, { ...row, closedAt: now });
  await closeMatter(tx.db, session.participantId, noWordMatter(sessionId), now, 'record_came');
  if (amounts.hasRun) {
    if (row.completeness !== 'not_delivered') {
      await closePlanned(tx.db, session.plannedSessionId, now, 'done');
      await closeCourseIfDone(tx.db, session.courseId, now);
    }
    await storeRecordFindings(
      tx,
      session,
      { endReason: amounts.endReason, completeness: row.completeness, summary },
      now,
    );
  }
  const { closedWhy, completeness, deliveredUc, upperUc, onMs } = row;
  return { closedWhy, completeness, deliveredUc, upperUc, onMs };
}

interface Report {
  endReason: string | null;
  completeness: 'complete' | 'partial' | 'not_delivered';
  summary: SessionSummary;
}

async function storeRecordFindings(
  tx: Tx,
  session: SessionRecord,
  { endReason, completeness, summary }: Report,
  now: string,
): Promise<void> {
  const { id, participantId, siteId } = session;
  const { number } = await findNumber(tx.db, session.courseId, session.plannedSessionId);
  const effects = summary.sensations.map(({ sensation, strength }) => ({ kind: sensation, strength }));
  const { gapSeconds, conflicts } = summary;
  const own = await listLockoutsFrom(tx.db, [id]);
  const locked = lockoutsAfterDiary({ endReasons: await listEndReasons(tx.db, participantId, lostContactLooksBack) });
  // What has locked already is on the list.
  const looks =
    own.length > 0 ? [] : looksOfRecord({ number, endReason, completeness, effects, gapSeconds, conflicts }, id);
  const consequences = consequencesOf(
    [...findingsOfEffects(locked, { number }), ...looks],
    { participantId, siteId, source: 'session', sourceId: id, sessionId: id, at: now },
    [...own, ...(await listOpenLockouts(tx.db, participantId, now))],
    () => crypto.randomUUID(),
  );
  await storeConsequences(tx.db, consequences, participantId, now);
  await tellPages(tx, consequences, participantId, siteId);
}
