// Signing in and out, the second factor, a forgotten password, suspension, and the limits on guessing.
import { openTestHouse, password, type TestHouse } from '../support/house';
import { totp } from '../support/totp';

/** Each try costs a tenth of a second of hashing on purpose, and several on a busy machine. */
const patientMilliseconds = 120_000;

let at: TestHouse;
let siteId: string;

beforeAll(async () => {
  at = await openTestHouse();
  siteId = await at.site('LS');
});
afterAll(() => at.close());

const signIn = (house: TestHouse, email: string, word: string) =>
  house.browser().post('/api/auth/sign-in/email').send({ email, password: word });

describe('signing in', () => {
  it('answers alike for a wrong password, an address that is nobody’s, and somebody suspended', async () => {
    const { email } = await at.person('coordinator', siteId);
    const suspended = await at.person('coordinator', siteId);
    await at.rows(`update account set state = 'suspended' where id = $1`, [suspended.accountId]);
    const answers = [
      await signIn(at, email, 'not the password'),
      await signIn(at, 'nobody@harrowmere.example', password),
      await signIn(at, suspended.email, password),
    ];
    const said = answers.map(({ status, body }) => ({ status, ...body, requestId: '' }));
    expect(said[0]).toMatchObject({ status: 401, code: 'sign_in.wrong' });
    expect(said[1]).toEqual(said[0]);
    expect(said[2]).toEqual(said[0]);
    expect(answers[2]?.headers['set-cookie']?.toString() ?? '').not.toContain('session_token');
  });

  it('sets a cookie that scripts cannot read, and keeps its token out of the answer', async () => {
    const { email } = await at.person('monitor', siteId);
    const answer = await signIn(at, email, password).expect(200);
    const cookie = String(answer.headers['set-cookie']);
    expect(cookie).toContain('HttpOnly');
    expect(cookie).toContain('SameSite=Lax');
    const token = /session_token=([^.;]+)/.exec(cookie)?.[1] ?? 'none';
    expect(JSON.stringify(answer.body)).not.toContain(token);
  });

  it('is on record, wrong tries too, without what was typed', async () => {
    const { email, accountId } = await at.person('clinician', siteId);
    await signIn(at, email, 'something very private');
    await at.signedIn(email);
    const entries = await at.rows(
      `select kind, chain, after from audit_entry where subject_id = $1 order by sequence`,
      [accountId],
    );
    expect(entries.map(({ kind, chain }) => [kind, chain])).toEqual([
      ['refusal', `site:${siteId}`],
      ['write', `site:${siteId}`],
    ]);
    expect(JSON.stringify(await at.rows('select * from audit_entry'))).not.toContain('very private');
  });

  it('opens no account of one’s own: there is no sign-up', async () => {
    const answer = await at
      .browser()
      .post('/api/auth/sign-up/email')
      .send({ email: 'new@harrowmere.example', password, name: 'New' });
    expect(answer.status).toBe(404);
  });

  it('ends staff’s sessions after twelve hours and a participant’s after thirty days', async () => {
    const hours = async (role: 'clinician' | 'participant') => {
      const { email, accountId } = await at.person(role, siteId);
      await at.signedIn(email);
      const [row] = await at.rows(
        `select round(extract(epoch from expires_at - now()) / 3600)::int as hours from auth_session where user_id = $1`,
        [accountId],
      );
      return row?.hours;
    };
    expect(await hours('clinician')).toBe(12);
    expect(await hours('participant')).toBe(720);
  });

  it('is over everywhere at once for somebody who is suspended, and for whoever signs out everywhere', async () => {
    const one = await at.person('coordinator', siteId);
    const phone = await at.signedIn(one.email);
    const desk = await at.signedIn(one.email);
    await desk.post('/api/auth/revoke-sessions').send({}).expect(200);
    await phone.get('/api/me').expect(401);

    const again = await at.signedIn(one.email);
    await at.rows(`update account set state = 'suspended' where id = $1`, [one.accountId]);
    const answer = await again.get('/api/me').expect(403);
    expect(answer.body.code).toBe('account.suspended');
  });
});

describe('a forgotten password', () => {
  it('is replaced by a link that works once, and the old sessions end', async () => {
    const { email } = await at.person('participant', siteId);
    const old = await at.signedIn(email);
    await at.browser().post('/api/auth/request-password-reset').send({ email }).expect(200);
    await at.house.runner.runDue();
    const mail = at.mails.find((one) => one.to === email);
    const token = /#token=([\w-]+)/.exec(mail?.text ?? '')?.[1] ?? '';
    const newPassword = 'another long password';
    await at.browser().post('/api/auth/reset-password').send({ token, newPassword }).expect(200);
    await old.get('/api/me').expect(401);
    expect((await signIn(at, email, password)).status).toBe(401);
    await signIn(at, email, newPassword).expect(200);
    const twice = await at.browser().post('/api/auth/reset-password').send({ token, newPassword }).expect(409);
    expect(twice.body.code).toBe('reset.link_ended');
  });

  it('mails nothing to an address that is nobody’s, and says the same', async () => {
    const before = at.mails.length;
    const email = 'stranger@harrowmere.example';
    const answer = await at.browser().post('/api/auth/request-password-reset').send({ email }).expect(200);
    expect(answer.body).toEqual({});
    await at.house.runner.runDue();
    expect(at.mails.length).toBe(before);
  });

  it('leaves no link in the database once the mail is out', async () => {
    const kept = await at.rows(`select facts from outbox where closed_at is not null`);
    expect(JSON.stringify(kept)).not.toContain('token=');
    expect(JSON.stringify(await at.rows('select identifier from auth_verification'))).not.toContain('reset-password:');
  });
});

describe('without the demo', () => {
  let real: TestHouse;
  let site: string;
  beforeAll(async () => {
    real = await openTestHouse({ DEMO: '0', RATE_LIMITS: 'on' });
    site = await real.site('LS');
  });
  afterAll(() => real.close());

  it(
    'staff get nowhere before the second factor is set up, and then need it at every sign-in',
    async () => {
      const { email } = await real.person('clinician', site);
      const browser = await real.signedIn(email);
      expect((await browser.get('/api/worklist').expect(403)).body.code).toBe('second_factor.required');
      expect((await browser.get('/api/me').expect(200)).body.secondFactor).toEqual({ enabled: false, required: true });

      const begun = await browser.post('/api/auth/two-factor/enable').send({ password }).expect(200);
      const secret = new URL(begun.body.totpURI).searchParams.get('secret') ?? '';
      expect((await browser.post('/api/auth/two-factor/verify-totp').send({ code: '000000' })).body.code).toBe(
        'second_factor.wrong',
      );
      await browser
        .post('/api/auth/two-factor/verify-totp')
        .send({ code: totp(secret) })
        .expect(200);
      await browser.get('/api/worklist').expect(200);

      const next = real.browser();
      const first = await next.post('/api/auth/sign-in/email').send({ email, password }).expect(200);
      expect(first.body).toEqual({ twoFactorRedirect: true });
      await next.get('/api/me').expect(401);
      await next
        .post('/api/auth/two-factor/verify-totp')
        .send({ code: totp(secret) })
        .expect(200);
      await next.get('/api/worklist').expect(200);

      const lost = real.browser();
      await lost.post('/api/auth/sign-in/email').send({ email, password }).expect(200);
      const [code] = begun.body.backupCodes;
      await lost.post('/api/auth/two-factor/verify-backup-code').send({ code }).expect(200);
      await lost.get('/api/me').expect(200);
    },
    patientMilliseconds,
  );

  it('asks participants for no second factor', async () => {
    const { email } = await real.person('participant', site);
    const browser = await real.signedIn(email);
    expect((await browser.get('/api/me').expect(200)).body.secondFactor.required).toBe(false);
  });

  it(
    'stops guessing a password after ten tries, and says for how long',
    async () => {
      const { email } = await real.person('participant', site);
      const statuses: number[] = [];
      for (let attempt = 0; attempt < 11; attempt += 1)
        statuses.push((await signIn(real, email, `wrong ${attempt}`)).status);
      expect(statuses).toEqual([...Array.from({ length: 10 }, () => 401), 429]);
      const right = await signIn(real, email, password).expect(429);
      expect(Number(right.headers['retry-after'])).toBeGreaterThan(0);
    },
    patientMilliseconds,
  );
});
