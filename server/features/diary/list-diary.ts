// One's own sessions with their diaries, newest first.

import { listPlannedOfCourse } from '@/db/queries/clearance/history';
import { cutPage, decodeCursor } from '@/db/queries/cursor';
import { listDiaries, listPhotos } from '@/db/queries/diary';
import { listLockoutsFrom } from '@/db/queries/lockout';
import { listBegunSessions } from '@/db/queries/session';
import { action, invalid, notFound } from '@/server/action';
import { listDiary as contract } from '@/shared/contracts/session';
import { pagesOf } from '@/shared/rules/diary-view';
import { isNextDayDue } from '@/shared/rules/next-day';
import { positionOf } from '@/shared/values/list-position';
import { minutesOf } from '@/shared/values/units';

export const listDiary = action(contract, async ({ actor, query }, tx) => {
  const { participantId } = actor;
  if (participantId === null) return notFound();
  const after = query.cursor === undefined ? null : positionOf(decodeCursor(query.cursor));
  if (after === undefined) return invalid([{ path: 'cursor', code: 'cursor_unknown' }]);
  const found = await listBegunSessions(tx.db, participantId, { limit: query.limit + 1, after });
  const { page: sessions, nextCursor } = cutPage(found, query.limit, ({ startedAt, id }) => [startedAt, id]);
  const now = await tx.now();
  tx.record({ participantId, kind: 'read', subject: { kind: 'participant', id: participantId } });

  const ids = sessions.map(({ id }) => id);
  const pages = await listDiaries(tx.db, ids);
  const photos = await listPhotos(tx.db, ids);
  const locked = await listLockoutsFrom(
    tx.db,
    pages.map(({ id }) => id),
  );
  const numbers = new Map<string, number>();
  for (const courseId of new Set(sessions.map((session) => session.courseId))) {
    for (const [index, { id }] of (await listPlannedOfCourse(tx.db, courseId)).entries()) numbers.set(id, index + 1);
  }
  return {
    items: sessions.map((session) => {
      const { diary, nextDay } = pagesOf(session.id, pages, photos, locked, 'whole');
      return {
        sessionId: session.id,
        number: numbers.get(session.plannedSessionId) ?? 1,
        startedAt: session.startedAt ?? session.createdAt,
        deliveredMinutes: session.delivered === null ? null : minutesOf(session.delivered.seconds),
        intensityMilliamp: session.dose.intensityMilliamp,
        completeness: session.delivered?.completeness ?? null,
        diary,
        nextDay,
        nextDayDue: diary !== null && nextDay === null && isNextDayDue(session.endedAt, now, session.zone),
      };
    }),
    nextCursor,
  };
});
