// Invitations of the demo: the link is read where it waits to be mailed, as the person would read it in the mail.

import { z } from 'zod';
import { findOutboxFacts } from '@/db/queries/house';
import { acceptInvitation } from '@/server/features/account/accept-invitation';
import type { House } from '@/server/house/open-house';
import { act, Anything } from '@/server/demo/act';
import { demoPassword } from '@/server/demo/demo-password';

const Facts = z.object({ path: z.string() });

/** The newest link that waits for an address. */
async function tokenFor({ transact }: House, email: string): Promise<string> {
  const { path } = Facts.parse(await findOutboxFacts(transact.db, email));
  return new URLSearchParams(path.split('#')[1]).get('token') ?? '';
}

/** Accepts the invitation that was mailed to an address. */
export async function accept(house: House, email: string, name: string): Promise<void> {
  const body = { token: await tokenFor(house, email), name, password: demoPassword };
  await act(house, acceptInvitation, null, { body }, Anything);
}
