// Which caregiver of a participant a code belongs to. Tries are limited at the door; a wrong code changes nothing.

import type { Db } from '@/db/client';
import { listHelperCodes } from '@/db/queries/caregiver';
import { verifyCode } from '@/server/caregiver-code';

export async function findHelper(
  db: Db,
  participantId: string,
  code: string,
): Promise<{ accountId: string } | 'wrong'> {
  for (const helper of await listHelperCodes(db, participantId)) {
    if (await verifyCode(code, helper.codeHash)) return { accountId: helper.accountId };
  }
  return 'wrong';
}
