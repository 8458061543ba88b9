// Whose thread is meant: a participant's own, or the one that staff name. Null: out of reach, or not there.

import type { Db } from '@/db/client';
import { findParticipantInReach, type ParticipantRecord } from '@/db/queries/reach';
import { invalid, type AccountActor, type Refusal } from '@/server/action';

export async function findThread(
  db: Db,
  actor: AccountActor,
  named: string | undefined,
): Promise<ParticipantRecord | Refusal | null> {
  const participantId = named ?? actor.participantId;
  if (participantId === null) return invalid([{ path: 'participantId', code: 'required' }]);
  return findParticipantInReach(db, actor, participantId);
}
