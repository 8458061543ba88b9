// What: the page Site → Qualification: the last run of each site, a new one for administrators, and its signed result as a file.
import { fireEvent, screen } from '@testing-library/react';
import { axe } from 'jest-axe';
import { QualificationScreen } from '@/components/features/qualification/QualificationScreen';
import { meOf, now, serve, show, site, type Server } from '@/tests/support/pages/participant';
import { arriveWith } from '@/tests/support/pages/router';

jest.mock('expo-router', () => require('@/tests/support/pages/router'));

const run = {
  ...{ siteId: site.id, at: now, byName: 'Ada Hale', fileName: 'own.json', fileSha256: 'ab12', resultSha256: 'cd34' },
  ...{ passed: 3, failed: 0, version: '0.1.0', kid: 'key-1' },
};
const ownSite = { ...site, kind: 'service', createdAt: now };

function as(role: 'administrator' | 'monitor', runs: unknown[]): Server {
  const me = meOf();
  arriveWith({});
  return serve({
    'GET /api/me': { ...me, account: { ...me.account, role }, participant: null },
    'GET /api/sites': { items: [ownSite], nextCursor: null },
    'GET /api/qualification': { runs },
  });
}
const choose = (name: string, text: string) => {
  const input = screen.getByLabelText('Choose a file of worked cases for Lantern Street Clinic');
  const file = Object.assign(new File([text], name, { type: 'application/json' }), { text: async () => text });
  fireEvent.change(input, { target: { files: [file] } });
};
const button = () => screen.getByRole('button', { name: 'Run the cases for Lantern Street Clinic' });

it('shows the last run with its hashes, and nothing to press to whoever may not run any', async () => {
  as('monitor', [run]);
  const { container } = show(<QualificationScreen />);
  expect(await screen.findByText('3 passed, none failed')).toBeTruthy();
  for (const text of ['own.json', 'ab12', 'cd34', 'key-1', '0.1.0']) expect(screen.getByText(text)).toBeTruthy();
  expect(screen.queryByRole('button', { name: /Run the cases/ })).toBeNull();
  expect((await axe(container)).violations).toEqual([]);
});

it('says that there was no run yet, and that it failed to load', async () => {
  const server = as('monitor', []);
  const { unmount } = show(<QualificationScreen />);
  expect(await screen.findByText('No run yet')).toBeTruthy();
  unmount();
  delete server.answers['GET /api/qualification'];
  show(<QualificationScreen />);
  expect(await screen.findByRole('button', { name: /again/i })).toBeTruthy();
});

it('sends the chosen file as it is, names what did not pass, and offers the signed result', async () => {
  const server = as('administrator', []);
  const answer = {
    run: { ...run, passed: 1, failed: 2 },
    failures: [{ id: 'wrong', error: null }],
    signed: '{"jws":"x"}',
  };
  server.answers['POST /api/qualification'] = answer;
  const { user, container } = show(<QualificationScreen />);
  await screen.findByText('No run yet');
  choose('own.json', '{"cases":[]}');
  await user.click(button());
  expect(await screen.findByText('1 passed, 2 failed')).toBeTruthy();
  expect(server.sent('POST', '/api/qualification')[0]?.body).toEqual({
    ...{ siteId: site.id, fileName: 'own.json', content: '{"cases":[]}' },
  });
  expect(screen.getByText('wrong: not as expected')).toBeTruthy();
  expect(screen.getByText('1 more did not pass.')).toBeTruthy();
  expect(screen.getByRole('button', { name: 'Download the signed result' })).toBeTruthy();
  expect((await axe(container)).violations).toEqual([]);
});

it('says plainly why a file was not run, and sends none that is too large', async () => {
  const server = as('administrator', []);
  const message = 'This is not a file of worked cases.';
  const fields = [{ path: 'content', code: 'cases_unreadable', message }];
  const refusal = {
    type: 'about:blank',
    title: 'no',
    status: 422,
    detail: 'no',
    code: 'invalid',
    requestId: '1',
    fields,
  };
  server.answers['POST /api/qualification'] = refusal;
  server.statuses['POST /api/qualification'] = 422;
  const { user } = show(<QualificationScreen />);
  await screen.findByText('No run yet');
  choose('own.json', '[]');
  await user.click(button());
  expect(await screen.findByText(message)).toBeTruthy();
  choose('large.json', 'x'.repeat(800_001));
  expect(await screen.findByText(/too large/)).toBeTruthy();
  expect(button().getAttribute('aria-disabled')).toBe('true');
});
