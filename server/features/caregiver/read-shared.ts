// The people who share something with this caregiver, and of each only what is switched on.

import { listSharedPeople, type SharedPersonRecord } from '@/db/queries/caregiver';
import { listMarks, listPlanned } from '@/db/queries/course';
import { cutPage, decodeCursor } from '@/db/queries/cursor';
import { action, invalid } from '@/server/action';
import { readShared as contract, type SharedPerson } from '@/shared/contracts/caregiver';
import type { CourseMark } from '@/shared/contracts/course';
import { adherenceShown } from '@/shared/rules/adherence-shown';
import { firstNameOf } from '@/shared/values/first-name';
import { positionOf } from '@/shared/values/list-position';

export const readShared = action(contract, async ({ actor, query }, tx) => {
  const after = query.cursor === undefined ? null : positionOf(decodeCursor(query.cursor));
  if (after === undefined) return invalid([{ path: 'cursor', code: 'cursor_unknown' }]);
  const rows = await listSharedPeople(tx.db, actor.accountId, {
    limit: query.limit + 1,
    after: after && { acceptedAt: after.at, id: after.id },
  });
  const { page, nextCursor } = cutPage(rows, query.limit, ({ acceptedAt, caregiverId }) => [acceptedAt, caregiverId]);
  const now = await tx.now();
  // What is not shared is not even loaded.
  const courseIds = page.flatMap(({ shares, courseId }) => (shares.adherence && courseId !== null ? [courseId] : []));
  const marks = await listMarks(tx.db, courseIds, now);
  const planned = await listPlanned(tx.db, courseIds);
  for (const { participantId } of page) {
    tx.record({ participantId, kind: 'read', subject: { kind: 'shared', id: participantId } });
  }
  const items = page.map((person): SharedPerson => {
    const { courseId } = person;
    const strip = courseId === null ? undefined : marks.get(courseId);
    const facts = courseId === null ? undefined : planned.get(courseId);
    if (!strip || !facts) return viewPerson(person, null);
    const shown = strip.map((mark) => viewMark(mark, person.shares.diary));
    const next = shown.find(({ state }) => state === 'next' || state === 'held');
    return viewPerson(person, {
      marks: shown,
      adherence: adherenceShown(facts, now),
      nextFrom: next?.windowFrom ?? null,
    });
  });
  return { items, nextCursor };
});

/** What was felt belongs to the diary; a session's own page is not a caregiver's. */
function viewMark(mark: CourseMark, isDiaryShared: boolean): CourseMark {
  return { ...mark, sessionId: null, headache: isDiaryShared ? mark.headache : null };
}

function viewPerson(person: SharedPersonRecord, course: SharedPerson['course']): SharedPerson {
  const { caregiverId, participantId, shares, zone, sitePhone, siteName, emergencyNumber } = person;
  const shown = { caregiverId, participantId, shares, zone, sitePhone, siteName, emergencyNumber };
  return { ...shown, firstName: firstNameOf(person.name), assisted: person.isAssisted, course };
}
