// Rows of the worklist as their readers see them: with the strip of the person's course. A monitor sees the code where a name
// would stand. Changes nothing.

import type { Db } from '@/db/client';
import { listMarks } from '@/db/queries/course';
import { listNewestCourses } from '@/db/queries/course-state';
import type { ItemRecord } from '@/db/queries/worklist';
import type { AccountActor } from '@/server/action';
import type { WorklistItem } from '@/shared/contracts/worklist';
import { nextStep } from '@/shared/rules/worklist-next';

export async function viewItems(
  db: Db,
  actor: AccountActor,
  items: readonly ItemRecord[],
  now: string,
): Promise<WorklistItem[]> {
  const courses = await listNewestCourses(db, [...new Set(items.map((item) => item.participantId))]);
  const marks = await listMarks(db, [...courses.values()], now);
  return items.map((item): WorklistItem => {
    const { id, participantId, code, level, why, facts, openedAt, sessionId, prescriptionId, lockoutId } = item;
    const { ownerAccountId: accountId, ownerName } = item;
    return {
      ...{ id, participantId, code, level, why, facts, openedAt, sessionId, prescriptionId, lockoutId },
      name: actor.role === 'monitor' ? code : item.name,
      owner: accountId === null ? null : { accountId, name: ownerName ?? '', isMe: accountId === actor.accountId },
      next: nextStep(item),
      marks: marks.get(courses.get(participantId) ?? '') ?? [],
    };
  });
}
