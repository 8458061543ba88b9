// What: the diary and the receipt: nothing is assumed, advice stands first, what only the phone has is said to be so.
import 'fake-indexeddb/auto';
import { screen } from '@testing-library/react';
import { axe } from 'jest-axe';
import { DiaryScreen } from '@/components/features/diary/DiaryScreen';
import { ReceiptScreen } from '@/components/features/session/ReceiptScreen';
import { senderOf } from '@/components/runtime/unsent-sender';
import { dose, ids, meOf, now, serve, show, site, zone, type Server } from '@/tests/support/pages/participant';
import { arriveWith, went } from '@/tests/support/pages/router';

jest.mock('expo-router', () => require('@/tests/support/pages/router'));

const sessionPath = `/api/sessions/${ids.session}`;
const session = (change: object = {}) => ({
  id: ids.session,
  permitId: ids.precheck,
  courseId: ids.course,
  participantId: ids.participant,
  number: 8,
  of: 20,
  state: 'closed',
  permitState: 'used',
  startedAt: now,
  endedAt: now,
  endReason: 'complete',
  dose,
  delivered: {
    chargeCoulomb: 2.45,
    upperChargeCoulomb: 2.45,
    minutes: 20.9,
    fraction: 0.996,
    completeness: 'complete',
    gaps: [],
    conflicts: 0,
  },
  curve: [],
  contact: [],
  pauses: [],
  sensations: [],
  missingSequences: [],
  diary: null,
  nextDay: null,
  nextFrom: '2026-03-05T16:00:00.000Z',
  zone,
  site,
  ...change,
});
const written = (change: object = {}) => ({
  id: ids.precheck,
  sessionId: ids.session,
  kind: 'after',
  writtenAt: now,
  after: null,
  nextDay: null,
  photos: [],
  lockouts: [],
  emergencyAdvice: false,
  ...change,
});

let server: Server;
let accountId: string;
beforeEach(() => {
  arriveWith({ sessionId: ids.session });
  const me = meOf();
  accountId = me.account.id;
  server = serve({ 'GET /api/me': me, [`GET ${sessionPath}`]: session(), [`POST ${sessionPath}/diary`]: written() });
  server.statuses[`POST ${sessionPath}/diary`] = 201;
});
afterEach(() => senderOf(accountId).rest());

const heading = (name: string) => screen.findByRole('heading', { level: 1, name });
const button = (name: string) => screen.getByRole('button', { name });
const isOff = (name: string) => button(name).getAttribute('aria-disabled') === 'true';

/** "Nothing", no headache, skin as always: up to the last page. */
async function toFlags() {
  const shown = show(<DiaryScreen />);
  await heading('Did you feel any of these?');
  await shown.user.click(screen.getByRole('checkbox', { name: 'Nothing' }));
  await shown.user.click(button('Next'));
  await shown.user.click(await screen.findByRole('radio', { name: /^0/ }));
  await shown.user.click(button('Next'));
  await shown.user.click(await screen.findByRole('radio', { name: 'As always' }));
  await shown.user.click(button('Next'));
  await heading('Did any of these happen?');
  return shown;
}

it('takes no answer for none: nothing felt is chosen, and so is none of the serious things', async () => {
  const { user } = show(<DiaryScreen />);
  await heading('Did you feel any of these?');
  expect(isOff('Next')).toBe(true);
  await user.click(screen.getByRole('checkbox', { name: 'Nothing' }));
  expect(isOff('Next')).toBe(false);
  await user.click(screen.getByRole('checkbox', { name: 'Tingling' }));
  expect(screen.getByRole('checkbox', { name: 'Nothing' }).getAttribute('aria-checked')).toBe('false');
  expect(isOff('Next')).toBe(true);
  await user.click(screen.getByRole('radio', { name: '3' }));
  expect(isOff('Next')).toBe(true);
  await user.click(screen.getByRole('radio', { name: 'Gone' }));
  expect(isOff('Next')).toBe(false);
});

it('sends the answers and leads to the receipt', async () => {
  const { user, container } = await toFlags();
  expect(isOff('Send to the clinic')).toBe(true);
  await user.click(screen.getByRole('checkbox', { name: 'None of these' }));
  expect(await axe(container)).toHaveNoViolations();
  await user.click(button('Send to the clinic'));
  await screen.findByText('Send to the clinic');
  expect(server.sent('POST', `${sessionPath}/diary`)).toEqual([
    expect.objectContaining({
      body: { kind: 'after', answers: { nothingFelt: true, effects: [], headacheAfter: 0, skin: 'ok', redFlags: [] } },
    }),
  ]);
  expect(went).toEqual([`/receipt/${ids.session}`]);
});

it('puts the advice first when something serious is named, before anything is sent', async () => {
  const { user } = await toFlags();
  server.isReachable = false;
  await user.click(screen.getByRole('checkbox', { name: 'Fainting' }));
  expect(screen.getByRole('alert').textContent).toContain('After fainting, get help');
  expect(screen.getByRole('link', { name: 'Call 999' })).toBeTruthy();
});

it('keeps the answers without a network and sends them once there is one', async () => {
  const { user } = await toFlags();
  await user.click(screen.getByRole('checkbox', { name: 'None of these' }));
  server.isReachable = false;
  await user.click(button('Send to the clinic'));
  await screen.findByText('Send to the clinic');
  expect(senderOf(accountId).read()).toMatchObject({ diaries: 1, isOffline: true });
  server.isReachable = true;
  await senderOf(accountId).flush();
  expect(server.sent('POST', `${sessionPath}/diary`)).toHaveLength(1);
  expect(senderOf(accountId).read().count).toBe(0);
});

it('finds the answers again after the page was closed', async () => {
  const { unmount } = await toFlags();
  unmount();
  show(<DiaryScreen />);
  await heading('Did any of these happen?');
});

it('asks the next day about redness, headache and what was serious', async () => {
  arriveWith({ sessionId: ids.session, kind: 'next_day' });
  const { user } = show(<DiaryScreen />);
  await heading('Is the skin still red today?');
  await user.click(screen.getByRole('radio', { name: 'No, it looks as always' }));
  await user.click(button('Next'));
  await heading('How strong was your headache since then?');
});

it('gives a plain receipt of what the server computed, and when the next session may be', async () => {
  server.answers[`GET ${sessionPath}`] = session({ diary: written() });
  show(<ReceiptScreen />);
  await heading('Recorded');
  expect(screen.getByText('21 minutes at 2 mA delivered. Next: tomorrow after 16:00.')).toBeTruthy();
});

it('says on the receipt that sessions are on hold and whom to call', async () => {
  server.answers[`GET ${sessionPath}`] = session({
    diary: written({ lockouts: [{ code: 'headache_high', level: 'review' }] }),
  });
  show(<ReceiptScreen />);
  await screen.findByText('Sessions are on hold');
  expect(screen.getByRole('link', { name: /Call Lantern Street Clinic/ }).getAttribute('href')).toBe(
    'tel:+441632960100',
  );
});

it('does not say that a record is whole while parts of it are on their way', async () => {
  server.answers[`GET ${sessionPath}`] = session({ state: 'awaiting_record', delivered: null });
  show(<ReceiptScreen />);
  await heading('The record is still coming in');
});
