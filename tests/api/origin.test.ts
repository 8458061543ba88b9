// Where a request comes from: what changes something must come from our own pages, and what only reads changes nothing.

import request from 'supertest';
import { authDoors } from '@/server/auth/doors';
import { readEnv } from '@/server/env';
import { createHouse } from '@/server/house/open-house';
import type { ContractShape } from '@/shared/contracts/contract';
import { doors } from '@/shared/contracts/doors';
import { secretOfTests } from '../support/clinic';
import { origin } from '../support/house';
import { knockAt, pathOf } from '../support/knock';
import { allKnocks } from '../support/samples';
import { fingerprints } from '../support/tables';
import { openWorld, type World } from '../support/world';

const contracts: readonly ContractShape[] = Object.values(doors);
const anyId = '00000000-0000-4000-8000-000000000000';
const unsafe = [
  ...contracts
    .filter(({ method }) => method !== 'GET')
    .map((contract) => {
      const names = [...contract.path.matchAll(/:([A-Za-z]+)/g)].map(([, name]) => name ?? '');
      return pathOf(contract, { params: Object.fromEntries(names.map((name) => [name, anyId])) });
    }),
  ...authDoors.map((door) => `/api/auth${door.path}`),
];
let world: World;

beforeAll(async () => {
  world = await openWorld();
}, 120_000);
afterAll(() => world.close());

/** What a page sends that can be sent by mistake: nothing that a door would take for good. */
const send = (address: string, headers: Record<string, string>) =>
  world.bare().post(address).set(headers).type('application/json').send('{"unknown":1}');
const codes = async (headers: Record<string, string>) => {
  const found: [string, number, unknown][] = [];
  for (const address of unsafe) {
    const { status, body } = await send(address, headers);
    found.push([address, status, body.code]);
  }
  return found;
};
const all = (status: number, code: string) => unsafe.map((address) => [address, status, code]);

describe('a door that changes something', () => {
  it('is shut to a request that does not say where it comes from', async () => {
    expect(unsafe.length).toBeGreaterThan(45);
    expect(await codes({})).toEqual(all(403, 'origin.missing'));
  });

  it.each([
    'https://elsewhere.example',
    'null',
    '',
    `${origin}.elsewhere.example`,
    origin.replace('http:', 'https:'),
    'http://127.0.0.1:8081',
  ])('is shut to a request from %j', async (foreign) => {
    expect(await codes({ origin: foreign })).toEqual(all(403, 'origin.foreign'));
  });

  it('is shut to another site even where the browser calls that its own', async () => {
    expect(await codes({ origin: 'https://elsewhere.example', 'sec-fetch-site': 'same-origin' })).toEqual(
      all(403, 'origin.foreign'),
    );
  });

  it.each(['same-site', 'cross-site', 'none', 'Same-Origin'])(
    'is shut without an origin to a browser that says %s',
    async (fetched) => {
      expect(await codes({ 'sec-fetch-site': fetched })).toEqual(all(403, 'origin.missing'));
    },
  );

  it.each<Record<string, string>>([{ origin }, { 'sec-fetch-site': 'same-origin' }])(
    'looks further at a request with %j',
    async (headers) => {
      const found = await codes(headers);
      expect(
        found.filter(([, status, code]) => status >= 500 || String(code).startsWith('origin.') || code === undefined),
      ).toEqual([]);
    },
  );

  it('asks the same of the other methods that could change something', async () => {
    for (const method of ['put', 'patch', 'delete'] as const) {
      const { status, body } = await world.bare()[method]('/api/me');
      expect([method, status, body.code]).toEqual([method, 403, 'origin.missing']);
    }
  });
});

describe('a server that was not told its address', () => {
  it('takes for its own the one that it is called by, and no other', async () => {
    const DATABASE_URL = world.clinic.client.pool.options.connectionString ?? '';
    const house = createHouse(readEnv({ DATABASE_URL, DEMO: '1', SECRET: secretOfTests, LOG_LEVEL: 'silent' }));
    const codeFor = async (host: string, from: string) => {
      const { body } = await request(house.app).post('/api/invitations/look').set({ host, origin: from }).send({});
      return body.code;
    };
    try {
      expect(await codeFor('clinic.example', 'http://clinic.example')).toBe('invalid');
      expect(await codeFor('clinic.example:8443', 'http://clinic.example:8443')).toBe('invalid');
      expect(await codeFor('clinic.example', 'http://clinic.example:8443')).toBe('origin.foreign');
      expect(await codeFor('clinic.example', 'http://elsewhere.example')).toBe('origin.foreign');
    } finally {
      await house.close();
    }
  });
});

describe('a door that reads', () => {
  it('changes nothing, whoever may read by it, wherever they come from', async () => {
    const reads = allKnocks().filter(({ contract }) => contract.method === 'GET');
    expect(reads.length).toBeGreaterThan(30);
    for (const { sample } of reads) await sample.ask(world, sample.by);
    const before = await fingerprints(world.clinic);
    expect(Object.keys(before).length).toBeGreaterThan(30);
    for (const { door, contract, sample } of reads) {
      const answer = await knockAt(await world.as(sample.by), contract, await sample.ask(world, sample.by)).set(
        'origin',
        'https://elsewhere.example',
      );
      expect([door, answer.status]).toEqual([door, 200]);
    }
    expect(await fingerprints(world.clinic)).toEqual(before);
  });
});
