// A new key for permits. The ones before it stay trusted until the permits under them are over, or are withdrawn at once where one may have
// been seen by others. For `npm run keys:rotate`; opens no port.

import { closeOtherSigningKeys, listSigningKeys, lockSigningKeys, type SigningKeyRecord } from '@/db/queries/permit';
import type { Tx } from '@/server/action';
import { makeSigningKey } from '@/server/signing-key';
import type { Transact } from '@/server/transact';
import { keyInUse } from '@/shared/rules/permit-keys';

export interface Rotated {
  kid: string;
  withdrawn: readonly string[];
}

/** Sealed under another secret than the server's, the new key would sign nothing: every permit would fail. */
export class OtherSecret extends Error {}

function checkSecret(tx: Tx, inUse: SigningKeyRecord | undefined): void {
  if (inUse === undefined) return;
  try {
    tx.vault.open(inUse.sealedPrivate);
  } catch {
    throw new OtherSecret('the key in use was sealed under another secret');
  }
}

async function rotate(tx: Tx, isWithdrawing: boolean): Promise<Rotated> {
  await lockSigningKeys(tx.db);
  checkSecret(tx, keyInUse(await listSigningKeys(tx.db)));
  const { kid, createdAt } = await makeSigningKey(tx);
  const withdrawn = isWithdrawing ? await closeOtherSigningKeys(tx.db, kid, createdAt) : [];
  tx.record({ subject: { kind: 'signing_key', id: kid }, after: { kid, withdrawn } });
  return { kid, withdrawn };
}

export async function rotateKeys(transact: Transact, { withdraw }: { withdraw: boolean }): Promise<Rotated> {
  let rotated: Rotated = { kid: '', withdrawn: [] };
  await transact.note({ kind: 'system', job: 'keys.rotate' }, 'keys.rotate', null, async (tx) => {
    rotated = await rotate(tx, withdraw);
  });
  return rotated;
}
