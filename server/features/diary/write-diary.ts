// A diary page, after a session or the next day. What its answers lead to, with the past beside them, opens in the same transaction: lockouts,
// rows for staff, pages. A page is written once; the first stays.

import { findNumber } from '@/db/queries/clearance/history';
import { lockCourse } from '@/db/queries/course-state';
import { insertDiary, listDiaries, listPhotos } from '@/db/queries/diary';
import { listLockoutsFrom, listOpenLockouts, storeConsequences } from '@/db/queries/lockout';
import { readProtocolInForce } from '@/db/queries/protocol';
import { findSession } from '@/db/queries/session';
import { findPageFacts } from '@/db/queries/site-contact';
import { action, notFound, refuse } from '@/server/action';
import { judgePage } from '@/server/features/diary/judge-page';
import { writeDiary as contract } from '@/shared/contracts/session';
import { consequencesOf, firstPages } from '@/shared/rules/consequences';
import { pageView } from '@/shared/rules/diary-view';

export const writeDiary = action(contract, async ({ actor, params, body }, tx) => {
  const found = await findSession(tx.db, params.sessionId);
  if (!found || found.participantId !== actor.participantId) return notFound();
  const { id: sessionId, participantId, siteId, courseId } = found;
  await lockCourse(tx.db, courseId);
  const now = await tx.now();
  const session = (await findSession(tx.db, sessionId)) ?? found;
  if (session.startedAt === null || session.endedAt === null)
    return refuse('session.not_ended', { participantId, siteId });
  const pages = await listDiaries(tx.db, [sessionId]);
  if (pages.some(({ kind }) => kind === body.kind)) return refuse('diary.already_written', { participantId, siteId });

  const { number } = await findNumber(tx.db, courseId, session.plannedSessionId);
  const photos = await listPhotos(tx.db, [sessionId]);
  const judged = await judgePage(tx.db, {
    session,
    startedAt: session.startedAt,
    number,
    body,
    pages,
    photos: photos.length,
  });
  const id = crypto.randomUUID();
  const consequences = consequencesOf(
    judged.findings,
    { participantId, siteId, source: 'diary', sourceId: id, sessionId, at: now },
    [...(await listLockoutsFrom(tx.db, [sessionId])), ...(await listOpenLockouts(tx.db, participantId, now))],
    () => crypto.randomUUID(),
  );

  const { kind, answers } = body;
  const { emergencyAdvice, headache, worstStrength, worstGrade } = judged;
  const page = { id, sessionId, participantId, kind, answers, headache, worstStrength, worstGrade, emergencyAdvice };
  const isWritten = await insertDiary(tx.db, { ...page, writtenAt: now, accountId: actor.accountId });
  if (!isWritten) return refuse('diary.already_written', { participantId, siteId });
  await storeConsequences(tx.db, consequences, participantId, now);
  const about = await findPageFacts(tx.db, participantId);
  const protocol = await readProtocolInForce(tx.db, siteId);
  for (const mail of about ? firstPages(consequences, protocol?.settings.contacts ?? [], about) : []) tx.tell(mail);

  const lockouts = consequences.lockouts.map(({ level, code }) => ({ level, code }));
  tx.record({
    participantId,
    siteId,
    subject: { kind: 'diary', id },
    after: { sessionId, kind, headache, worstGrade, lockouts },
  });
  // Told again by what it said, whether the lockout is new or stood already.
  const locked = judged.effects.map(({ code, level }) => ({ sourceId: id, code, level }));
  return pageView({ id, sessionId, kind, answers, emergencyAdvice, writtenAt: now }, photos, locked, 'whole');
});
