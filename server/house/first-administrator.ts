// Who comes first: on a server without accounts, the address in FIRST_ADMINISTRATOR gets an administrator's account. Its password is
// random and told to nobody; "forgot my password" on the sign-in page mails the link to choose one.

import { randomBytes, randomUUID } from 'node:crypto';
import { countAccounts, insertAccount } from '@/db/queries/account';
import { lockName } from '@/db/queries/house';
import { hashSecret } from '@/server/password';
import type { Transact } from '@/server/transact';

const passwordBytes = 32;

export async function firstAdministrator(
  transact: Transact,
  email: string,
  given: { name?: string; password?: string } = {},
): Promise<string | null> {
  const passwordHash = await hashSecret(given.password ?? randomBytes(passwordBytes).toString('base64url'));
  let made: string | null = null;
  const actor = { kind: 'system', job: 'house.first-administrator' } as const;
  await transact.note(actor, actor.job, null, async (tx) => {
    await lockName(tx.db, actor.job);
    if ((await countAccounts(tx.db)) > 0) return;
    const name = given.name ?? email.split('@')[0] ?? email;
    const ids = { id: randomUUID(), credentialId: randomUUID() };
    const account = {
      role: 'administrator',
      name,
      email,
      passwordHash,
      language: 'en',
      createdAt: await tx.now(),
    } as const;
    if (!(await insertAccount(tx.db, { ...ids, ...account }))) return;
    tx.record({ subject: { kind: 'account', id: ids.id }, after: { role: 'administrator' } });
    made = ids.id;
  });
  return made;
}
