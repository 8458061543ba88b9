// The doors themselves: what Express opens is what is listed, and each screen has its file; the demo's doors are the demo's; and what
// happens to a person's record is on record, once.

import { randomUUID } from 'node:crypto';
import { readdirSync } from 'node:fs';
import path from 'node:path';
import { authDoors } from '@/server/auth/doors';
import { readEnv } from '@/server/env';
import { createHouse } from '@/server/house/open-house';
import type { ContractShape } from '@/shared/contracts/contract';
import { doors } from '@/shared/contracts/doors';
import { screens } from '@/shared/contracts/screens';
import { isStaffRole } from '@/shared/values/roles';
import request from 'supertest';
import { z } from 'zod';
import { secretOfTests } from '../support/clinic';
import { origin, password } from '../support/house';
import { knockAt, pathOf } from '../support/knock';
import { allKnocks, nameOf, titled, type Knock } from '../support/samples';
import { openWorld, type World } from '../support/world';

const contracts: readonly ContractShape[] = Object.values(doors);
const knocks = allKnocks();
let world: World;

beforeAll(async () => {
  world = await openWorld();
}, 120_000);
afterAll(() => world.close());

function houseWith(settings: Record<string, string>) {
  const DATABASE_URL = world.clinic.client.pool.options.connectionString ?? '';
  return createHouse(
    readEnv({ DATABASE_URL, SECRET: secretOfTests, BASE_URL: origin, LOG_LEVEL: 'silent', ...settings }),
  );
}

/** As Express keeps its routes: a layer has a route, or a handle with layers of its own. */
interface Layer {
  route?: { path: string; methods: Record<string, boolean> };
  handle?: { stack?: Layer[] };
}

function routesOf(layers: readonly Layer[]): string[] {
  return layers.flatMap(({ route, handle }) => {
    if (!route) return routesOf(handle?.stack ?? []);
    const methods = Object.keys(route.methods).filter((method) => method !== '_all' && route.methods[method]);
    return methods.map((method) => `${method.toUpperCase()} ${route.path}`);
  });
}

describe('the list of doors', () => {
  it('is what Express opens, one route a door and no other', async () => {
    const house = houseWith({ DEMO: '1' });
    try {
      const opened = routesOf((house.app as unknown as { router: { stack: Layer[] } }).router.stack);
      const listed = contracts.map(({ method, path: address }) => `${method} ${address}`);
      const ofSignIn = authDoors.map((door) => `POST ${door.path}`);
      expect(opened.sort()).toEqual([...listed, ...ofSignIn, 'GET /api/openapi.json', 'GET /{*rest}'].sort());
    } finally {
      await house.close();
    }
  });

  it('has no two doors of one name or one address, and each says what it is for', () => {
    expect(new Set(contracts.map(({ name }) => name)).size).toBe(contracts.length);
    expect(new Set(contracts.map(({ method, path: address }) => `${method} ${address}`)).size).toBe(contracts.length);
    for (const { name, about } of contracts)
      expect([name, about]).toEqual([name, expect.stringMatching(/^[A-Z0-9“].{10,}[.?]$/)]);
  });

  it('has a body for whatever is sent, and none for what is read', () => {
    for (const { name, method, body } of contracts)
      expect([name, body !== undefined]).toEqual([name, method === 'POST']);
  });
});

describe('the list of screens', () => {
  const folder = path.resolve(__dirname, '../../app');
  const files = readdirSync(folder, { recursive: true, encoding: 'utf8' })
    .filter((file) => file.endsWith('.tsx'))
    .map((file) =>
      file
        .split(path.sep)
        .join('/')
        .replace(/\.tsx$/, ''),
    )
    .filter((file) => !/(^|\/)(_layout|\+not-found)$/.test(file));

  it('is what app/ holds, each in its group, both ways', () => {
    const found = files.map((file) => {
      const [group = ''] = /^\([a-z]+\)/.exec(file) ?? [];
      const address = file
        .replace(group, '')
        .replace(/(^|\/)index$/, '')
        .replace(/^\//, '');
      return `${group} /${address}`;
    });
    expect(found.sort()).toEqual(screens.map((screen) => `${screen.group} ${screen.path}`).sort());
  });
});

describe('without the demo', () => {
  it('the demo’s doors do not exist, whoever knocks', async () => {
    const house = houseWith({ DEMO: '0' });
    try {
      const ofDemo = knocks.filter(({ contract }) => contract.demo);
      expect(ofDemo.map(({ door }) => door).sort()).toEqual(['listDemoAccounts', 'listDemoMail', 'moveDemoClock']);
      for (const { contract, sample } of ofDemo) {
        const asked = await sample.ask(world, 'anyone');
        const answer = await knockAt(request.agent(house.app).set('origin', origin), contract, asked);
        expect([contract.path, answer.status, answer.body.code]).toEqual([contract.path, 404, 'not_found']);
      }
    } finally {
      await house.close();
    }
  });

  it('staff who have not set up the second factor pass no door but the one that tells them so', async () => {
    const house = houseWith({ DEMO: '0' });
    try {
      const browser = request.agent(house.app).set('origin', origin);
      const { email } = world.people['clinician, own site'];
      await browser.post('/api/auth/sign-in/email').send({ email, password }).expect(200);
      const forStaff = contracts.filter(
        ({ who, reach, demo }) =>
          !demo && reach !== 'open' && who.some((role) => role !== 'anyone' && isStaffRole(role)),
      );
      expect(forStaff.length).toBeGreaterThan(40);
      for (const contract of forStaff) {
        const id = '00000000-0000-4000-8000-000000000000';
        const params = Object.fromEntries(
          [...contract.path.matchAll(/:([A-Za-z]+)/g)].map(([, name]) => [name ?? '', id]),
        );
        const address = pathOf(contract, { params });
        const answer = contract.method === 'GET' ? await browser.get(address) : await browser.post(address).send({});
        const passes = contract.name === 'account.read-me';
        expect([contract.name, answer.body.code]).toEqual([
          contract.name,
          passes ? undefined : 'second_factor.required',
        ]);
      }
    } finally {
      await house.close();
    }
  });
});

/** What the trail holds of one request, by its id. */
async function entriesOf(requestId: string) {
  const shape = {
    chain: z.string(),
    kind: z.string(),
    action: z.string(),
    actor_id: z.string().nullable(),
    participant_id: z.string().nullable(),
  };
  return world.clinic.rows(
    shape,
    'select chain, kind, action, actor_id, participant_id from audit_entry where request_id = $1',
    [requestId],
  );
}

/** Doors that a participant alone may use are about their own record, whether they name it or not. */
const isOfPerson = ({ contract, sample }: Knock) =>
  sample.names === 'person' ||
  (contract.who.length === 1 && contract.who[0] === 'participant') ||
  sample.by === 'participant, self';

async function pass(knock: Knock) {
  const { contract, sample } = knock;
  const asked = await sample.ask(world, sample.by);
  const answer = await knockAt(await world.as(sample.by), contract, asked, contract.once ? randomUUID() : undefined);
  const { code, fields } =
    answer.type === 'application/problem+json' ? answer.body : { code: undefined, fields: undefined };
  expect([nameOf(knock), answer.status, code, fields]).toEqual([
    nameOf(knock),
    contract.status ?? 200,
    undefined,
    undefined,
  ]);
  return entriesOf(String(answer.headers['x-request-id'] ?? ''));
}

/** Who am I is no reading of a record: a page asks it each time it opens. */
const reads = knocks.filter((knock) => knock.contract.method === 'GET' && isOfPerson(knock) && knock.door !== 'readMe');
const writes = knocks.filter((knock) => knock.contract.method === 'POST' && isOfPerson(knock));
const lists: readonly string[] = ['listParticipants', 'readWorklist', 'readAudit', 'readSiteReport', 'exportSessions'];

describe('a reading of a person’s record', () => {
  it.each(titled(reads))('by %s, is on record once, by whom and whose', async (_name, knock) => {
    const { patient } = world.record;
    const { accountId } = world.people[knock.sample.by === 'anyone' ? 'participant, self' : knock.sample.by];
    const entry = {
      kind: 'read',
      action: knock.contract.name,
      actor_id: accountId,
      participant_id: patient.participantId,
    };
    expect(await pass(knock)).toEqual([{ ...entry, chain: `participant:${patient.participantId}` }]);
  });

  it.each(titled(knocks.filter(({ door, sample }) => lists.includes(door) && sample.names !== 'person')))(
    'in a list, by %s, is on record once in the site’s chain',
    async (_name, knock) => {
      const found = await pass(knock);
      expect(found.map(({ chain, kind, action }) => [chain, kind, action])).toEqual([
        [`site:${world.siteId}`, 'read', knock.contract.name],
      ]);
    },
  );
});

describe('a writing to a person’s record', () => {
  it.each(titled(writes))('by %s, is on record once, by whom', async (_name, knock) => {
    const { accountId } = world.people[knock.sample.by === 'anyone' ? 'participant, self' : knock.sample.by];
    const found = await pass(knock);
    expect(found.map(({ kind, action, actor_id: by }) => [kind, action, by])).toEqual([
      ['write', knock.contract.name, accountId],
    ]);
    expect(found[0]?.chain).toBe(`participant:${found[0]?.participant_id ?? 'of nobody'}`);
  });
});

describe('a writing to a site’s or the house’s things', () => {
  const others = knocks.filter(
    ({ contract, sample, door }) =>
      contract.method === 'POST' &&
      !contract.demo &&
      door !== 'lookAtInvitation' &&
      !writes.some((each) => each.sample === sample),
  );
  it.each(titled(others))('by %s, is on record', async (_name, knock) => {
    const found = await pass(knock);
    expect(found.length).toBeGreaterThan(0);
    for (const { kind, action } of found) expect([kind, action]).toEqual(['write', knock.contract.name]);
  });
});
