// Is the house well: the database answers (or this would not run), and some process ran jobs within the last minutes.

import { hasBeaten } from '@/db/queries/house';
import { action } from '@/server/action';
import { version } from '@/package.json';
import { readHealth as contract } from '@/shared/contracts/house';

/** Jobs run at least once a minute; three missed in a row are no chance (own choice). */
export const longestSilenceSeconds = 180;

export const readHealth = action(contract, async (_input, tx) => {
  const jobs = await hasBeaten(tx.db, longestSilenceSeconds);
  return { status: jobs ? ('ok' as const) : ('failing' as const), database: true, jobs, version };
});
