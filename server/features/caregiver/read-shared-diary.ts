// The diary of a person who shares it with this caregiver: what was felt, no dose and no words of the person's own.

import { findSharesOf, listSharedDiary, type SharedDiaryRecord } from '@/db/queries/caregiver';
import { listMarks } from '@/db/queries/course';
import { cutPage, decodeCursor } from '@/db/queries/cursor';
import { action, invalid, notFound } from '@/server/action';
import { readSharedDiary as contract } from '@/shared/contracts/caregiver';
import { diaryAnswersSchema } from '@/shared/values/diary-answers';
import { positionOf } from '@/shared/values/list-position';

export const readSharedDiary = action(contract, async ({ actor, params, query }, tx) => {
  const { participantId } = params;
  const shares = await findSharesOf(tx.db, actor.accountId, participantId);
  if (!shares?.diary) return notFound();
  const after = query.cursor === undefined ? null : positionOf(decodeCursor(query.cursor));
  if (after === undefined) return invalid([{ path: 'cursor', code: 'cursor_unknown' }]);
  const rows = await listSharedDiary(tx.db, participantId, {
    limit: query.limit + 1,
    after: after && { startedAt: after.at, id: after.id },
  });
  const { page, nextCursor } = cutPage(rows, query.limit, ({ startedAt, sessionId }) => [startedAt, sessionId]);
  const strips = await listMarks(tx.db, [...new Set(page.map(({ courseId }) => courseId))], await tx.now());
  const numbers = new Map([...strips.values()].flat().map((mark) => [mark.plannedSessionId, mark.number]));
  tx.record({ participantId, kind: 'read', subject: { kind: 'shared_diary', id: participantId } });
  return { items: page.flatMap((row) => viewDiary(row, numbers.get(row.plannedSessionId))), nextCursor };
});

/** A page that cannot be read as a diary is left out: unknown is not shown. */
function viewDiary(row: SharedDiaryRecord, number: number | undefined) {
  const answers = diaryAnswersSchema.safeParse(row.answers);
  if (!answers.success || number === undefined) return [];
  const effects = answers.data.effects.map(({ kind, strength }) => ({ kind, strength }));
  return [{ number, startedAt: row.startedAt, headache: row.headache, effects, skin: answers.data.skin }];
}
