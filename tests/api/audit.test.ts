// Reading the trail: own sites alone, an administrator without people's records, a monitor by pseudonym, and the reading itself on record.
import { openTestHouse, type TestHouse } from '../support/house';

let at: TestHouse;
let siteId: string;
let otherSiteId: string;
let person: Awaited<ReturnType<TestHouse['person']>>;
type Browser = Awaited<ReturnType<TestHouse['signedIn']>>;
let monitor: Browser;
let administrator: Browser;
let clinician: Browser;

interface Entry {
  chain: string;
  action: string;
  kind: string;
  actor: { name: string; role: string };
  participantCode: string | null;
  after: unknown;
}

beforeAll(async () => {
  at = await openTestHouse();
  siteId = await at.site('LS');
  otherSiteId = await at.site('MR');
  person = await at.person('participant', siteId, 'Ines Marlow');
  const far = await at.person('participant', otherSiteId, 'Far Away');
  for (const { accountId } of [person, far]) await (await at.inSession(accountId)).get('/api/me/export').expect(200);
  await (
    await at.signedIn(person.email)
  )
    .post('/api/messages')
    .send({ text: 'The tingling was odd, Ines' })
    .expect(201);
  monitor = await at.inSession((await at.person('monitor', siteId)).accountId);
  administrator = await at.inSession((await at.person('administrator', siteId)).accountId);
  clinician = await at.inSession((await at.person('clinician', siteId)).accountId);
});
afterAll(() => at.close());

const entries = async (browser: Browser, query = ''): Promise<Entry[]> =>
  (await browser.get(`/api/audit?limit=100${query}`).expect(200)).body.items;

it('shows a clinician the entries of the own site, people’s too, and none of another site', async () => {
  const seen = await entries(clinician);
  expect(seen.some(({ actor }) => actor.name === 'Ines Marlow')).toBe(true);
  expect(seen.some(({ actor }) => actor.name === 'Far Away')).toBe(false);
  await clinician.get(`/api/audit?siteId=${otherSiteId}`).expect(404);
});

it('shows an administrator nothing that concerns a person', async () => {
  const seen = await entries(administrator);
  expect(seen.length).toBeGreaterThan(0);
  expect(seen.filter(({ chain, participantCode }) => chain.startsWith('participant:') || participantCode)).toEqual([]);
  await administrator.get(`/api/audit?participantId=${person.participantId}`).expect(404);
});

it('shows a monitor codes in place of names, and nothing that a person wrote', async () => {
  const seen = await entries(monitor, `&participantId=${person.participantId}`);
  const written = JSON.stringify(seen);
  expect(seen.some(({ action }) => action === 'message.send')).toBe(true);
  expect(written).not.toContain('Marlow');
  expect(written).not.toContain('tingling');
  expect(
    seen.every(({ actor, participantCode }) => actor.role !== 'participant' || actor.name === participantCode),
  ).toBe(true);
});

it('is on record itself', async () => {
  await monitor.get(`/api/audit?participantId=${person.participantId}`).expect(200);
  const [newest] = await entries(clinician, `&participantId=${person.participantId}`);
  expect(newest).toMatchObject({ action: 'audit.read', kind: 'read', actor: { role: 'monitor' } });
});

it('comes page by page without loss or repetition', async () => {
  const whole = await at.rows(
    'select chain, sequence::int from audit_entry where site_id = $1 order by at desc, chain desc, sequence desc',
    [siteId],
  );
  const seen: string[] = [];
  let cursor = '';
  for (let page = 0; page < 20; page += 1) {
    const { body } = await clinician.get(`/api/audit?limit=3${cursor ? `&cursor=${cursor}` : ''}`).expect(200);
    seen.push(...body.items.map(({ chain, sequence }: { chain: string; sequence: number }) => `${chain}:${sequence}`));
    if (!body.nextCursor) break;
    cursor = body.nextCursor;
  }
  const expected = whole.map(({ chain, sequence }) => `${chain}:${sequence}`);
  expect(seen.filter((id) => expected.includes(id))).toEqual(expected);
  expect(new Set(seen).size).toBe(seen.length);
});

it('is closed to participants, caregivers and coordinators', async () => {
  for (const role of ['participant', 'caregiver', 'coordinator'] as const) {
    const browser = await at.inSession((await at.person(role, siteId)).accountId);
    expect((await browser.get('/api/audit').expect(403)).body.code).toBe('role.not_allowed');
  }
});
