// Moves the demo's clock forward and answers once what came due has run. Only with DEMO=1.

import { lockName } from '@/db/queries/house';
import { action, refuse } from '@/server/action';
import { moveDemoClock as contract } from '@/shared/contracts/house';

export const moveDemoClock = action(contract, async ({ body }, tx) => {
  if (!tx.moveClock) return refuse('demo.no_clock');
  // Two who move it at once follow each other, so that each sees what came due in its own stretch.
  await lockName(tx.db, 'demo-clock');
  return tx.moveClock(body.advanceSeconds);
});
