// Moves the demo's clock forward and answers once what came due has run. Only with DEMO=1.

import { lockName } from '@/db/queries/house';
import { action } from '@/server/action';
import { moveDemoClock as contract } from '@/shared/contracts/house';

export const moveDemoClock = action(contract, async ({ body }, tx) => {
  // The door is mounted with DEMO=1 only, and then there is a clock to move.
  if (!tx.moveClock) throw new Error('The clock of this house does not move.');
  // Two who move it at once follow each other, so that each sees what came due in its own stretch.
  await lockName(tx.db, 'demo-clock');
  return tx.moveClock(body.advanceSeconds);
});
