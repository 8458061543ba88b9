// The demo's mail server: takes every mail on loopback, shows it at /demo/mail, passes none on. Only with DEMO=1.

import { randomUUID } from 'node:crypto';
import { simpleParser, type AddressObject } from 'mailparser';
import { SMTPServer } from 'smtp-server';
import type { Client } from '@/db/client';
import { insertDemoMail } from '@/db/queries/house';
import { houseNow } from '@/server/clock';

export interface Catcher {
  url: string;
  close(): Promise<void>;
}

export async function startCatcher(client: Client): Promise<Catcher> {
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['AUTH', 'STARTTLS'],
    // Looking up the name of 127.0.0.1 takes seconds on a machine without a network.
    disableReverseLookup: true,
    onData(stream, _session, done) {
      simpleParser(stream)
        .then(async (mail) => {
          await insertDemoMail(client.db, {
            id: randomUUID(),
            toEmail: addressesOf(mail.to),
            subject: mail.subject ?? '',
            text: mail.text ?? '',
            html: mail.html || '',
            sentAt: await houseNow(client.db, true),
          });
          done();
        })
        .catch(done);
    },
  });
  const port = await new Promise<number>((resolve, reject) => {
    server.once('error', reject);
    const listener = server.listen(0, '127.0.0.1', () => {
      const address = listener.address();
      if (address && typeof address === 'object') resolve(address.port);
      else reject(new Error('The mail catcher has no port.'));
    });
  });
  return { url: `smtp://127.0.0.1:${port}`, close: () => new Promise((resolve) => server.close(resolve)) };
}

function addressesOf(to: AddressObject | AddressObject[] | undefined): string {
  const all = to === undefined ? [] : Array.isArray(to) ? to : [to];
  return all.flatMap(({ value }) => value.map(({ address }) => address ?? '')).join(', ');
}
