// What: `npm run screens`: a picture of every screen as every role sees it, 390 and 1440 wide, light and dark, with one page
// that shows them all (screens-out/index.html). `npm run screens -- clinician /worklist` takes some of them; `--at ADDRESS`
// takes them of a demo that is running already. Must not: check behaviour (tests/browser does), or touch the database of `npm start`.
import { mkdirSync, rmSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { buildServer, buildWeb } from './build.mjs';
import {
  checkNode,
  chromiumPath,
  installChromium,
  installPackages,
  isRoot,
  postgresFolder,
} from './ground/install.mjs';
import { root, workFolder } from './ground/paths.mjs';
import { startThrowAwayCluster } from './ground/postgres.mjs';
import { beforeEnd, end, freePort, main, Plainly } from './ground/processes.mjs';
import { launchServer, untilReady } from './ground/server.mjs';
import { contactSheet } from './screens/contact-sheet.mjs';
import { takeVisit } from './screens/take.mjs';
import { allVisits } from './screens/visits.mjs';

const say = console.log;
const output = path.join(root, 'screens-out');
const widths = [390, 1440];

async function startDemo() {
  await Promise.all([buildServer(say), buildWeb(say)]);
  const cluster = await startThrowAwayCluster(await postgresFolder(say));
  beforeEnd(cluster.stop);
  const data = path.join(workFolder, 'screens');
  rmSync(data, { recursive: true, force: true });
  const port = await freePort();
  const { ended } = launchServer({
    DATABASE_URL: cluster.databaseUrl,
    HOST: '127.0.0.1',
    PORT: String(port),
    DEMO: '1',
    DEMO_SEED: '1',
    RAMPWELL_DATA: data,
    NODE_ENV: 'production',
  });
  const address = `http://127.0.0.1:${port}`;
  await untilReady(address, ended);
  return address;
}

/** What stands after `--at`, and the words that say which screens are wanted. */
function readArguments() {
  const words = process.argv.slice(2);
  const at = words.indexOf('--at');
  if (at < 0) return { at: undefined, wanted: words };
  return { at: words[at + 1], wanted: words.filter((_, index) => index !== at && index !== at + 1) };
}

await main(async () => {
  checkNode();
  const { at, wanted } = readArguments();
  await installPackages(say);
  await installChromium(say);
  const address = at ?? (await startDemo());
  const { chromium } = await import('playwright-core');
  const browser = await chromium.launch({ executablePath: chromiumPath(), args: isRoot ? ['--no-sandbox'] : [] });
  beforeEnd(() => browser.close());

  const accounts = await (await fetch(`${address}/api/demo/accounts`)).json();
  const visits = (await allVisits(accounts)).filter((visit) =>
    wanted.every((word) => `${visit.role} ${visit.name}`.includes(word)),
  );
  if (visits.length === 0) throw new Plainly(`No screen is called ${wanted.join(' ')}.`);

  // Some are taken again while others stay.
  if (wanted.length === 0) rmSync(output, { recursive: true, force: true });
  mkdirSync(output, { recursive: true });
  const pictures = [];
  for (const visit of visits) {
    const before = pictures.length;
    for (const width of widths) pictures.push(...(await takeVisit({ browser, address, output }, visit, width)));
    say(`${visit.role.padEnd(14)} ${visit.name}${pictures.length === before ? '  (nothing to show)' : ''}`);
  }
  writeFileSync(path.join(output, 'index.html'), contactSheet(pictures));

  const faulty = pictures.filter((picture) => picture.faults.length > 0);
  for (const { file, faults } of faulty) say(`${file}: ${faults[0]}`);
  say(
    `${pictures.length} pictures, ${faulty.length} of them of a page with faults: ${path.join(output, 'index.html')}`,
  );
  await end(faulty.length > 0 ? 1 : 0);
});
