// Messages between a participant and the site.

import { z } from 'zod';
import { Instant, Paragraph, Uuid, pageOf, pageQuery } from '@/shared/values/primitives';
import { contract } from './contract';

export const MessageView = z.strictObject({
  id: Uuid,
  at: Instant,
  from: z.strictObject({ name: z.string(), isSite: z.boolean(), isMe: z.boolean() }),
  text: z.string(),
});
export type MessageView = z.infer<typeof MessageView>;

export const listMessages = contract({
  name: 'message.list',
  method: 'GET',
  path: '/api/messages',
  who: ['participant', 'coordinator', 'clinician'],
  reach: 'own-or-site',
  query: z.strictObject({ ...pageQuery, participantId: Uuid.optional() }),
  answer: pageOf(MessageView),
  about: 'The thread with the site, newest first. Staff name `participantId`.',
});

export const sendMessage = contract({
  name: 'message.send',
  method: 'POST',
  path: '/api/messages',
  who: ['participant', 'coordinator', 'clinician'],
  reach: 'own-or-site',
  once: true,
  body: z.strictObject({ participantId: Uuid.optional(), text: Paragraph }),
  answer: MessageView,
  status: 201,
  touches: ['message', 'participant', 'worklist'],
  about: 'Writes to the site, or to the participant; a neutral mail says that there is a message.',
  example: { body: { text: 'May I have my session in the evening tomorrow?' } },
});
