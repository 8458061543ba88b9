// What: what an address alone does not show: states of a person, answers given, dialogs, a session while it runs, what stands
// there when the network is gone. Each goes its way as a person would and takes a picture where `shot` is called.
// Must not: check what is right (tests/browser does).

const states = ['training', 'ready', 'too_early', 'held', 'paused', 'finished', 'withdrawn'];

const press = (page, name) => page.getByRole('button', { name, exact: typeof name === 'string' }).click();
const choose = (page, name) =>
  page
    .getByRole('radio', { name, exact: typeof name === 'string' })
    .first()
    .click();
const heading = (page, name) =>
  page.getByRole('heading', { level: 1, name, exact: typeof name === 'string' }).waitFor();

async function precheck({ page, shot }) {
  await heading(page, 'Since your last session, did any of these happen?');
  await shot('1');
  await press(page, 'None of these');
  await choose(page, 'No');
  await heading(page, 'How is the skin where the sponges sit?');
  await shot('3');
  await choose(page, 'Red or sore');
  await shot('3, hold');
  await choose(page, 'As always');
  await heading(page, 'How is your mood today?');
  await page.getByRole('checkbox', { name: 'Thoughts of harming myself' }).click();
  await shot('4, emergency');
  await page.getByRole('checkbox', { name: 'None of these' }).click();
  await press(page, 'Next');
  await heading(page, 'How strong is your headache right now?');
  await choose(page, '4');
  await shot('5, caution');
  await press(page, 'Next');
  await page.getByLabel('How many hours did you sleep last night?').fill('7');
  await shot('6');
  await press(page, 'Next');
  await heading(page, 'Did you drink alcohol in the last 24 hours?');
  await shot('7');
  await press(page, 'No alcohol');
  await heading(page, 'Drugs or new medicines?');
  await shot('8');
  await press(page, 'No drugs, no new medicine');
  await heading(page, 'Do you feel ill or have a fever?');
  await choose(page, 'No');
  await press(page, 'Next');
  await heading(page, /^Are you sitting down/);
  await shot('10');
  await choose(page, 'Yes');
  await heading(page, 'You can go on, with care');
  await shot('outcome');
}

const wellToday = {
  ...{ seizure: 'no', faint: 'no', headInjury: 'no', implantOrMetal: false, skin: 'ok', mood: [], headache: 0 },
  ...{ sleptHours: 7, drinksLast12h: 0, drinks12To24h: 0, feelsAlcohol: false, drugs24h: false, newMedicine: 'none' },
  ...{ unwell: false, ready: true },
};

/** The check before a session, answered as somebody who is well. */
async function checkedToday(page) {
  await page.evaluate(async (answers) => {
    await fetch('/api/prechecks', {
      method: 'POST',
      headers: { 'content-type': 'application/json' },
      body: JSON.stringify({ answers }),
    });
  }, wellToday);
}

/** Waits until every pad has good contact; one that sits badly is wetted and pressed once. */
async function goodContact(page) {
  const start = page.getByRole('button', { name: 'Start', exact: true });
  const wetted = page.getByRole('button', { name: /^I have wetted and pressed it/ });
  await start.or(wetted).first().waitFor();
  for (const button of await wetted.all()) await button.click();
  await start.waitFor();
}

async function wholeSession({ page, shot }) {
  await checkedToday(page);
  await page.goto('/today');
  await heading(page, 'You can start your session now');
  await shot('today, checked');
  await press(page, 'Go on to the set-up');
  await heading(page, 'Switch the stimulator on');
  await shot('set-up 1');
  await press(page, 'Find the stimulator');
  await page.getByText('Found', { exact: true }).waitFor();
  await shot('set-up 1, found');
  await press(page, 'Next: the pads');
  await shot('set-up 2, from above');
  await press(page, 'Show it as in a mirror');
  for (const step of await page.getByRole('checkbox').all()) await step.click();
  await shot('set-up 2, as in a mirror');
  await press(page, 'Next: contact');
  await heading(page, 'Check the contact');
  await shot('set-up 3, settling');
  await goodContact(page);
  await shot('set-up 3, good');
  await press(page, 'Start');
  await heading(page, /minutes left$/);
  await shot('run, rising');
  await press(page, '60× faster time');
  await page.getByText(/^Holding at/).waitFor();
  await heading(page, '12 minutes left');
  await press(page, '1× faster time');
  await press(page, 'Something feels wrong');
  await shot('run, something feels wrong');
  await press(page, 'Tingling');
  await shot('run, how strong');
  await choose(page, '3');
  await page.getByText('Noted: Tingling, 3 of 10.').waitFor();
  await press(page, 'Pause');
  await heading(page, 'Paused');
  await shot('run, paused');
  await press(page, 'Go on');
  await page.getByText(/^Holding at/).waitFor();
  await page.context().setOffline(true);
  await shot('run, no network');
  await page.context().setOffline(false);
  await press(page, 'Lift a pad');
  await heading(page, /lost contact$/);
  await shot('run, a pad is off');
  await press(page, /^I have wetted and pressed it/);
  await page.getByText(/^(Rising|Holding)/).waitFor();
  await press(page, '60× faster time');
  await heading(page, 'The session is over');
  await shot('run, over');
  await press(page, 'Go on to the diary');
  await heading(page, 'Did you feel any of these?');
  await page.getByRole('checkbox', { name: 'Tingling' }).click();
  await choose(page, '3');
  await choose(page, 'Gone');
  await shot('diary 1');
  await press(page, 'Next');
  await choose(page, '0: none');
  await shot('diary 2');
  await press(page, 'Next');
  await choose(page, 'Pink, fades when pressed');
  await shot('diary 3');
  await press(page, 'Next');
  await page.getByRole('checkbox', { name: 'A burn or blister' }).click();
  await shot('diary 4, a burn');
  await page.getByRole('checkbox', { name: 'None of these' }).click();
  await press(page, 'Send to the clinic');
  await heading(page, 'Recorded');
  await shot('receipt');
}

async function stopped({ page, shot }) {
  await checkedToday(page);
  await page.goto('/set-up');
  await press(page, 'Find the stimulator');
  await press(page, 'Next: the pads');
  for (const step of await page.getByRole('checkbox').all()) await step.click();
  await press(page, 'Next: contact');
  await goodContact(page);
  await press(page, 'Start');
  await press(page, '60× faster time');
  await page.getByText(/^Holding at/).waitFor();
  await press(page, 'Something feels wrong');
  await press(page, 'Chest pain');
  await shot('advice');
  await heading(page, 'The session has ended early');
  await shot('ended early');
}

/** Amends a prescription up to the signature, which is not given. */
async function amendment({ page, shot }) {
  await heading(page, 'Amend the prescription');
  await page.getByLabel('Intensity, baseline to peak').fill('1.5');
  await page.getByLabel('Reason, kept in the record').fill('Headache after three sessions; skin to settle first.');
  await shot('amendment');
  await page.getByLabel('Intensity, baseline to peak').fill('4.2');
  await press(page, 'Keep as a draft');
  await page.getByRole('alert').first().waitFor();
  await shot('above the ceiling');
  await page.getByLabel('Intensity, baseline to peak').fill('1.5');
  await press(page, 'Keep as a draft');
  await page.getByText('A draft waits for your signature').waitFor();
  await shot('to be signed');
  await press(page, 'Back to the draft');
}

async function signedAmendment({ page, shot, account, browser, address }) {
  await heading(page, 'Amend the prescription');
  await page.getByLabel('Intensity, baseline to peak').fill('1.5');
  await page.getByLabel('Reason, kept in the record').fill('Headache after three sessions.');
  await press(page, 'Keep as a draft');
  await page.getByLabel('Your password').fill(account.password);
  await press(page, /^Sign version/);
  await page.getByText('Signed. It is in force now.').waitFor();
  await shot('signed');
  const name = await page.getByRole('heading', { level: 1 }).innerText();
  const person = { email: `${name.toLowerCase().replace(' ', '.')}@harrowmere.example`, password: account.password };
  const phone = await browser.newContext({ baseURL: address, serviceWorkers: 'block' });
  const theirs = await phone.newPage();
  await theirs.goto('/sign-in');
  await theirs.getByLabel('E-mail address').fill(person.email);
  await theirs.getByLabel('Password', { exact: true }).fill(person.password);
  await theirs.getByRole('button', { name: 'Sign in', exact: true }).click();
  await theirs.waitForURL('**/today');
  await page.context().clearCookies();
  await page.context().addCookies(await phone.cookies());
  await phone.close();
  await page.goto('/today');
  await heading(page, 'Your prescription has changed');
  await shot('today of the participant');
  await page.goto('/acknowledge');
  await heading(page, 'Read this before your next session');
  await shot('what the participant reads');
}

const review = async ({ page, shot }) => {
  await page.getByRole('form', { name: 'Record a review' }).waitFor();
  const grade = page.getByRole('checkbox', { name: 'Grade the effect' });
  if (await grade.count()) await grade.click();
  await press(page, 'Sign the review');
  await page.getByRole('alert').first().waitFor();
  await shot('nothing filled in');
};

const afterPress =
  (name, moment) =>
  async ({ page, shot }) => {
    await page.getByRole('button', { name }).first().click();
    await page.getByRole('dialog').waitFor();
    await shot(moment);
  };

async function firstRowId(page, address, pick) {
  const answer = await page.request.get(address);
  return answer.ok() ? pick(await answer.json()) : undefined;
}

const participantsOf = async (page, state) =>
  firstRowId(page, `/api/participants?limit=100&state=${state}`, ({ items }) => items.map(({ id }) => id));

/** Keeps an address of the API from answering, or lets it fail; the page itself and who is signed in still come. */
const blocked = (how) => async (page) => {
  await page.route('**/api/**', async (route) => {
    const { pathname } = new URL(route.request().url());
    if (pathname === '/api/me' || pathname.startsWith('/api/auth')) return route.continue();
    if (how === 'failed') return route.fulfill({ status: 503, contentType: 'application/problem+json', body: '{}' });
    // Never answered: closing the page ends it.
    return undefined;
  });
};

export function moments(accounts) {
  const of = (role, state) =>
    accounts.filter((one) => one.role === role && (state === undefined || one.state === state));
  const one = (role, state) => of(role, state)[0];
  const ready = of('participant', 'ready');
  const clinician = one('clinician');
  const visits = [
    // Today looks different in every state a participant can be in.
    ...states.map((state) => ({
      role: 'participant',
      account: one('participant', state),
      name: `/today ${state}`,
      path: '/today',
    })),
    { role: 'participant', account: ready[0], name: '/precheck', path: '/precheck', steps: precheck },
    { role: 'participant', accounts: ready.slice(1, 3), name: 'session', path: '/today', steps: wholeSession },
    { role: 'participant', accounts: ready.slice(3, 5), name: 'red flag', path: '/today', steps: stopped },
    {
      role: 'participant',
      account: ready[0],
      name: '/me/caregivers remove',
      path: '/me/caregivers',
      steps: afterPress(/^Remove/, ''),
    },
    ...['failed', 'loading'].flatMap((how) =>
      ['/today', '/diary', '/course'].map((path) => ({
        ...{ role: 'participant', account: ready[0], name: `${path} ${how}`, path, before: blocked(how) },
        isLoading: how === 'loading',
      })),
    ),
    {
      ...{ role: 'anyone', name: '/sign-in wrong', path: '/sign-in' },
      steps: async ({ page, shot }) => {
        await page.getByLabel('E-mail address').fill('nobody@harrowmere.example');
        await page.getByLabel('Password', { exact: true }).fill('not the right one');
        await press(page, 'Sign in');
        await page.getByRole('alert').first().waitFor();
        await shot();
      },
    },
    {
      ...{ role: 'anyone', name: '/invitation open' },
      path: async (page) => {
        const invited = one('participant', 'invited');
        const [mail] = await (await page.request.get(`/api/demo/mail?to=${invited?.email ?? ''}`)).json();
        const link = mail?.text.match(/https?:\S+\/invitation\S+/)?.[0];
        return link && new URL(link).pathname + new URL(link).hash;
      },
    },
    { role: 'anyone', name: 'no such page', path: '/nowhere' },
    { role: 'clinician', account: clinician, name: '/worklist keys', path: '/worklist', steps: keysOf },
    { role: 'clinician', account: clinician, name: '/worklist nothing found', path: '/worklist?search=zzz' },
    ...['failed', 'loading'].flatMap((how) =>
      ['/worklist', '/participants', '/reports'].map((path) => ({
        ...{ role: 'clinician', account: clinician, name: `${path} ${how}`, path, before: blocked(how) },
        isLoading: how === 'loading',
      })),
    ),
    ...['invited', 'training', 'held', 'paused', 'finished', 'withdrawn'].map((state) => ({
      ...{ role: 'clinician', account: clinician, name: `/participants/… ${state}` },
      path: async (page) => {
        const [id] = (await participantsOf(page, state)) ?? [];
        return id && `/participants/${id}`;
      },
    })),
    {
      ...{ role: 'clinician', account: clinician, name: 'first prescription' },
      path: async (page) => {
        const [id] = (await participantsOf(page, 'training')) ?? [];
        return id && `/participants/${id}/prescription`;
      },
    },
    {
      ...{ role: 'clinician', account: clinician, name: 'prescription', steps: amendment },
      path: async (page) => {
        const ids = (await participantsOf(page, 'too_early')) ?? [];
        const id = ids[page.viewportSize().width === 390 ? 0 : 1];
        return id && `/participants/${id}/prescription`;
      },
    },
    {
      ...{ role: 'clinician', account: clinician, name: 'amended', steps: signedAmendment },
      path: async (page) => {
        const ids = (await participantsOf(page, 'ready')) ?? [];
        const id = ids.at(page.viewportSize().width === 390 ? -1 : -2);
        return id && `/participants/${id}/prescription`;
      },
    },
    {
      ...{ role: 'clinician', account: clinician, name: '/review/… lockout', steps: review },
      path: (page) =>
        firstRowId(page, '/api/worklist?limit=100', ({ items }) => {
          const item = items.find(({ lockoutId }) => lockoutId);
          return item && `/review/${item.id}`;
        }),
    },
    {
      ...{
        role: 'clinician',
        account: clinician,
        name: '/participants/… pause',
        steps: afterPress('Pause the course', ''),
      },
      path: async (page) => {
        const [id] = (await participantsOf(page, 'too_early')) ?? [];
        return id && `/participants/${id}`;
      },
    },
    {
      role: 'clinician',
      account: clinician,
      name: '/devices change',
      path: '/devices',
      steps: afterPress(/^Change the state/, ''),
    },
    {
      ...{ role: 'administrator', account: one('administrator'), name: '/protocols new version', path: '/protocols' },
      steps: async ({ page, shot }) => {
        await page
          .getByRole('button', { name: /^New version/ })
          .first()
          .click();
        await shot();
      },
    },
    {
      role: 'administrator',
      account: one('administrator'),
      name: '/site suspend',
      path: '/site',
      steps: afterPress(/^Suspend/, ''),
    },
  ];
  return visits.filter((visit) => visit.role === 'anyone' || visit.account || visit.accounts?.[1]);
}

async function keysOf({ page, shot }) {
  await page.getByRole('row').nth(1).waitFor();
  await page.keyboard.press('j');
  await shot('a row chosen');
  await page.keyboard.press('?');
  await page.getByRole('dialog').waitFor();
  await shot();
}
