// What: `npm run keys:rotate`. Makes a new key for permits; the old ones are trusted until the permits under them are over.
// `npm run keys:rotate -- --withdraw` trusts the old ones no longer, at once: for a key that others may have seen. Works on DATABASE_URL or
// on this checkout's own database, beside a server that runs on it. Must not: show a private key.
import { parseArgs } from 'node:util';
import { borrow } from './ground/borrow.mjs';
import { reachDatabase } from './ground/database.mjs';
import { checkNode, installPackages } from './ground/install.mjs';
import { workFolder } from './ground/paths.mjs';
import { end, main, Plainly } from './ground/processes.mjs';

function options() {
  try {
    return parseArgs({ options: { withdraw: { type: 'boolean', default: false } } }).values;
  } catch {
    throw new Plainly('npm run keys:rotate takes no option but --withdraw.');
  }
}

await main(async () => {
  checkNode();
  await installPackages(console.error);
  const values = options();
  process.env.DATABASE_URL = await reachDatabase(console.error);
  process.env.RAMPWELL_DATA ||= workFolder;
  process.env.LOG_LEVEL ||= 'error';
  const { createHouse, readEnv, rotateKeys, OtherSecret } = await borrow(
    'server/env',
    'server/house/open-house',
    'server/house/rotate-keys',
  );
  const house = createHouse(readEnv());
  try {
    const { kid, withdrawn } = await rotateKeys(house.transact, values);
    console.log(`Permits are signed with key ${kid} from now on.`);
    console.log(
      values.withdraw
        ? `Withdrawn: ${withdrawn.join(', ') || 'none'}. Permits under them start nothing on a stimulator that is set up from now on.`
        : 'Keys before it are trusted until the permits under them are over.',
    );
  } catch (error) {
    if (!(error instanceof OtherSecret)) throw error;
    throw new Plainly(
      'This is not the secret that the server runs with: set SECRET or RAMPWELL_DATA as it has them. No key was made.',
    );
  } finally {
    await house.close();
  }
  await end(0);
});
