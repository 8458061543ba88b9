// What: `npm run screens`: a picture of every screen as every role sees it, 390 and 1440 wide, light and dark, with one page
// that shows them all (screens-out/index.html). `npm run screens -- clinician /worklist` takes some of them.
// Must not: check behaviour (tests/browser does), or touch the database of `npm start`.
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
import { allVisits } from './screens/visits.mjs';

const say = console.log;
const output = path.join(root, 'screens-out');
const looks = [390, 1440].flatMap((width) =>
  ['light', 'dark'].map((mode) => ({ width, height: width === 390 ? 844 : 900, mode })),
);

async function startDemo() {
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

/** Signs in as a person does and keeps the cookies, so that each of the four looks need not do it again. */
async function signIn(browser, address, { email, password }) {
  const context = await browser.newContext({ baseURL: address, serviceWorkers: 'block' });
  const page = await context.newPage();
  await page.goto('/sign-in');
  await page.getByLabel('E-mail address').fill(email);
  await page.getByLabel('Password', { exact: true }).fill(password);
  await page.getByRole('button', { name: 'Sign in', exact: true }).click();
  await page.waitForURL((url) => url.pathname !== '/sign-in');
  const kept = await context.storageState();
  await context.close();
  return kept;
}

async function settle(page) {
  await page.waitForLoadState('networkidle');
  await page.evaluate(() => document.fonts.ready);
  await page
    .locator('[aria-busy=true], [role=progressbar]:not([aria-valuenow])')
    .first()
    .waitFor({ state: 'hidden', timeout: 5_000 })
    .catch(() => undefined);
}

async function take(browser, address, visit, storageState, look) {
  const { width, height, mode } = look;
  const context = await browser.newContext({
    baseURL: address,
    ...(storageState ? { storageState } : {}),
    viewport: { width, height },
    colorScheme: mode,
    // Still pictures; and a worker that answers from its own store would hide what this build shows.
    reducedMotion: 'reduce',
    serviceWorkers: 'block',
    timezoneId: 'Europe/London',
    locale: 'en-GB',
  });
  const page = await context.newPage();
  const faults = [];
  page.on('pageerror', (error) => faults.push(String(error)));
  page.on('console', (message) => message.type() === 'error' && faults.push(message.text()));
  page.on('response', (answer) => answer.status() >= 500 && faults.push(`${answer.status()} ${answer.url()}`));
  const name = [visit.role, visit.name, width, mode].join('--').replace(/[^\w-]+/g, '_');
  const file = `${name}.png`;
  try {
    const place = typeof visit.path === 'function' ? await visit.path(page) : visit.path;
    if (place === undefined) return undefined;
    await page.goto(place);
    await settle(page);
    await visit.act?.(page);
    await settle(page);
    await page.screenshot({ path: path.join(output, file) });
  } catch (error) {
    faults.push(String(error.message ?? error));
    await page.screenshot({ path: path.join(output, file) }).catch(() => undefined);
  } finally {
    await context.close();
  }
  return { ...visit, ...look, file, faults };
}

await main(async () => {
  checkNode();
  await installPackages(say);
  await installChromium(say);
  await Promise.all([buildServer(say), buildWeb(say)]);
  const address = await startDemo();
  const { chromium } = await import('playwright-core');
  const browser = await chromium.launch({ executablePath: chromiumPath(), args: isRoot ? ['--no-sandbox'] : [] });
  beforeEnd(() => browser.close());

  const accounts = await (await fetch(`${address}/api/demo/accounts`)).json();
  const wanted = process.argv.slice(2);
  const visits = (await allVisits(accounts)).filter((visit) =>
    wanted.every((word) => `${visit.role} ${visit.name}`.includes(word)),
  );
  if (visits.length === 0) throw new Plainly(`No screen is called ${wanted.join(' ')}.`);

  rmSync(output, { recursive: true, force: true });
  mkdirSync(output, { recursive: true });
  const signedIn = new Map();
  const pictures = [];
  for (const visit of visits) {
    const { account } = visit;
    if (account && !signedIn.has(account.email)) signedIn.set(account.email, await signIn(browser, address, account));
    const taken = await Promise.all(
      looks.map((look) => take(browser, address, visit, account && signedIn.get(account.email), look)),
    );
    pictures.push(...taken.filter(Boolean));
    say(`${visit.role.padEnd(14)} ${visit.name}${taken.some((one) => one === undefined) ? '  (nothing to show)' : ''}`);
  }
  writeFileSync(path.join(output, 'index.html'), contactSheet(pictures));

  const faulty = pictures.filter((picture) => picture.faults.length > 0);
  for (const { file, faults } of faulty) say(`${file}: ${faults[0]}`);
  say(
    `${pictures.length} pictures, ${faulty.length} of them of a page with faults: ${path.join(output, 'index.html')}`,
  );
  await end(faulty.length > 0 ? 1 : 0);
});
