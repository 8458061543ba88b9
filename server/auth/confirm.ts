// "Type your password again": what makes a press of a button a signature. Answers yes or no and writes nothing.

import type { Db } from '@/db/client';
import { findPasswordHash } from '@/db/queries/account';
import { matchesHash } from '@/server/password';

export async function passwordMatches(db: Db, accountId: string, password: string): Promise<boolean> {
  const hash = await findPasswordHash(db, accountId);
  return hash !== null && (await matchesHash(password, hash));
}
