// What: somebody at a browser: a phone in light mode or a wide window in dark mode, a scan with axe on each screen they come to, and
// a list of what the browser complained of. Must not: know a screen; the walks name what a person sees.
import AxeBuilder from '@axe-core/playwright';
import type { APIResponse, Browser, Page } from 'playwright-core';

const looks = {
  phone: { viewport: { width: 390, height: 844 }, colorScheme: 'light' },
  wide: { viewport: { width: 1440, height: 900 }, colorScheme: 'dark' },
} as const;
const patienceMilliseconds = 90_000;
export type Look = keyof typeof looks;

export interface Walker {
  page: Page;
  /** What the browser reported as broken: exceptions, errors on its console, answers of 500 and above. */
  faults: string[];
  /** Waits until the page with this heading stands and has nothing left to load, then scans it. */
  see(heading: string | RegExp): Promise<void>;
  /** Opens an address and waits for the page as `see` does. */
  visit(place: string, heading: string | RegExp): Promise<void>;
  press(name: string | RegExp): Promise<void>;
  follow(name: string | RegExp): Promise<void>;
  fill(label: string | RegExp, text: string): Promise<void>;
  tick(name: string | RegExp): Promise<void>;
  choose(question: string | RegExp, answer: string | RegExp): Promise<void>;
  /** Calls a door as this person, with the cookies of their browser. */
  post(path: string, body: unknown, headers?: Record<string, string>): Promise<APIResponse>;
  get(path: string): Promise<APIResponse>;
  leave(): Promise<void>;
}

/** As people find things: by the whole words that name them. */
function whole(name: string | RegExp) {
  return { name, ...(typeof name === 'string' ? { exact: true } : {}) };
}

async function scan(page: Page): Promise<void> {
  // Our pages hold no frames, so axe need not open a page of its own to put the parts together.
  const { violations } = await new AxeBuilder({ page }).setLegacyMode(true).analyze();
  const said = violations.flatMap(({ id, help, nodes }) =>
    nodes.map(({ html, any }) => `${id}: ${help}\n    ${html.slice(0, 200)}\n    ${any[0]?.message ?? ''}`),
  );
  if (said.length > 0) throw new Error(`axe on ${page.url()}:\n  ${said.join('\n  ')}`);
}

export async function come(browser: Browser, baseURL: string, look: Look): Promise<Walker> {
  const context = await browser.newContext({
    ...looks[look],
    baseURL,
    locale: 'en-GB',
    timezoneId: 'Europe/London',
    // Nothing moves, so nothing is scanned halfway.
    reducedMotion: 'reduce',
  });
  // A busy machine is slow, not broken; what never comes is still told.
  context.setDefaultTimeout(patienceMilliseconds);
  const page = await context.newPage();
  const scanned = new Set<string>();
  const faults: string[] = [];
  page.on('pageerror', (error) => faults.push(`${page.url()}: ${String(error)}`));
  page.on('console', (message) => {
    // The browser itself reports each refused request; refusals are answers, and the walks look at them.
    if (message.type() === 'error' && !message.text().startsWith('Failed to load resource'))
      faults.push(`${page.url()}: ${message.text()}`);
  });
  page.on('response', (answer) => {
    if (answer.status() >= 500) faults.push(`${answer.status()} ${answer.url()}`);
  });

  const walker: Walker = {
    page,
    faults,
    async see(heading) {
      await page.getByRole('heading', { level: 1, ...whole(heading) }).waitFor();
      await page.locator('[aria-busy=true]').first().waitFor({ state: 'hidden' });
      // The same screen in the same state need not be scanned again.
      const state = `${new URL(page.url()).pathname} ${await page.locator('h1').innerText()}`;
      if (scanned.has(state)) return;
      scanned.add(state);
      await scan(page);
    },
    async visit(place, heading) {
      await page.goto(place);
      await walker.see(heading);
    },
    press: (name) => page.getByRole('button', whole(name)).click(),
    follow: (name) => page.getByRole('link', whole(name)).first().click(),
    fill: (label, text) => page.getByLabel(label, { exact: typeof label === 'string' }).fill(text),
    tick: (name) => page.getByRole('checkbox', whole(name)).click(),
    choose: (question, answer) =>
      page.getByRole('radiogroup', whole(question)).getByRole('radio', whole(answer)).click(),
    post: (path, body, headers = {}) =>
      page.request.post(path, { data: body, headers: { origin: baseURL, ...headers } }),
    get: (path) => page.request.get(path),
    leave: () => context.close(),
  };
  return walker;
}

/** On failure tells what stood on each page, so that the end of a long story can be understood without seeing it. */
export async function story(walkers: () => readonly Walker[], work: () => Promise<void>): Promise<void> {
  try {
    await work();
  } catch (error) {
    const pages = await Promise.all(
      walkers().map(async ({ page, faults }) => {
        const text = await page
          .locator('body')
          .ariaSnapshot({ timeout: 2_000 })
          .catch(() => 'nothing');
        return `On ${page.url()}:\n${text}\n${faults.join('\n')}`;
      }),
    );
    throw new Error(pages.join('\n\n'), { cause: error });
  }
}
