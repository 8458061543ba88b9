// Pre-checks: added, never changed. What an answer means is asked of shared/rules/precheck.ts.

import type { Db } from '@/db/client';
import { precheck } from '@/db/schema/session';

export type NewPrecheck = Omit<typeof precheck.$inferInsert, 'answers' | 'open' | 'findings'> & {
  answers: unknown;
  open: readonly string[];
  findings: readonly { readonly code: string; readonly outcome: string }[];
};

export async function insertPrecheck(db: Db, row: NewPrecheck): Promise<void> {
  await db.insert(precheck).values(row);
}
