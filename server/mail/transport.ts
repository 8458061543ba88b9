// The way to a mail server. Sends what it is given; keeps nothing and decides nothing.

import { createHash } from 'node:crypto';
import { createTransport } from 'nodemailer';
import type { Mail } from './render-mail';

export interface Transport {
  send(to: string, mail: Mail, key: string): Promise<void>;
  close(): void;
}

/** Until a mail server counts as silent (own choice). */
const silenceMilliseconds = 10_000;
const connectionsMost = 3;

/** @param from sender; its domain also stands in the Message-ID */
export function makeTransport(smtpUrl: string, from: string): Transport {
  const transporter = createTransport({
    url: smtpUrl,
    pool: true,
    maxConnections: connectionsMost,
    connectionTimeout: silenceMilliseconds,
    greetingTimeout: silenceMilliseconds,
    socketTimeout: silenceMilliseconds,
  });
  const domain = /@([^>\s]+)/.exec(from)?.[1] ?? 'localhost';
  return {
    async send(to, { subject, text, html }, key) {
      // The same row always gets the same Message-ID: who receives a mail twice after a crash sees that it is one.
      const messageId = `<${createHash('sha256').update(key).digest('hex')}@${domain}>`;
      await transporter.sendMail({
        from,
        to,
        subject,
        text,
        html,
        messageId,
        headers: { 'Auto-Submitted': 'auto-generated' },
      });
    },
    close: () => transporter.close(),
  };
}
