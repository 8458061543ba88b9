// What: `npm run check:invariants`. What must be true at every moment, I1 to I12, on DATABASE_URL or on this checkout's own database: one
// line an invariant, with how much was looked at. Ends with 1 when one is broken, and names what breaks it. Must not: change anything.
import { borrow } from './ground/borrow.mjs';
import { reachDatabase } from './ground/database.mjs';
import { installPackages } from './ground/install.mjs';
import { end, main } from './ground/processes.mjs';

const say = console.log;

await main(async () => {
  await installPackages(say);
  const databaseUrl = await reachDatabase(say);
  const house = await borrow('db/client', 'db/queries/clock', 'server/house/check-invariants');
  const client = house.connect(databaseUrl, 3, (error) => say(error.message));
  let broken = 0;
  try {
    // The demo's row is there only where the demo was filled.
    const now = await house.readClock(client.db, true);
    for (const { id, what, checked, broken: which } of await house.checkInvariants(client.db, now)) {
      say(`${id.padEnd(4)}${which.length === 0 ? 'holds ' : 'BROKEN'} ${String(checked).padStart(7)} checked  ${what}`);
      for (const one of which) say(`      ${one}`);
      broken += which.length === 0 ? 0 : 1;
    }
  } finally {
    await client.close();
  }
  return end(broken === 0 ? 0 : 1);
});
