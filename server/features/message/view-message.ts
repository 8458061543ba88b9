// A message as either side sees it.

import type { MessageRecord } from '@/db/queries/message';
import type { MessageView } from '@/shared/contracts/message';

export function viewMessage(message: MessageRecord, readerId: string): MessageView {
  const { id, at, text, name, fromSite, accountId } = message;
  return { id, at, text, from: { name, isSite: fromSite, isMe: accountId === readerId } };
}
