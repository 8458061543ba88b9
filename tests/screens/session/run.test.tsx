// What: the run's page over the real runner, states and stimulator on the bench. Stop is on the page in every state.
import 'fake-indexeddb/auto';
import { act, screen } from '@testing-library/react';
import { axe } from 'jest-axe';
import { RunScreen } from '@/components/features/session/RunScreen';
import type { RunView, SessionRun } from '@/components/runtime/session-run';
import { house, type House } from '@/tests/support/device/house';
import { pageSigner, runOnPage } from '@/tests/support/device/run-on-page';
import { permitView, restAll, type RunBench } from '@/tests/support/device/run';
import { meOf, show, site } from '@/tests/support/pages/participant';
import { arriveWith, went } from '@/tests/support/pages/router';

jest.mock('expo-router', () => require('@/tests/support/pages/router'));
const mockRun: { current: SessionRun | null; view: RunView | null } = { current: null, view: null };
jest.mock('@/components/runtime/use-session-run', () => ({
  useSessionRun: () => {
    const { useSyncExternalStore } = jest.requireActual<typeof import('react')>('react');
    const session = mockRun.current;
    const leave = () => () => undefined;
    const view = useSyncExternalStore(session?.subscribe ?? leave, session?.read ?? (() => mockRun.view));
    return { view: mockRun.view ?? view, session };
  },
}));

let server: House;
let bench: RunBench;
beforeEach(async () => {
  arriveWith({});
  mockRun.view = null;
  bench = await runOnPage();
  const me = meOf(bench.accountId);
  server = house((path) =>
    path === '/api/me' ? ({ ok: true, status: 200, json: async () => me } as Response) : undefined,
  );
  globalThis.fetch = (input, init) => server.fetch(input, init);
  mockRun.current = bench.run;
});
afterEach(restAll);

async function begun(seconds: number) {
  const identity = bench.run.read().device?.identity;
  if (!identity) throw new Error('not paired');
  await bench.run.begin(await permitView(pageSigner), site, identity);
  await bench.pass(seconds);
}
async function page() {
  const shown = show(<RunScreen />);
  await screen.findByText('Session 8 of 20');
  return shown;
}
async function running(seconds: number) {
  await begun(seconds);
  return page();
}
const pass = (seconds: number) => act(() => bench.pass(seconds));
const stop = () => screen.getByRole('button', { name: 'Stop' });
const title = () => screen.getByRole('heading', { level: 1 }).textContent;
const device = () => bench.run.read().device?.session;

it('says in words how long, at what strength, and has Stop, while it rises', async () => {
  await running(10);
  expect(title()).toBe('21 minutes left');
  expect(screen.getByText(/Rising gently, now 0\.[67] mA/)).toBeTruthy();
  expect(stop()).toBeTruthy();
});

it('says in words how long, at what strength, and has Stop, while it holds', async () => {
  const { container } = await running(60);
  expect(title()).toBe('20 minutes left');
  expect(screen.getByText('Holding at 2.0 mA')).toBeTruthy();
  expect(stop()).toBeTruthy();
  expect(await axe(container)).toHaveNoViolations();
});

it('has Stop while it fades out at the end, and counts the last seconds', async () => {
  await running(1240);
  expect(title()).toBe('20 seconds left');
  expect(screen.getByText(/Fading out, now 1\.3 mA/)).toBeTruthy();
  expect(stop()).toBeTruthy();
  expect(screen.queryByRole('button', { name: 'Pause' })).toBeNull();
});

it('has Stop beside the panel for what feels wrong', async () => {
  const { user } = await running(60);
  await user.click(screen.getByRole('button', { name: 'Something feels wrong' }));
  expect(screen.getByRole('heading', { name: 'What do you feel?' })).toBeTruthy();
  expect(stop()).toBeTruthy();
});

it('has Stop in a pause, says how long it may last, and goes on at one touch', async () => {
  await begun(60);
  bench.run.pause();
  await bench.pass(20);
  const { user } = await page();
  expect(title()).toBe('Paused');
  expect(screen.getByText('No current. Go on within 100 seconds, or the session ends.')).toBeTruthy();
  expect(stop()).toBeTruthy();
  await user.click(screen.getByRole('button', { name: 'Go on' }));
  expect(device()?.snapshot.state).toBe('ramp_up');
});

it('has Stop after contact was lost, and says what to do to which pad', async () => {
  await begun(60);
  bench.run.stimulator()?.lift('F3');
  await bench.pass(20);
  const { user } = await page();
  expect(title()).toBe('A pad has come loose');
  expect(stop()).toBeTruthy();
  await user.click(screen.getByRole('button', { name: /I have wetted and pressed it: .*F3/ }));
  await pass(2);
  expect(device()?.snapshot.state).toBe('ramp_up');
});

it('has Stop while it is stopping', async () => {
  const { user } = await running(60);
  await user.click(stop());
  expect(title()).toBe('Stopping');
  expect(stop()).toBeTruthy();
});

it.each(['unknown', 'elsewhere', 'unkept'] as const)('has Stop while the state is %s', (phase) => {
  mockRun.view = { phase, run: null, device: null, speed: 1 };
  mockRun.current = null;
  show(<RunScreen />);
  expect(stop()).toBeTruthy();
});

it('stops at one touch, without a question, and leads to the diary when no current flows', async () => {
  const { user } = await running(60);
  await user.click(stop());
  expect(device()?.stopWhy).toBe('button');
  await pass(12);
  expect(title()).toBe('The session has ended early');
  expect(screen.getByText('No current flows. You can take the pads off.')).toBeTruthy();
  await user.click(screen.getByRole('button', { name: 'Go on to the diary' }));
  expect(went).toEqual(['/diary/9a53e5f0-c4a1-4b2c-8d3e-4f5a6b7c8d9e']);
});

it('notes what is felt in two touches without leaving the page', async () => {
  const { user } = await running(60);
  await user.click(screen.getByRole('button', { name: 'Something feels wrong' }));
  await user.click(screen.getByRole('button', { name: 'Tingling' }));
  await user.click(screen.getByRole('radio', { name: '3' }));
  expect(screen.getByText('Noted: Tingling, 3 of 10.')).toBeTruthy();
  await pass(2);
  await act(() => bench.sender.flush());
  expect(server.events).toContainEqual(
    expect.objectContaining({ kind: 'sensation', sensation: 'tingling', strength: 3 }),
  );
  expect(device()?.stopWhy).toBeNull();
});

it('stops at once on a red flag and shows the advice with the emergency number, without a network', async () => {
  const { user } = await running(60);
  server.isReachable = false;
  await user.click(screen.getByRole('button', { name: 'Something feels wrong' }));
  await user.click(screen.getByRole('button', { name: 'Chest pain' }));
  expect(device()?.stopWhy).toBe('red_flag');
  expect(screen.getByRole('alert').textContent).toContain('Call 999 now');
  expect(screen.getByRole('link', { name: 'Call 999' }).getAttribute('href')).toBe('tel:999');
  expect(stop()).toBeTruthy();
});

it('stops on pain at a pad of 7 and says what to do', async () => {
  const { user } = await running(60);
  await user.click(screen.getByRole('button', { name: 'Something feels wrong' }));
  await user.click(screen.getByRole('button', { name: 'Pain under a pad' }));
  await user.click(screen.getByRole('radio', { name: '7' }));
  expect(device()?.stopWhy).toBe('pain_high');
  expect(screen.getByRole('alert').textContent).toContain('Strong pain at a pad');
});

it('says that the network is gone and that this does not matter now', async () => {
  await running(30);
  await screen.findByText('Holding at 2.0 mA');
  server.isReachable = false;
  await pass(6);
  expect(await screen.findByText('No network. Going on safely.')).toBeTruthy();
  expect(title()).toBe('21 minutes left');
});

it('offers faster time in a demo only', async () => {
  await running(30);
  expect(screen.queryByRole('group', { name: 'Only in this demo' })).toBeNull();
});
