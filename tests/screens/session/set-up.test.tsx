// What: the set-up up to Start: nothing starts without good contact, a record and the server's permit; every reason is shown.
import 'fake-indexeddb/auto';
import { act, screen } from '@testing-library/react';
import { axe } from 'jest-axe';
import { SetUpScreen } from '@/components/features/session/SetUpScreen';
import type { SessionRun } from '@/components/runtime/session-run';
import { runOnPage } from '@/tests/support/device/run-on-page';
import { restAll, type RunBench } from '@/tests/support/device/run';
import { clearanceOf, ids, meOf, now, serve, show, type Server } from '@/tests/support/pages/participant';
import { arriveWith, went } from '@/tests/support/pages/router';

jest.mock('expo-router', () => require('@/tests/support/pages/router'));
const mockRun: { current: SessionRun | null } = { current: null };
jest.mock('@/components/runtime/use-session-run', () => ({
  useSessionRun: () => {
    const { useSyncExternalStore } = jest.requireActual<typeof import('react')>('react');
    const session = mockRun.current;
    if (!session) throw new Error('no run');
    return { view: useSyncExternalStore(session.subscribe, session.read), session };
  },
}));
const mockCanKeep = { answer: true };
jest.mock('@/components/runtime/phone-store', () => ({
  ...jest.requireActual('@/components/runtime/phone-store'),
  canKeep: async () => mockCanKeep.answer,
}));

let bench: RunBench;
let server: Server;
const precheck = {
  id: ids.precheck,
  answeredAt: now,
  expiresAt: '2026-03-04T18:30:00.000Z',
  complete: true,
  open: [],
  outcome: 'go_on' as const,
  findings: [],
  emergencyAdvice: false,
};
const device = {
  id: ids.device,
  label: 'Stimulator 12',
  model: 'S2',
  serial: 'SN-12',
  lastCounter: 0,
  recalled: false,
};
const problem = (change: object) => ({
  type: 'about:blank',
  title: 'no',
  status: 409,
  detail: 'no',
  code: 'clearance.refused',
  requestId: '1',
  ...change,
});

beforeEach(async () => {
  arriveWith({});
  mockCanKeep.answer = true;
  bench = await runOnPage();
  mockRun.current = bench.run;
  server = serve({
    'GET /api/me': meOf(bench.accountId),
    'GET /api/clearance': clearanceOf({ allowed: true, precheck }),
    'GET /api/own-device': device,
    'GET /api/permit-keys': { keys: [] },
  });
});
afterEach(restAll);

const button = (name: string | RegExp) => screen.findByRole('button', { name });
const isOff = (element: HTMLElement) => element.getAttribute('aria-disabled') === 'true';

async function toContact() {
  const shown = show(<SetUpScreen />);
  await shown.user.click(await button('Find the stimulator'));
  await shown.user.click(await button('Next: the pads'));
  for (const box of screen.getAllByRole('checkbox')) await shown.user.click(box);
  await shown.user.click(await button('Next: contact'));
  await act(() => bench.pass(1));
  return shown;
}
/** The bench's pads have soaked for 20 s; of this serial number one may be loose. */
async function toStart() {
  const shown = await toContact();
  for (const one of screen.queryAllByRole('button', { name: /^I have wetted and pressed it/ }))
    await shown.user.click(one);
  await act(() => bench.pass(12));
  return shown;
}

it('names the places left and right, and goes on only when every step is ticked', async () => {
  const { user, container } = show(<SetUpScreen />);
  await user.click(await button('Find the stimulator'));
  await user.click(await button('Next: the pads'));
  expect(
    screen.getByRole('img', { name: /red lead: Left forehead, F3.*black lead: Above right eye, Fp2/ }),
  ).toBeTruthy();
  expect(isOff(await button('Next: contact'))).toBe(true);
  expect(await axe(container)).toHaveNoViolations();
});

it('does not start while a pad has no good contact, and says what to do', async () => {
  await toStart();
  act(() => bench.run.stimulator()?.lift('Fp2'));
  expect(isOff(await button('Start · waiting for good contact'))).toBe(true);
  expect(screen.getByText(/The pad does not touch/)).toBeTruthy();
  expect(server.sent('POST', '/api/permits')).toHaveLength(0);
});

it('shows every reason of a refusal with who can help and their number', async () => {
  server.statuses['POST /api/permits'] = 409;
  server.answers['POST /api/permits'] = problem({
    reasons: [
      {
        code: 'gap_too_short',
        sentence: 'It is too soon after the last session.',
        resolvedBy: 'time',
        contact: null,
        until: '2026-03-04T19:00:00.000Z',
        fact: null,
      },
      {
        code: 'lockout_review',
        sentence: 'Sessions are on hold.',
        resolvedBy: 'clinician',
        contact: { name: 'Dr Amara Quill', phone: '+44 1632 960111' },
        until: null,
        fact: null,
      },
    ],
  });
  const { user } = await toStart();
  await user.click(await button('Start'));
  expect((await screen.findAllByRole('listitem')).map((item) => item.textContent)).toEqual([
    expect.stringContaining('It is too soon after the last session.It passes by itself today at 19:00.'),
    expect.stringContaining('Sessions are on hold.It does not pass by itself. Your clinician can help.'),
  ]);
  expect(screen.getByRole('link', { name: /Dr Amara Quill/ }).getAttribute('href')).toBe('tel:+441632960111');
  expect(bench.run.read().phase).toBe('none');
});

it('asks again with the same key after a lost answer, and starts nothing meanwhile', async () => {
  const { user } = await toStart();
  server.answersArrive = false;
  await user.click(await button('Start'));
  expect((await screen.findByRole('alert')).textContent).toContain('No network');
  server.answersArrive = true;
  server.statuses['POST /api/permits'] = 409;
  server.answers['POST /api/permits'] = problem({ reasons: [] });
  await user.click(await button('Start'));
  await screen.findByText('The session could not be started');
  await user.click(await button('Start'));
  const [lost, again, next] = server.sent('POST', '/api/permits');
  expect(lost?.key).toMatch(/^[0-9a-f-]{36}$/);
  expect(again?.key).toBe(lost?.key);
  // Once it was answered, the next press is a new wish.
  expect(next?.key).not.toBe(lost?.key);
  expect(bench.run.read().phase).toBe('none');
});

it('goes to the run once the stimulator has started on the permit', async () => {
  const { permitView } = jest.requireActual<typeof import('@/tests/support/device/run')>('@/tests/support/device/run');
  const { pageSigner } = jest.requireActual<typeof import('@/tests/support/device/run-on-page')>(
    '@/tests/support/device/run-on-page',
  );
  server.answers['POST /api/permits'] = await permitView(pageSigner);
  const { user } = await toStart();
  await user.click(await button('Start'));
  await act(() => bench.pass(1));
  expect(went).toContain('/run');
  expect(bench.run.read().phase).toBe('running');
});

it('starts nothing on a phone that can keep no record, and says so', async () => {
  mockCanKeep.answer = false;
  const { user } = show(<SetUpScreen />);
  await user.click(await button('Find the stimulator'));
  expect((await screen.findByRole('alert')).textContent).toContain(
    'This browser cannot keep a record, so no session can start.',
  );
  expect(screen.queryByRole('button', { name: 'Next: the pads' })).toBeNull();
});

it('does not go on with a recalled stimulator, and says whom to call', async () => {
  server.answers['GET /api/own-device'] = { ...device, recalled: true };
  show(<SetUpScreen />);
  expect(isOff(await button('Find the stimulator'))).toBe(true);
  expect(screen.getByText('Your stimulator must not be used now.')).toBeTruthy();
  expect(screen.getByRole('link', { name: /Call Lantern Street Clinic/ })).toBeTruthy();
});

it('leads back to the check when there is none', async () => {
  server.answers['GET /api/clearance'] = clearanceOf({ allowed: false, readyForPrecheck: true });
  const { user } = show(<SetUpScreen />);
  await user.click(await button('Begin the check'));
  expect(went).toEqual(['/precheck']);
});
