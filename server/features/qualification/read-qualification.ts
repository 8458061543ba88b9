// The last qualification run of each own site.

import { listLastQualifications } from '@/db/queries/qualification';
import { action } from '@/server/action';
import { readQualification as contract, runQualification } from '@/shared/contracts/qualification';

export const readQualification = action(contract, async ({ actor }, tx) => {
  return { runs: await listLastQualifications(tx.db, actor.siteIds, runQualification.name) };
});
