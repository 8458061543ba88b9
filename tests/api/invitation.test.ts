// Invitations: looked at, accepted once, ended; joining a second person; and the link that stops the mails.
import { randomUUID } from 'node:crypto';
import { insertInvitation } from '@/db/queries/invitation';
import { insertCaregiver } from '@/db/queries/caregiver';
import { setOffset } from '@/db/queries/clock';
import { hashOfMailToken, newMailToken } from '@/server/invitation';
import { stopTokenFor } from '@/server/mail-stop';
import { openTestHouse, password, type TestHouse } from '../support/house';

let at: TestHouse;
let siteId: string;
let person: Awaited<ReturnType<TestHouse['person']>>;

beforeAll(async () => {
  at = await openTestHouse();
  siteId = await at.site('LS');
  person = await at.person('participant', siteId, 'Ines Marlow');
});
afterAll(() => at.close());

async function invite(
  role: 'clinician' | 'caregiver',
  email: string,
  subjectId: string | null = null,
): Promise<string> {
  const { token, hash } = newMailToken();
  const createdAt = await at.house.transact.now();
  const expiresAt = new Date(Date.parse(createdAt) + 86_400_000).toISOString();
  const row = { id: randomUUID(), role, email, name: 'Invited', siteId, subjectId, tokenHash: hash, invitedBy: 'x' };
  await insertInvitation(at.house.client.db, { ...row, createdAt, expiresAt });
  return token;
}

async function caregiverRow(email: string): Promise<string> {
  const id = randomUUID();
  const stopTokenHash = hashOfMailToken(stopTokenFor(at.house.env.secret, id));
  const participantId = person.participantId ?? '';
  const createdAt = await at.house.transact.now();
  await insertCaregiver(at.house.client.db, { id, participantId, name: 'Tam', email, createdAt, stopTokenHash });
  return id;
}

const accept = (token: string) =>
  at.browser().post('/api/invitations/accept').send({ token, name: 'Maren Oakes', password, language: 'en' });
const look = (token: string) => at.browser().post('/api/invitations/look').send({ token });

describe('an invitation', () => {
  it('makes an account that can sign in and belongs to the site, and works once', async () => {
    const email = 'maren.oakes@harrowmere.example';
    const token = await invite('clinician', email);
    expect((await look(token).expect(200)).body).toMatchObject({ role: 'clinician', email, hasAccount: false });
    await accept(token).expect(201);
    const browser = await at.signedIn(email);
    const me = await browser.get('/api/me').expect(200);
    expect(me.body.sites.map(({ id }: { id: string }) => id)).toEqual([siteId]);
    expect((await accept(token).expect(409)).body.code).toBe('invitation.used');
    expect((await look(token).expect(409)).body.code).toBe('invitation.used');
  });

  it('makes one account when two accept at the same moment', async () => {
    const email = 'twice@harrowmere.example';
    const token = await invite('clinician', email);
    const answers = await Promise.all([accept(token), accept(token), accept(token)]);
    expect(answers.map(({ status }) => status).sort()).toEqual([201, 409, 409]);
    expect(await at.rows('select count(*)::int as n from account where email = $1', [email])).toEqual([{ n: 1 }]);
  });

  it('is refused when the password is short, and can still be accepted after', async () => {
    const token = await invite('clinician', 'short@harrowmere.example');
    const body = { token, name: 'Short', password: 'short', language: 'en' };
    const answer = await at.browser().post('/api/invitations/accept').send(body).expect(422);
    expect(answer.body.fields).toEqual([expect.objectContaining({ path: 'password', code: 'too_small.text' })]);
    await accept(token).expect(201);
  });

  it('of an unknown link, an expired one and a known address each says what it is', async () => {
    expect((await look(newMailToken().token).expect(409)).body.code).toBe('invitation.unknown');
    const known = await invite('clinician', person.email);
    expect((await accept(known).expect(409)).body.code).toBe('invitation.account_exists');
    const late = await invite('clinician', 'late@harrowmere.example');
    await setOffset(at.house.client.db, 86_400);
    const answer = await accept(late);
    await setOffset(at.house.client.db, 0);
    expect([answer.status, answer.body.code]).toEqual([409, 'invitation.expired']);
    expect(await at.rows(`select 1 from account where email = 'late@harrowmere.example'`)).toEqual([]);
  });

  it('lets a caregiver join with the own account, and nobody else with that link', async () => {
    const caregiver = await at.person('caregiver', siteId);
    const other = await at.person('caregiver', siteId);
    const token = await invite('caregiver', caregiver.email, await caregiverRow(caregiver.email));
    const stranger = await at.inSession(other.accountId);
    expect((await stranger.post('/api/invitations/join').send({ token }).expect(409)).body.code).toBe(
      'invitation.other_address',
    );
    const browser = await at.inSession(caregiver.accountId);
    await browser.post('/api/invitations/join').send({ token }).expect(200);
    expect((await browser.get('/api/me')).body.sites).toHaveLength(1);
  });
});

describe('the link that stops the mails', () => {
  it('works without signing in, as often as it is opened, and is on record once', async () => {
    const id = await caregiverRow('stop@harrowmere.example');
    const token = stopTokenFor(at.house.env.secret, id);
    const stop = () => at.browser().post('/api/mail-stops').send({ token }).expect(200);
    await stop();
    await stop();
    const [row] = await at.rows('select mails_stopped_at from caregiver where id = $1', [id]);
    expect(row?.mails_stopped_at).not.toBeNull();
    const entries = await at.rows(`select 1 from audit_entry where action = 'account.stop-mails' and kind = 'write'`);
    expect(entries).toHaveLength(1);
    const wrong = await at
      .browser()
      .post('/api/mail-stops')
      .send({ token: 'x'.repeat(43) })
      .expect(409);
    expect(wrong.body.code).toBe('mail_stop.unknown');
  });
});
