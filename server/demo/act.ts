// Lets the demo's invented people act: through the real actions, with the real refusals, in the house's own transactions.
// Must not write a row of its own.

import { randomUUID } from 'node:crypto';
import { z } from 'zod';
import { findAccountByEmail, findActor } from '@/db/queries/account';
import type { AccountActor } from '@/server/action';
import type { House } from '@/server/house/open-house';
import type { AnyAction } from '@/server/transact';

export interface Wish {
  params?: unknown;
  query?: unknown;
  body?: unknown;
  file?: { bytes: Uint8Array; claimedType: string };
  key?: string;
}

/** The person behind an address, as signed in. */
export async function personOf({ transact }: House, email: string): Promise<AccountActor> {
  const account = await findAccountByEmail(transact.db, email);
  const found = account && (await findActor(transact.db, account.id));
  if (!found) throw new Error(`Nobody in the demo has the address ${email}.`);
  const { accountId, role, name, siteIds, participantId } = found;
  return { kind: 'account', accountId, role, name, email, language: 'en', siteIds, participantId };
}

/** A refusal that the demo did not reckon with: what was asked, and why it was refused. */
export class DemoRefused extends Error {
  constructor(
    action: string,
    readonly code: string,
    more: unknown,
  ) {
    super(`${action} was refused: ${code} ${JSON.stringify(more)}`);
  }
}

/**
 * Runs one action as somebody (null: nobody signed in) and reads what the demo needs of the answer.
 * @throws DemoRefused
 */
export async function act<T>(
  { transact }: House,
  action: AnyAction,
  actor: AccountActor | null,
  wish: Wish,
  shape: z.ZodType<T>,
): Promise<T> {
  const { contract } = action;
  const { answer, refusal } = await transact.run(action, {
    actor: actor ?? { kind: 'anyone' },
    params: contract.params?.parse(wish.params ?? {}),
    query: contract.query?.parse(wish.query ?? {}),
    body: contract.body?.parse(wish.body ?? {}),
    key: wish.key ?? null,
    file: wish.file ?? null,
    // The demo's people know their passwords.
    confirmedAt: contract.confirm ? await transact.now() : null,
    requestId: randomUUID(),
  });
  if (refusal) throw new DemoRefused(contract.name, refusal.code, refusal.fields ?? refusal.reasons ?? refusal.facts);
  return shape.parse(contract.answer.parse(answer));
}

export const Anything = z.unknown();
export const WithId = z.object({ id: z.string() });
