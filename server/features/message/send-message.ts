// Writes to the site, or to the person; a neutral mail says that there is something to read. A person's message also waits on the worklist
// until somebody has recorded that it was seen: a reply alone does not take it off.

import { countUnansweredMessages, insertMessage } from '@/db/queries/message';
import { readProtocolInForce } from '@/db/queries/protocol';
import type { ParticipantRecord } from '@/db/queries/reach';
import { openItem } from '@/db/queries/worklist';
import { action, isRefusal, notFound, type Tx } from '@/server/action';
import { findThread } from '@/server/features/message/find-thread';
import { viewMessage } from '@/server/features/message/view-message';
import { sendMessage as contract } from '@/shared/contracts/message';
import { afterQuietHours } from '@/shared/rules/quiet-hours';

export const sendMessage = action(contract, async ({ actor, body }, tx) => {
  const participant = await findThread(tx.db, actor, body.participantId);
  if (isRefusal(participant)) return participant;
  if (!participant) return notFound();
  const now = await tx.now();
  const { accountId, name } = actor;
  const message = { id: crypto.randomUUID(), accountId, fromSite: actor.role !== 'participant', text: body.text };
  await insertMessage(tx.db, { ...message, participantId: participant.id, createdAt: now });
  if (message.fromSite) tellPerson(tx, participant, message.id, now);
  else await tellSite(tx, participant, message.id, now);
  const { id, siteId } = participant;
  // The text stands in the thread, which is append-only; the trail says that it was written.
  tx.record({
    participantId: id,
    siteId,
    subject: { kind: 'message', id: message.id },
    after: { fromSite: message.fromSite },
  });
  return viewMessage({ ...message, at: now, name }, accountId);
});

/** Nobody is told who cannot sign in yet; the message is there when they can. */
function tellPerson(tx: Tx, participant: ParticipantRecord, messageId: string, now: string): void {
  if (participant.accountId === null) return;
  tx.tell({
    kind: 'message_waiting',
    toEmail: participant.email,
    language: participant.language,
    facts: { name: participant.name, path: '/messages' },
    key: `message_waiting:${messageId}`,
    dueAt: afterQuietHours(now, participant.zone),
  });
}

async function tellSite(tx: Tx, participant: ParticipantRecord, messageId: string, now: string): Promise<void> {
  const { id: participantId, siteId } = participant;
  await openItem(tx.db, {
    ...{ id: crypto.randomUUID(), siteId, participantId, level: 'look', why: 'message', matter: 'message' },
    ...{ facts: { count: await countUnansweredMessages(tx.db, participantId) }, openedAt: now },
  });
  const protocol = await readProtocolInForce(tx.db, siteId);
  const [contact] = protocol?.settings.contacts ?? [];
  if (!contact) return;
  tx.tell({
    kind: 'message_waiting',
    toEmail: contact.email,
    language: 'en',
    facts: { name: contact.name, path: `/participants/${participantId}/messages` },
    key: `message_waiting:${messageId}`,
  });
}
