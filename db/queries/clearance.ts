// What "may a session start now?" is judged by, gathered in six statements. `gatherFacts` of shared/rules/clearance makes the
// rule's facts of it; nothing is decided here.

import type { Db } from '@/db/client';
import {
  listLockoutsForClearance,
  listPlannedOfCourse,
  listRecentSessions,
  listSuppliesInUse,
} from './clearance/history';
import { loadPerson } from './clearance/person';
import { readProtocolInForce } from './protocol';

/**
 * The record of one person as clearance needs it; null: no such participant.
 * @param precheckId the pre-check that the person names; without it the newest complete one that no permit was given for
 */
export async function loadClearanceFacts(db: Db, participantId: string, now: string, precheckId?: string) {
  const person = await loadPerson(db, participantId, now, precheckId);
  if (person === null) return null;
  return {
    person,
    protocol: await readProtocolInForce(db, person.participant.siteId),
    sessions: await listRecentSessions(db, participantId, now),
    planned: person.course === null ? [] : await listPlannedOfCourse(db, person.course.id),
    lockouts: await listLockoutsForClearance(db, participantId, now),
    supplies: await listSuppliesInUse(db, participantId),
  };
}

export type ClearanceRecord = NonNullable<Awaited<ReturnType<typeof loadClearanceFacts>>>;
