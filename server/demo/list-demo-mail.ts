// The demo's mailbox. Only with DEMO=1.

import { listDemoMails } from '@/db/queries/house';
import { action } from '@/server/action';
import { listDemoMail as contract } from '@/shared/contracts/house';

export const listDemoMail = action(contract, async ({ query }, tx) => {
  const mails = await listDemoMails(tx.db, query.to, query.limit);
  return mails.map(({ id, toEmail, subject, text, html, sentAt }) => ({
    id,
    to: toEmail,
    subject,
    text,
    html,
    sentAt,
  }));
});
