// The public keys that permits are signed with, for setting up a stimulator. Nobody's record.

import { listSigningKeys } from '@/db/queries/permit';
import { action } from '@/server/action';
import { ensureSigningKey } from '@/server/signing-key';
import { readPermitKeys as contract } from '@/shared/contracts/permit';
import { trustedKeys } from '@/shared/rules/permit-keys';

export const readPermitKeys = action(contract, async (_input, tx) => {
  await ensureSigningKey(tx);
  const keys = trustedKeys(await listSigningKeys(tx.db), await tx.now());
  return {
    keys: keys.map(
      ({ kid, publicX }) => ({ kty: 'OKP', crv: 'Ed25519', x: publicX, kid, alg: 'EdDSA', use: 'sig' }) as const,
    ),
  };
});
