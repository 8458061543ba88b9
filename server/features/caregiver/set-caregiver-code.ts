// The caregiver's own six digits, typed on the person's phone at an assisted session. The newest counts; only its hash is kept.

import { insertCaregiverCode } from '@/db/queries/caregiver';
import { listSiteIdsOfCaregiver } from '@/db/queries/account';
import { action } from '@/server/action';
import { hashCode } from '@/server/caregiver-code';
import { setCaregiverCode as contract } from '@/shared/contracts/caregiver';

export const setCaregiverCode = action(contract, async ({ actor, body }, tx) => {
  const { accountId } = actor;
  const id = crypto.randomUUID();
  await insertCaregiverCode(tx.db, { id, accountId, codeHash: await hashCode(body.code), createdAt: await tx.now() });
  // In the chain of each site that this caregiver helps at: who may stand beside a session has changed there.
  for (const siteId of await listSiteIdsOfCaregiver(tx.db, accountId)) {
    tx.record({ siteId, subject: { kind: 'caregiver_code', id }, after: { accountId } });
  }
  return { set: true as const };
});
