// Rows of the list of participants: a fixed number of statements for a page, whatever its length. Changes nothing.

import type { Db } from '@/db/client';
import { listMarks, listPlanned } from '@/db/queries/course';
import { listLastEffects } from '@/db/queries/participant';
import type { JudgedParticipant } from '@/server/features/participant/find-page';
import type { ParticipantRow } from '@/shared/contracts/participant';
import { adherenceShown } from '@/shared/rules/adherence-shown';
import type { Role } from '@/shared/values/roles';
import { milliampOf, minuteMilliseconds } from '@/shared/values/units';

/** A monitor checks records without knowing whose they are. */
export function seesNames(role: Role): boolean {
  return role === 'coordinator' || role === 'clinician';
}

export async function viewRows(
  db: Db,
  people: readonly JudgedParticipant[],
  role: Role,
  now: string,
): Promise<ParticipantRow[]> {
  const courseIds = people.flatMap(({ standing }) => (standing.course ? [standing.course.id] : []));
  const marks = await listMarks(db, courseIds, now);
  const planned = await listPlanned(db, courseIds);
  const effects = await listLastEffects(
    db,
    people.map(({ listed }) => listed.id),
  );
  return people.map(({ listed, standing, judged }): ParticipantRow => {
    const { course, prescription } = standing;
    const facts = course ? planned.get(course.id) : undefined;
    return {
      id: listed.id,
      code: listed.code,
      name: seesNames(role) ? listed.name : listed.code,
      state: judged.state,
      siteName: listed.siteName,
      marks: (course && marks.get(course.id)) ?? [],
      adherence: facts ? adherenceShown(facts, now) : null,
      prescribed: prescription?.isSigned
        ? {
            intensityMilliamp: milliampOf(prescription.intensityUa),
            minutes: prescription.onMs / minuteMilliseconds,
          }
        : null,
      lastEffect: effects.get(listed.id) ?? null,
      nextFrom: standing.windowFrom,
      holds: standing.lockouts.length,
      since: listed.createdAt,
    };
  });
}
