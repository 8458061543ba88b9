// What stands before every action: origin, sign-in, role, shape, size; and how it says no.
import { api } from '@/server/api';
import { Problem } from '@/shared/contracts/problem';
import { openTestHouse, origin, type TestHouse } from '../support/house';
import request from 'supertest';

let at: TestHouse;
let clinician: Awaited<ReturnType<TestHouse['signedIn']>>;
let clinicianEmail: string;

beforeAll(async () => {
  at = await openTestHouse();
  const siteId = await at.site('LS');
  const person = await at.person('clinician', siteId);
  clinicianEmail = person.email;
  clinician = await at.inSession(person.accountId);
});
afterAll(() => at.close());

const enrol = '/api/participants';

describe('a request that changes something', () => {
  it('is refused when it comes from another site, whatever cookies it brings', async () => {
    const answer = await clinician.post(enrol).set('origin', 'https://elsewhere.example').send({}).expect(403);
    expect(answer.body.code).toBe('origin.foreign');
  });

  it('is refused without an origin unless the browser says that it is our own page', async () => {
    const bare = await request(at.house.app)
      .post('/api/invitations/look')
      .send({ token: 'x'.repeat(30) });
    expect([bare.status, bare.body.code]).toEqual([403, 'origin.missing']);
    const own = await request(at.house.app)
      .post('/api/invitations/look')
      .set('sec-fetch-site', 'same-origin')
      .send({ token: 'x'.repeat(30) });
    expect(own.body.code).toBe('invitation.unknown');
  });

  it('is refused at the sign-in door too when it comes from elsewhere', async () => {
    const answer = await request(at.house.app)
      .post('/api/auth/sign-in/email')
      .set('origin', 'null')
      .send({ email: clinicianEmail, password: 'x' });
    expect([answer.status, answer.body.code]).toEqual([403, 'origin.foreign']);
  });
});

describe('a body', () => {
  it('names every bad field with its path, its code and a sentence', async () => {
    const body = { siteId: 7, name: '', zone: 'Nowhere/Here', one: 1, two: 2 };
    const answer = await clinician.post(enrol).send(body).expect(422);
    const problem = Problem.parse(answer.body);
    expect(answer.type).toBe('application/problem+json');
    expect(problem.fields?.map(({ path, code }) => [path, code])).toEqual(
      expect.arrayContaining([
        ['siteId', 'type.string'],
        ['name', 'too_small.text'],
        ['email', 'missing'],
        ['zone', 'unknown_zone'],
        ['one', 'unknown_field'],
        ['two', 'unknown_field'],
      ]),
    );
    expect(problem.fields?.every(({ message }) => /^[A-Z].*\.$/.test(message) && !message.includes('{{'))).toBe(true);
  });

  it.each([
    ['cut off in the middle', '{"name":', 'application/json', 400, 'body.malformed'],
    ['plain text', 'name=x', 'text/plain', 415, 'content_type.json'],
    [
      'larger than a megabyte',
      JSON.stringify({ name: 'x'.repeat(1_000_001) }),
      'application/json',
      413,
      'body.too_large',
    ],
    ['a list', '[]', 'application/json', 422, 'invalid'],
    ['text with NUL', '{"name":"a\\u0000b"}', 'application/json', 422, 'invalid'],
    ['half a surrogate pair', '{"name":"\\ud800"}', 'application/json', 422, 'invalid'],
    ['nested a thousand deep', `${'['.repeat(1000)}${']'.repeat(1000)}`, 'application/json', 422, 'invalid'],
    ['a number beyond all numbers', '{"name":1e999}', 'application/json', 422, 'invalid'],
    ['a key of the prototype', '{"__proto__":{"a":1},"constructor":1}', 'application/json', 422, 'invalid'],
  ])('that is %s is refused in plain words', async (_what, body, type, status, code) => {
    const answer = await clinician.post(enrol).set('content-type', type).send(body);
    expect([answer.status, answer.body.code]).toEqual([status, code]);
  });
});

describe('an address', () => {
  it.each([
    ['that nothing answers', 'get', '/api/nothing', 404, 'not_found'],
    ['with an id that cannot be one', 'get', '/api/participants/17', 404, 'not_found'],
    ['with a broken escape', 'get', '/api/participants/%E0%A4%A', 400, 'address.malformed'],
    ['with a question nobody asked for', 'get', '/api/participants?colour=red', 422, 'invalid'],
    ['with a page of nothing', 'get', '/api/participants?limit=0', 422, 'invalid'],
    ['with a cursor of somebody’s own making', 'get', '/api/audit?cursor=WyJhIl0', 422, 'invalid'],
  ] as const)('%s is refused', async (_what, method, path, status, code) => {
    const answer = await clinician[method](path);
    expect([answer.status, answer.body.code]).toEqual([status, code]);
  });

  it('says what is possible when the method is not', async () => {
    const answer = await clinician.delete('/api/me').expect(405);
    expect(answer.headers.allow).toBe('GET, HEAD');
  });
});

describe('the door', () => {
  it('is shut to whoever is not signed in', async () => {
    const answer = await at.browser().get('/api/worklist').expect(401);
    expect(answer.body.code).toBe('not_signed_in');
  });

  it('is shut to a role that is not listed, before the body is looked at, and that is on record', async () => {
    const answer = await clinician.post('/api/staff').send('not even').expect(403);
    expect(answer.body.code).toBe('role.not_allowed');
    const entries = await at.rows(
      `select kind, after->>'code' as code from audit_entry where action = 'site.invite-staff' and actor_role = 'clinician'`,
    );
    expect(entries).toEqual([{ kind: 'refusal', code: 'role.not_allowed' }]);
  });

  it('keeps answers out of caches and pages out of frames', async () => {
    const { headers } = await clinician.get('/api/me').expect(200);
    expect(headers['cache-control']).toBe('no-store');
    expect(headers['content-security-policy']).toContain("frame-ancestors 'none'");
    expect(headers['content-security-policy']).not.toContain('unsafe');
    expect(headers['x-content-type-options']).toBe('nosniff');
  });

  it('says that the house is starting until it is open', async () => {
    at.house.shut();
    const health = await request(at.house.app).get('/api/health');
    const other = await clinician.get('/api/me');
    at.house.open();
    expect([health.status, health.body.status]).toEqual([503, 'starting']);
    expect([other.status, other.body.code, other.headers['retry-after']]).toEqual([503, 'starting', '2']);
  });
});

describe('the description of the doors', () => {
  it('names every door and no other, with who may use it', async () => {
    const { body } = await request(at.house.app).get('/api/openapi.json').expect(200);
    const described = Object.entries<Record<string, { operationId: string }>>(body.paths)
      .filter(([path]) => !path.startsWith('/api/auth/'))
      .flatMap(([, operations]) => Object.values(operations).map(({ operationId }) => operationId));
    const doors = Object.values(api).map(({ contract }) => contract.name);
    expect([...described].sort()).toEqual([...doors].sort());
  });

  it('leaves the demo’s doors out, and they do not exist, without the demo', async () => {
    const plain = await openTestHouse({ DEMO: '0' });
    try {
      const { body } = await request(plain.house.app).get('/api/openapi.json').expect(200);
      expect(Object.keys(body.paths).filter((path) => path.includes('/demo/'))).toEqual([]);
      await request(plain.house.app).get('/api/demo/accounts').expect(404);
      await request(plain.house.app).get('/api/demo/mail').expect(404);
      await request(plain.house.app)
        .post('/api/demo/clock')
        .set('origin', origin)
        .send({ advanceSeconds: 1 })
        .expect(404);
    } finally {
      await plain.close();
    }
  });
});
