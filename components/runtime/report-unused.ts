// Tells the server that a permit which is over was never begun on, if this phone has the stimulator that would know. It decides nothing: the
// server frees the dose by the stimulator's record alone.

import { readPermit, sendEvents } from '@/shared/contracts/permit';
import { readSession } from '@/shared/contracts/session';
import { callDoor } from './api';

/** True when the server has it and the session is closed by it. */
export async function reportUnused(accountId: string, sessionId: string): Promise<boolean> {
  const session = await callDoor(readSession, { params: { sessionId } });
  if (session.startedAt !== null || session.permitState === 'live') return false;
  const permit = await callDoor(readPermit, { params: { permitId: session.permitId } });
  // Loaded only where there is something to tell.
  const { sessionRunOf } = await import('./session-run');
  const event = await sessionRunOf(accountId).unusedEvent(permit);
  if (event === null) return false;
  const answer = await callDoor(sendEvents, { params: { permitId: permit.id }, body: { events: [event] } });
  return answer.sessionState === 'void';
}
