// Who may reach what. One predicate a reach; out of reach is the same answer as not there (null).

import { and, eq, isNull } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { caregiver, participant } from '@/db/schema/participant';

/** The part of an actor that reach depends on. */
export interface Reacher {
  accountId: string;
  role: string;
  siteIds: readonly string[];
  participantId: string | null;
}

export type ParticipantRecord = typeof participant.$inferSelect;

/** The participant if this actor is that participant, or staff who keep records at that site; else null. */
export async function findParticipantInReach(
  db: Db,
  actor: Reacher,
  participantId: string,
): Promise<ParticipantRecord | null> {
  const [row] = await db.select().from(participant).where(eq(participant.id, participantId)).limit(1);
  if (!row) return null;
  if (actor.role === 'participant') return row.id === actor.participantId ? row : null;
  if (actor.role === 'coordinator' || actor.role === 'clinician' || actor.role === 'monitor')
    return actor.siteIds.includes(row.siteId) ? row : null;
  return null;
}

/** The participant for staff of an own site, locked against simultaneous change. */
export async function lockParticipantInReach(
  db: Db,
  actor: Reacher,
  participantId: string,
): Promise<ParticipantRecord | null> {
  const found = await findParticipantInReach(db, actor, participantId);
  if (!found) return null;
  const [row] = await db.select().from(participant).where(eq(participant.id, participantId)).for('update');
  return row ?? null;
}

/** The asker's own row, locked against simultaneous change; null for whoever is no participant. */
export async function lockOwnParticipant(db: Db, participantId: string | null): Promise<ParticipantRecord | null> {
  if (participantId === null) return null;
  const [row] = await db.select().from(participant).where(eq(participant.id, participantId)).for('update');
  return row ?? null;
}

/** True when this caregiver account is linked to the participant and not removed. */
export async function findCaregiverLink(db: Db, accountId: string, participantId: string) {
  const [row] = await db
    .select()
    .from(caregiver)
    .where(
      and(eq(caregiver.accountId, accountId), eq(caregiver.participantId, participantId), isNull(caregiver.closedAt)),
    )
    .limit(1);
  return row ?? null;
}
