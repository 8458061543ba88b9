// What comes in and is not what a door asks for: refused in plain words that name the place, and nothing is written of it.

import { randomUUID } from 'node:crypto';
import sharp from 'sharp';
import type { Response, Test } from 'supertest';
import { z } from 'zod';
import { hashOfMailToken } from '@/server/invitation';
import { authDoors } from '@/server/auth/doors';
import { acceptInvitation, lookAtInvitation } from '@/shared/contracts/account';
import type { ContractShape } from '@/shared/contracts/contract';
import { sendEvents } from '@/shared/contracts/permit';
import { signPrescription, writePrescription } from '@/shared/contracts/prescription';
import { Problem } from '@/shared/contracts/problem';
import { addPhoto } from '@/shared/contracts/session';
import { changeProtocol } from '@/shared/contracts/site';
import { password } from '../support/house';
import { knockAt, pathOf } from '../support/knock';
import { prescriptionFor } from '../support/prescribing';
import { allKnocks, invite, samples, titled, type Asked, type Sample } from '../support/samples';
import { another, spoilt, textOf, withNegativeZero } from '../support/spoil';
import { fingerprints } from '../support/tables';
import { clearTheWay } from '../support/whole-record';
import { openWorld, type Browser, type World } from '../support/world';

let world: World;
const knocks = allKnocks();
const withBody = knocks.filter(({ contract }) => contract.method === 'POST' && !contract.upload);

beforeAll(async () => {
  world = await openWorld();
}, 120_000);
afterAll(() => world.close());

/** What every refusal is, whatever it refuses; then what it says. */
function refusalOf(answer: Response) {
  expect([answer.status >= 400 && answer.status < 500, answer.status, answer.type]).toEqual([
    true,
    answer.status,
    'application/problem+json',
  ]);
  const problem = Problem.strict().parse(answer.body);
  expect(problem.status).toBe(answer.status);
  expect(problem.requestId).toBe(answer.headers['x-request-id']);
  expect(problem.code).toMatch(/^[a-z0-9_]+(\.[a-z0-9_]+)*$/);
  const sentences = [problem.title, problem.detail, ...(problem.fields ?? []).map(({ message }) => message)];
  for (const text of sentences) expect(text).toMatch(/^[A-Z0-9“][^{}]+$/);
  if (problem.code === 'invalid') expect(problem.fields?.length).toBeGreaterThan(0);
  const said = `${answer.status} ${problem.code}`;
  return { said, named: (problem.fields ?? []).map(({ path }) => path), problem };
}

async function unchanged(work: () => Promise<void>): Promise<void> {
  const before = await fingerprints(world.clinic);
  await work();
  expect(await fingerprints(world.clinic)).toEqual(before);
}

/** Bodies that are none, for any door that takes JSON. */
const unreadable: readonly [what: string, text: string, type: string, said: string][] = [
  ['not JSON', 'hello', 'application/json', '400 body.malformed'],
  ['a number beyond JSON', '{"a":NaN}', 'application/json', '400 body.malformed'],
  ['text', '{}', 'text/plain', '415 content_type.json'],
  ['a form', 'a=1', 'application/x-www-form-urlencoded', '415 content_type.json'],
  ['2 MB', JSON.stringify({ a: 'x'.repeat(2_000_000) }), 'application/json', '413 body.too_large'],
  ['a list', '[{}]', 'application/json', '422 invalid'],
  ['null', 'null', 'application/json', '422 invalid'],
  ['a word', '"yes"', 'application/json', '422 invalid'],
  ['a number', '-0', 'application/json', '422 invalid'],
  ['very deep', `{"a":${'['.repeat(5000)}${']'.repeat(5000)}}`, 'application/json', '422 invalid'],
  ['a key with NUL', '{"a\\u0000":1}', 'application/json', '422 invalid'],
];

async function isRefusedUnread(post: () => Test): Promise<void> {
  for (const [what, text, type, said] of unreadable) {
    const answer = await post().set('content-type', type).send(text);
    expect([what, refusalOf(answer).said]).toEqual([what, said]);
  }
}

const postTo = (browser: Browser, contract: ContractShape, asked: Asked) => () => browser.post(pathOf(contract, asked));

describe('a key that was used', () => {
  const once = knocks.filter(({ contract }) => contract.once);
  it('is honoured at every door that writes for somebody, but where repeating is harmless', () => {
    const doorsWithout = knocks
      .filter(({ contract }) => contract.method === 'POST' && !contract.once)
      .map(({ door }) => door);
    expect([...new Set(doorsWithout)]).toEqual([
      ...[
        'moveDemoClock',
        'lookAtInvitation',
        'acceptInvitation',
        'joinByInvitation',
        'stopMails',
        'sendEvents',
        'setCaregiverCode',
      ],
    ]);
  });

  it.each(titled(once))(
    'at %s is refused for something else, and answered alike for the same',
    async (_name, { contract, sample }) => {
      const browser = await world.as(sample.by);
      const asked = await sample.ask(world, sample.by);
      const elsewhere = once.find(
        (each) => each.sample.by === sample.by && each.contract !== contract && !each.contract.upload,
      );
      if (!elsewhere) throw new Error('somebody with one door alone');
      const askedThere = await elsewhere.sample.ask(world, sample.by);
      const key = randomUUID();
      const before = await knockAt(browser, contract, asked, key);
      const problem: unknown = before.type === 'application/problem+json' ? before.body : null;
      expect([before.status, problem]).toEqual([contract.status ?? 200, null]);
      await unchanged(async () => {
        const again = await knockAt(browser, contract, asked, key);
        expect([again.status, again.body]).toEqual([before.status, before.body]);
        const isGood = (body: unknown) => contract.body?.safeParse(body).success === true;
        const body = contract.upload ? undefined : another(asked.body ?? {}, isGood);
        const params = Object.fromEntries(Object.keys(asked.params ?? {}).map((name) => [name, randomUUID()]));
        const other: Asked = body
          ? { ...asked, body }
          : contract.upload
            ? { ...asked, file: Buffer.from('another') }
            : { ...asked, params };
        expect(refusalOf(await knockAt(browser, contract, other, key)).said).toBe('409 idempotency.other_body');
        expect(refusalOf(await knockAt(browser, elsewhere.contract, askedThere, key)).said).toBe(
          '409 idempotency.other_body',
        );
      });
    },
  );

  it('is visible text of at most 200 signs', async () => {
    const { by, ask } = first(samples.issuePermit);
    const asked = await ask(world, by);
    const browser = await world.as(by);
    const [{ contract } = { contract: undefined }] = knocks.filter(({ door }) => door === 'issuePermit');
    if (!contract) throw new Error('no door');
    await unchanged(async () => {
      for (const key of ['', 'x'.repeat(201), 'two words', 'caf\u00e9'])
        expect(refusalOf(await knockAt(browser, contract, asked, key)).named).toEqual(['Idempotency-Key']);
      expect(refusalOf(await knockAt(browser, contract, asked)).named).toEqual(['Idempotency-Key']);
    });
  });
});

describe('a body', () => {
  it.each(titled(withBody))(
    'of %s, that cannot be read or is spoilt in one place, is refused by that place, and nothing is written',
    async (_name, { contract, sample }) => {
      const asked = await sample.ask(world, sample.by);
      const browser = await world.as(sample.by);
      const good = asked.body ?? {};
      const key = contract.once ? 'spoilt' : undefined;
      await unchanged(async () => {
        await isRefusedUnread(postTo(browser, contract, asked));
        const whole = JSON.stringify(good);
        const cut = await postTo(browser, contract, asked)().type('application/json').send(whole.slice(0, -1));
        expect(refusalOf(cut).said).toBe('400 body.malformed');
        for (const odd of ['__proto__', 'constructor', 'hasOwnProperty']) {
          const text = whole === '{}' ? `{"${odd}":{"a":1}}` : whole.replace('{', `{"${odd}":{"a":1},`);
          const { said, named } = refusalOf(await knockAt(browser, contract, asked, key, text));
          expect([odd, said, named]).toEqual([odd, '422 invalid', [odd]]);
        }
        for (const { what, path, body } of spoilt(good)) {
          const fits = contract.body?.safeParse(body).success === true;
          // Left out, a field may be one that need not be there; and a very small number is a number.
          if (fits && (what === 'missing' || what === 'a fraction of nothing')) continue;
          const asSpoilt = { ...asked, body: body as Asked['body'] };
          const { said, named } = refusalOf(await knockAt(browser, contract, asSpoilt, key));
          expect([what, path, said, named.includes(path)]).toEqual([what, path, '422 invalid', true]);
        }
      });
    },
    120_000,
  );

  it('with a zero below zero in it, wherever a number stands, is taken for zero or refused, and is never a fault', async () => {
    const tried: string[] = [];
    for (const { door, contract, sample } of withBody.filter((knock) => !knock.contract.demo)) {
      // A page of a diary is written once: somebody else's, so that there is one left.
      const who = door === 'writeDiary' ? 'participant, withdrawn' : sample.by;
      const browser = await world.as(who);
      const asked = await sample.ask(world, who);
      for (const { path, body } of withNegativeZero(asked.body ?? {})) {
        const key = contract.once ? randomUUID() : undefined;
        const answer = await knockAt(browser, contract, asked, key, textOf(body));
        if (answer.status >= 300) refusalOf(answer);
        else expect([door, path, answer.text]).toEqual([door, path, expect.not.stringMatching(/-0[,}\]]/)]);
        tried.push(door);
      }
    }
    expect(new Set(tried).size).toBe(7);
    expect(tried.length).toBeGreaterThanOrEqual(45);
  }, 120_000);

  it.each(authDoors.map((door) => [door.path, door] as const))(
    'of /api/auth%s is read as strictly',
    async (_name, door) => {
      const browser = await world.as('participant, self');
      const examples: Record<string, unknown> = {
        ...{
          email: 'a@harrowmere.example',
          password,
          token: 'no such token',
          newPassword: password,
          currentPassword: password,
          code: '123456',
        },
      };
      const good = Object.fromEntries(
        Object.keys(door.body.shape).flatMap((name) => (name in examples ? [[name, examples[name]]] : [])),
      );
      const post = () => browser.post(`/api/auth${door.path}`);
      await unchanged(async () => {
        await isRefusedUnread(post);
        for (const { what, path, body } of spoilt(good)) {
          if (door.body.safeParse(body).success) continue;
          const { said, named } = refusalOf(await post().send(body as object));
          expect([what, path, said, named.includes(path)]).toEqual([what, path, '422 invalid', true]);
        }
      });
      // Still signed in: nothing of that has reached the library.
      await browser.get('/api/me').expect(200);
    },
  );
});

describe('an address', () => {
  const withParams = knocks.filter(({ contract }) => contract.params);
  it.each(titled(withParams))(
    'of %s, with an id that cannot be one, is the address of nothing',
    async (_name, { contract, sample }) => {
      const asked = await sample.ask(world, sample.by);
      const browser = await world.as(sample.by);
      await unchanged(async () => {
        for (const bad of [
          '17',
          'undefined',
          randomUUID().slice(1),
          `${randomUUID()}0`,
          "' or 1=1 --",
          '\u0000',
          '../me',
          'ä'.repeat(200),
        ]) {
          const params = Object.fromEntries(Object.keys(asked.params ?? {}).map((name) => [name, bad]));
          const answer = await knockAt(browser, contract, { ...asked, params });
          expect([bad, refusalOf(answer).said]).toEqual([bad, '404 not_found']);
        }
        const params = Object.fromEntries(Object.keys(asked.params ?? {}).map((name) => [name, randomUUID()]));
        expect(refusalOf(await knockAt(browser, contract, { ...asked, params })).said).toBe('404 not_found');
      });
    },
  );

  const lists = knocks.filter(
    ({ contract }) => contract.query instanceof z.ZodObject && 'cursor' in contract.query.shape,
  );
  const cursorOf = (values: unknown) => Buffer.from(JSON.stringify(values)).toString('base64url');
  it.each(titled(lists))(
    'of the list %s, with a cursor or a number of rows that it did not offer, is refused',
    async (_name, { contract, sample }) => {
      const asked = await sample.ask(world, sample.by);
      const browser = await world.as(sample.by);
      const at = (query: Record<string, string>) =>
        browser.get(pathOf(contract, { ...asked, query: { ...asked.query, ...query } }));
      const made = [['a'], [null, null], [1, 2], {}, 'x', ['2026-13-45', 7], ['x'.repeat(50), 1], [[], []]].map(
        cursorOf,
      );
      for (const cursor of ['x', '!', '%00', 'null', '', ...made, 'x'.repeat(301)]) {
        const { said, named } = refusalOf(await at({ cursor }));
        expect([cursor, said, named]).toEqual([cursor, '422 invalid', ['cursor']]);
      }
      for (const limit of ['0', '-1', '101', '1000', '1.5', 'all', '', '1e308']) {
        const { said, named } = refusalOf(await at({ limit }));
        expect([limit, said, [...new Set(named)]]).toEqual([limit, '422 invalid', ['limit']]);
      }
      const { said, named } = refusalOf(await at({ unheardOf: '1' }));
      expect([said, named]).toEqual(['422 invalid', ['unheardOf']]);
      await at({ limit: '100' }).expect(200);
    },
  );

  it('asked about twice in one word is not guessed at', async () => {
    const browser = await world.as('clinician, own site');
    expect(refusalOf(await browser.get('/api/participants?limit=5&limit=6')).said).toBe('422 invalid');
    expect(refusalOf(await browser.get('/api/participants?search[a]=x')).said).toBe('422 invalid');
  });
});

const first = (list: readonly Sample[]): Sample => {
  const [sample] = list;
  if (!sample) throw new Error('no sample');
  return sample;
};

describe('a version that is not the one in force', () => {
  const said = async (contract: ContractShape, asked: Asked, who: Sample['by']) => {
    const browser = await world.as(who);
    let answer = '';
    await unchanged(async () => {
      answer = refusalOf(await knockAt(browser, contract, asked)).said;
    });
    return answer;
  };

  it('is not signed: what was on the screen is another content', async () => {
    const { by, ask } = first(samples.signPrescription);
    const asked = await ask(world, by);
    expect(await said(signPrescription, { ...asked, body: { ...asked.body, contentHash: '0'.repeat(64) } }, by)).toBe(
      '409 version.stale',
    );
  });

  it('is not amended', async () => {
    const { patient, prescription } = world.record;
    const now = await world.clinic.now();
    for (const amendsId of [undefined, randomUUID()]) {
      const change = amendsId === undefined ? {} : { amendsId, reason: 'Headaches' };
      expect(
        await said(writePrescription, { body: { ...prescriptionFor(patient, now, change) } }, 'clinician, own site'),
      ).toBe('409 version.stale');
    }
    const { body, status } = await (await world.as('clinician, own site')).get(`/api/prescriptions/${prescription.id}`);
    expect([status, body.status]).toEqual([200, 'signed']);
  });

  it('of a protocol is not followed by another', async () => {
    const { by, ask } = first(samples.changeProtocol);
    const { body } = await ask(world, by);
    for (const basedOnVersion of [0, Number(body?.basedOnVersion) + 1, 1_000_000])
      expect(await said(changeProtocol, { body: { ...body, basedOnVersion } }, by)).toBe('409 version.stale');
  });
});

describe('a signature', () => {
  const signed = titled(knocks.filter(({ contract }) => contract.confirm));
  it('is asked for at three doors', () =>
    expect(signed.map(([, { door }]) => door)).toEqual(['changeProtocol', 'signPrescription', 'recordReview']));

  it.each(signed)('at %s is not given by another password', async (_name, { contract, sample }) => {
    const asked = await sample.ask(world, sample.by);
    const browser = await world.as(sample.by);
    await unchanged(async () => {
      for (const wrong of ['another password', password.toUpperCase(), ` ${password}`]) {
        const { said, named } = refusalOf(
          await knockAt(browser, contract, { ...asked, body: { ...asked.body, password: wrong } }),
        );
        expect([wrong, said, named]).toEqual([wrong, '422 invalid', ['password']]);
      }
    });
  });
});

describe('an invitation', () => {
  const accept = (token: string) => ({ body: { token, name: 'Nell Carder', password, language: 'en' } });
  const refused = async (token: string) => {
    const browser = await world.as('anyone');
    const found: string[] = [];
    await unchanged(async () => {
      found.push(refusalOf(await knockAt(browser, lookAtInvitation, { body: { token } })).said);
      found.push(refusalOf(await knockAt(browser, acceptInvitation, accept(token))).said);
    });
    return found;
  };

  it('that nobody sent opens nothing', async () => {
    expect(await refused('x'.repeat(43))).toEqual(['409 invitation.unknown', '409 invitation.unknown']);
  });

  it('is over after its days, and says so', async () => {
    expect(await refused(await invite(world, { days: -1 }))).toEqual([
      '409 invitation.expired',
      '409 invitation.expired',
    ]);
  });

  it('is over when another has taken its place', async () => {
    const token = await invite(world);
    const at = await world.clinic.now();
    await world.clinic.client.pool.query(
      `update invitation set closed_at = $2, closed_why = 'replaced' where token_hash = $1`,
      [hashOfMailToken(token), at],
    );
    expect(await refused(token)).toEqual(['409 invitation.expired', '409 invitation.expired']);
  });

  it('is accepted once', async () => {
    const token = await invite(world);
    await knockAt(await world.as('anyone'), acceptInvitation, accept(token)).expect(201);
    expect(await refused(token)).toEqual(['409 invitation.used', '409 invitation.used']);
  });

  it('asks for a password that is not too short and not too long', async () => {
    const token = await invite(world);
    const browser = await world.as('anyone');
    await unchanged(async () => {
      for (const short of ['', 'elevenchars', 'x'.repeat(129)]) {
        const { said, named } = refusalOf(
          await knockAt(browser, acceptInvitation, { body: { ...accept(token).body, password: short } }),
        );
        expect([said, named]).toEqual(['422 invalid', ['password']]);
      }
    });
  });
});

describe('a photo', () => {
  const red = { r: 180, g: 60, b: 50 };
  const picture = sharp({ create: { width: 300, height: 300, channels: 3, background: red } });
  const upload = async (make: (sent: Test) => Test) => {
    const browser = await world.as('participant, self');
    const { sessionId } = world.record.permit;
    const found: { said: string; named: string[] }[] = [];
    await unchanged(async () => {
      found.push(refusalOf(await make(browser.post(pathOf(addPhoto, { params: { sessionId } })))));
    });
    const [{ said, named } = { said: '', named: [] }] = found;
    return [said, ...named];
  };
  const file =
    (bytes: Buffer, name = 'skin.jpg', contentType = 'image/jpeg') =>
    (sent: Test) =>
      sent.field('consent', 'true').attach('file', bytes, { filename: name, contentType });

  it('of more than 8 MB is refused', async () => {
    const jpeg = await picture.jpeg().toBuffer();
    expect(await upload(file(Buffer.concat([jpeg, Buffer.alloc(8_000_001)])))).toEqual(['413 file.too_large']);
  });

  it('of another type is refused, whatever it calls itself', async () => {
    const others = [
      await picture.gif().toBuffer(),
      await picture.tiff().toBuffer(),
      Buffer.from('<svg xmlns="http://www.w3.org/2000/svg"/>'),
    ];
    for (const bytes of [...others, Buffer.from('MZ'), Buffer.from('%PDF-1.7'), Buffer.alloc(0)])
      expect(await upload(file(bytes))).toEqual(['415 photo.type_not_allowed']);
  });

  it('that only begins like one is refused', async () => {
    const jpeg = await picture.jpeg().toBuffer();
    for (const bytes of [
      jpeg.subarray(0, 200),
      Buffer.concat([jpeg.subarray(0, 20), Buffer.alloc(500, 7)]),
      Buffer.from('\u0089PNG\r\n\u001a\n', 'latin1'),
    ])
      expect(await upload(file(bytes))).toEqual(['415 photo.unreadable']);
  });

  it('is one file, in its field, with the consent and nothing else', async () => {
    const jpeg = await picture.jpeg().toBuffer();
    expect(await upload((sent) => sent.field('consent', 'true'))).toEqual(['422 invalid', 'file']);
    expect(await upload((sent) => sent.attach('file', jpeg, 'a.jpg'))).toEqual(['422 invalid', 'consent']);
    expect(await upload((sent) => file(jpeg)(sent.field('consent', 'no')))).toEqual(['422 invalid', 'consent']);
    expect(await upload((sent) => file(jpeg)(sent.field('unheardOf', '1')))).toEqual(['422 invalid', 'unheardOf']);
    expect(await upload((sent) => file(jpeg)(sent.attach('second', jpeg, 'b.jpg')))).toEqual(['422 invalid', 'second']);
    expect(await upload((sent) => file(jpeg)(sent.attach('file', jpeg, 'b.jpg')))).toEqual(['422 invalid', 'file']);
  });

  it('is not JSON, and not a form that breaks off', async () => {
    expect(await upload((sent) => sent.send({ consent: 'true' }))).toEqual(['415 content_type.form']);
    const broken = '--b\r\nContent-Disposition: form-data; name="consent"\r\n\r\ntr';
    expect(await upload((sent) => sent.set('content-type', 'multipart/form-data; boundary=b').send(broken))).toEqual([
      '400 body.malformed_form',
    ]);
    expect(await upload((sent) => sent.set('content-type', 'multipart/form-data').send(broken))).toEqual([
      '400 body.malformed_form',
    ]);
  });
});

describe('a request for a permit', () => {
  it('with what is not the asker’s is refused or not found, and reserves nothing', async () => {
    const good = await clearTheWay(world.clinic, world.record);
    const browser = await world.as('participant, self');
    const [{ contract } = { contract: undefined }] = knocks.filter(({ door }) => door === 'issuePermit');
    if (!contract) throw new Error('no door');
    await unchanged(async () => {
      const said = async (change: Record<string, unknown>) =>
        refusalOf(await knockAt(browser, contract, { body: { ...good, ...change } }, randomUUID())).said;
      expect(await said({ courseId: world.spare.courseId })).toBe('404 not_found');
      expect(await said({ courseId: randomUUID() })).toBe('404 not_found');
      expect(await said({ precheckId: randomUUID() })).toBe('409 clearance.refused');
      expect(await said({ deviceId: world.spare.deviceId })).toBe('409 clearance.refused');
    });
  });
});

describe('an event of a session', () => {
  it('from the future is refused by its place, and the batch leaves nothing', async () => {
    const { patient } = world.record;
    const [live] = await world.clinic.rows(
      { id: z.string() },
      'select id from permit where participant_id = $1 and closed_at is null',
      [patient.participantId],
    );
    const browser = await world.as('participant, self');
    const told = { sequence: 0, kind: 'sensation', sensation: 'itching', strength: 1 };
    await unchanged(async () => {
      for (const atSeconds of [3600, 86_400]) {
        const events = [{ ...told, id: randomUUID(), atSeconds }];
        const asked = { params: { permitId: live?.id ?? '' }, body: { events } };
        const { said, named, problem } = refusalOf(await knockAt(browser, sendEvents, asked));
        expect([said, named]).toEqual(['422 invalid', ['events.0.atSeconds']]);
        expect(problem.fields?.[0]?.code).toBe('event_from_the_future');
      }
    });
  });
});
