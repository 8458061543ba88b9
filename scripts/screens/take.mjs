// What: goes to a screen as a person at a browser and takes its pictures: whole height, light and dark. Must not: know which
// screens there are (visits.mjs does).
import path from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';

const heights = { 390: 844, 1440: 900 };
const modes = ['light', 'dark'];
/** More of a list than this shows nothing new. Own choice. */
const mostHeight = 4_000;

const signedIn = new Map();

/** Signs in as a person does and keeps the cookies, so that each picture need not do it again. */
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

/** How long nothing may move before a page counts as settled. Own choice: longer than a busy machine takes to begin the next read. */
const quietMilliseconds = 700;

/** Requests that are on their way, for `settle`. */
function watchRequests(page) {
  const open = new Set();
  page.on('request', (request) => open.add(request));
  for (const event of ['requestfinished', 'requestfailed']) page.on(event, (request) => open.delete(request));
  return open;
}

/** Until everything that is on its way has come: no request, nothing that says it is busy, the same height. */
async function settle(page, open, isLoading) {
  await page.locator('h1').first().waitFor();
  await page.evaluate(() => document.fonts.ready);
  if (isLoading) return page.getByText('Loading').first().waitFor();
  const state = () =>
    page.evaluate(
      () => `${document.documentElement.scrollHeight} ${document.querySelectorAll('[aria-busy=true]').length}`,
    );
  let last = '';
  let since = performance.now();
  while (performance.now() - since < quietMilliseconds) {
    const now = await state();
    if (now !== last || !now.endsWith(' 0') || open.size > 0) since = performance.now();
    last = now;
    await pause(50);
  }
}

/** The window as high as the page first: a foot that stays in view would else cover the middle of the picture. */
async function shoot(page, width, mode, file) {
  await page.emulateMedia({ colorScheme: mode });
  const height = await page.evaluate(() => document.documentElement.scrollHeight);
  await page.setViewportSize({ width, height: Math.min(Math.max(height, heights[width]), mostHeight) });
  // Two frames: one to lay out, one to paint.
  await page.evaluate(() => new Promise((done) => requestAnimationFrame(() => requestAnimationFrame(done))));
  await page.screenshot({ path: file });
  await page.setViewportSize({ width, height: heights[width] });
}

/** All pictures of a visit at one width: one state in both modes, or each state that the visit's own steps stop at. */
export async function takeVisit({ browser, address, output }, visit, width) {
  const account = visit.accounts ? visit.accounts[width === 390 ? 0 : 1] : visit.account;
  if (visit.accounts && !account) return [];
  if (account && !signedIn.has(account.email)) signedIn.set(account.email, await signIn(browser, address, account));
  const context = await browser.newContext({
    baseURL: address,
    ...(account ? { storageState: signedIn.get(account.email) } : {}),
    viewport: { width, height: heights[width] },
    // Still pictures; and a worker that answers from its own store would hide what this build shows.
    reducedMotion: 'reduce',
    serviceWorkers: 'block',
    timezoneId: 'Europe/London',
    locale: 'en-GB',
  });
  context.setDefaultTimeout(60_000);
  const page = await context.newPage();
  const open = watchRequests(page);
  const faults = [];
  page.on('pageerror', (error) => faults.push(String(error)));
  page.on('console', (message) => {
    if (message.type() === 'error' && !message.text().startsWith('Failed to load resource'))
      faults.push(message.text());
  });
  page.on('response', (answer) => answer.status() >= 500 && faults.push(`${answer.status()} ${answer.url()}`));

  const pictures = [];
  const shot = async (moment = '', { isLoading = false } = {}) => {
    await settle(page, open, isLoading);
    const name = [visit.name, moment].filter(Boolean).join(' · ');
    for (const mode of modes) {
      const file = `${[visit.role, name, width, mode].join('--').replace(/[^\w-]+/g, '_')}.png`;
      await shoot(page, width, mode, path.join(output, file));
      pictures.push({ role: visit.role, name, width, mode, file, faults: [...faults] });
    }
  };
  try {
    const place = typeof visit.path === 'function' ? await visit.path(page) : visit.path;
    if (place === undefined) return [];
    await visit.before?.(page);
    await page.goto(place);
    if (visit.steps) await visit.steps({ page, shot, width, browser, address, account });
    else await shot('', { isLoading: visit.isLoading });
  } catch (error) {
    faults.push(String(error.message ?? error));
    await shot('broken off').catch(() => undefined);
  } finally {
    await context.close();
  }
  return pictures;
}
