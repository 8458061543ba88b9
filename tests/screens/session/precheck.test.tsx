// What: the pre-check as a participant goes through it, with a server in the test's memory.
import 'fake-indexeddb/auto';
import { screen, waitFor } from '@testing-library/react';
import { axe } from 'jest-axe';
import { PrecheckScreen } from '@/components/features/precheck/PrecheckScreen';
import { clearanceOf, ids, meOf, now, serve, show, type Server } from '@/tests/support/pages/participant';
import { arriveWith, went } from '@/tests/support/pages/router';

jest.mock('expo-router', () => require('@/tests/support/pages/router'));

let server: Server;
const answered = (change: object = {}) => ({
  id: ids.precheck,
  answeredAt: now,
  expiresAt: '2026-03-04T18:30:00.000Z',
  complete: true,
  open: [],
  outcome: 'go_on',
  findings: [],
  emergencyAdvice: false,
  ...change,
});
beforeEach(() => {
  arriveWith({});
  server = serve({ 'GET /api/me': meOf(), 'GET /api/clearance': clearanceOf(), 'POST /api/prechecks': answered() });
  server.statuses['POST /api/prechecks'] = 201;
});

const heading = (name: string | RegExp) => screen.findByRole('heading', { level: 1, name });
const button = (name: string) => screen.getByRole('button', { name });

/** To the skin question: one touch for "none of these", one for "no implant". */
async function toSkin() {
  const shown = show(<PrecheckScreen />);
  await heading('Since your last session, did any of these happen?');
  await shown.user.click(button('None of these'));
  await heading('Do you have any new implant or metal in your head or neck?');
  await shown.user.click(screen.getByRole('radio', { name: 'No' }));
  await heading('How is the skin where the sponges sit?');
  return shown;
}

it('goes on with one touch where nothing has to be read, and says how far along it is', async () => {
  const { container } = await toSkin();
  expect(screen.getByText('Question 3 of 10')).toBeTruthy();
  expect(await axe(container)).toHaveNoViolations();
});

it('shows what an answer leads to at once, and stays until it was read', async () => {
  const { user } = await toSkin();
  await user.click(screen.getByRole('radio', { name: 'Broken, cut or blistered' }));
  expect(screen.getByRole('status').textContent).toContain(
    'Your session waits until your clinician has looked at this.',
  );
  await heading('How is the skin where the sponges sit?');
  await user.click(button('Next'));
  await heading('How is your mood today?');
});

it('keeps every answer when one goes back, and after the page was opened anew', async () => {
  const { user, unmount } = await toSkin();
  await user.click(screen.getByRole('radio', { name: 'Red or sore' }));
  await user.click(button('Back'));
  await heading('Do you have any new implant or metal in your head or neck?');
  expect(screen.getByRole('radio', { name: 'No' }).getAttribute('aria-checked')).toBe('true');
  await user.click(button('Next'));
  expect((await screen.findByRole('radio', { name: 'Red or sore' })).getAttribute('aria-checked')).toBe('true');
  await waitFor(() => expect(button('Next').getAttribute('aria-disabled')).not.toBe('true'));
  unmount();
  show(<PrecheckScreen />);
  await heading('How is the skin where the sponges sit?');
  expect(screen.getByRole('radio', { name: 'Red or sore' }).getAttribute('aria-checked')).toBe('true');
});

it('does not go on while a question of the page is open', async () => {
  const { user } = show(<PrecheckScreen />);
  await heading('Since your last session, did any of these happen?');
  const [first] = screen.getAllByRole('radio', { name: 'No' });
  if (first) await user.click(first);
  expect(button('Next').getAttribute('aria-disabled')).toBe('true');
});

it('puts advice with the emergency number first and tells the clinic without asking more', async () => {
  server.answers['POST /api/prechecks'] = answered({
    complete: false,
    outcome: null,
    findings: [{ code: 'seizure', outcome: 'emergency' }],
    emergencyAdvice: true,
  });
  const { user } = show(<PrecheckScreen />);
  await heading('Since your last session, did any of these happen?');
  const [seizureToday] = screen.getAllByRole('radio', { name: 'Yes, today' });
  if (seizureToday) await user.click(seizureToday);
  expect(screen.getByRole('alert').textContent).toContain('Call 999');
  // The answers to the other questions of the page are not waited for.
  await user.click(button('Tell the clinic now'));
  await heading('Get help first');
  expect(screen.getByRole('link', { name: 'Call 999' }).getAttribute('href')).toBe('tel:999');
  expect(server.sent('POST', '/api/prechecks')[0]?.body).toMatchObject({ answers: { seizure: 'today' } });
});

it('sends the answers once under one key though the first try got no answer', async () => {
  const { user } = await toSkin();
  await user.click(screen.getByRole('radio', { name: 'As always' }));
  await heading('How is your mood today?');
  await user.click(screen.getByRole('checkbox', { name: 'None of these' }));
  await user.click(button('Next'));
  await heading('How strong is your headache right now?');
  await user.click(screen.getByRole('radio', { name: /^0/ }));
  await user.click(button('Next'));
  await heading('How many hours did you sleep last night?');
  await user.type(screen.getByRole('textbox'), '7');
  await user.click(button('Next'));
  await user.click(await screen.findByRole('button', { name: 'No alcohol' }));
  await user.click(await screen.findByRole('button', { name: 'No drugs, no new medicine' }));
  await heading('Do you feel ill or have a fever?');
  await user.click(screen.getByRole('radio', { name: 'No' }));
  await user.click(button('Next'));
  await heading(/Are you sitting down/);
  server.answersArrive = false;
  await user.click(screen.getByRole('radio', { name: 'Yes' }));
  expect((await screen.findByRole('alert')).textContent).toContain('No network. Your answers are kept.');
  server.answersArrive = true;
  await user.click(button('Finish the check'));
  await heading('Your check is fine');
  const [lost, again, ...more] = server.sent('POST', '/api/prechecks');
  expect(more).toEqual([]);
  expect(lost?.key).toMatch(/^[0-9a-f-]{36}$/);
  expect(again?.key).toBe(lost?.key);
  expect(server.sent('POST', '/api/prechecks')[0]?.body).toMatchObject({
    answers: { seizure: 'no', mood: [], headache: 0, sleptHours: 7, drinksLast12h: 0, ready: true },
  });
  await user.click(button('Go on to the set-up'));
  expect(went).toEqual(['/set-up']);
});

it('says who can help and that it does not pass by itself when a clinician must look', async () => {
  server.answers['POST /api/prechecks'] = answered({
    outcome: 'hold_review',
    findings: [{ code: 'skin_not_ok', outcome: 'hold_review' }],
  });
  const { OutcomePage } = jest.requireActual('@/components/features/precheck/OutcomePage');
  const view = answered({ outcome: 'hold_review', findings: [{ code: 'skin_not_ok', outcome: 'hold_review' }] });
  show(<OutcomePage clearance={clearanceOf()} view={view} onAgain={() => undefined} />);
  await heading('Your clinician must look first');
  expect(screen.getByText(/This does not pass by itself/)).toBeTruthy();
  expect(screen.getByRole('link', { name: /Call Lantern Street Clinic/ }).getAttribute('href')).toBe(
    'tel:+441632960100',
  );
});
