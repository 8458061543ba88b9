// The description of all doors: whole, well formed by OpenAPI 3.1, and with examples that its own schemas accept.

import { z } from 'zod';
import { authDoors } from '@/server/auth/doors';
import type { ContractShape } from '@/shared/contracts/contract';
import { doors } from '@/shared/contracts/doors';
import { openTestHouse, type TestHouse } from '../support/house';
import { misfits, schemaProblems } from '../support/json-schema';

const Schema = z.union([z.record(z.string(), z.unknown()), z.boolean()]);
const Media = z.strictObject({ schema: Schema, example: z.unknown().optional() });
const Content = z.record(z.string(), Media);
const Answer = z.union([
  z.strictObject({ $ref: z.string() }),
  z.strictObject({ description: z.string().min(1), content: Content }),
]);
const Operation = z.strictObject({
  operationId: z.string(),
  tags: z.array(z.string()).min(1),
  summary: z.string().min(1),
  description: z.string().optional(),
  'x-roles': z.array(z.string()).optional(),
  'x-refusals': z.array(z.string()).optional(),
  security: z.array(z.record(z.string(), z.array(z.string()))),
  parameters: z
    .array(
      z.strictObject({
        name: z.string(),
        in: z.enum(['path', 'query', 'header']),
        required: z.boolean(),
        schema: Schema,
        description: z.string().optional(),
      }),
    )
    .optional(),
  requestBody: z.strictObject({ required: z.literal(true), content: Content }).optional(),
  responses: z.record(z.string().regex(/^[1-5]\d\d$/), Answer),
});
const Description = z.strictObject({
  openapi: z.string().regex(/^3\.1\.\d+$/),
  info: z.strictObject({ title: z.literal('Rampwell'), version: z.string().min(1), description: z.string().min(1) }),
  servers: z.array(z.strictObject({ url: z.url() })).min(1),
  paths: z.record(z.string().regex(/^\/api\/[a-zA-Z0-9/{}.-]+$/), z.partialRecord(z.enum(['get', 'post']), Operation)),
  components: z.strictObject({
    securitySchemes: z.record(
      z.string(),
      z.strictObject({ type: z.literal('apiKey'), in: z.literal('cookie'), name: z.string() }),
    ),
    schemas: z.record(z.string(), Schema),
    responses: z.record(z.string(), z.strictObject({ description: z.string().min(1), content: Content })),
  }),
});
type Operation = z.infer<typeof Operation>;

let at: TestHouse;
let described: z.infer<typeof Description>;

beforeAll(async () => {
  at = await openTestHouse();
  const answer = await at.browser().get('/api/openapi.json').expect(200);
  expect(answer.type).toBe('application/json');
  described = Description.parse(answer.body);
});
afterAll(() => at.close());

const contracts: readonly ContractShape[] = Object.values(doors);
const addressOf = ({ path }: ContractShape) => path.replace(/:([A-Za-z]+)/g, '{$1}');
const operations = () =>
  Object.entries(described.paths).flatMap(([path, methods]) =>
    Object.entries(methods).flatMap(([method, operation]) =>
      operation ? [{ path, name: `${method.toUpperCase()} ${path}`, operation }] : [],
    ),
  );
function operationOf(contract: ContractShape): Operation {
  const found = described.paths[addressOf(contract)]?.[contract.method === 'GET' ? 'get' : 'post'];
  if (!found) throw new Error(`${contract.name} is not described`);
  return found;
}
const goodAnswer = ({ responses }: Operation) => {
  const [content] = Object.entries(responses).flatMap(([status, answer]) =>
    status.startsWith('2') && 'content' in answer ? [answer.content] : [],
  );
  const [media] = Object.entries(content ?? {}).map(([type, one]) => ({ type, ...one }));
  return media;
};

describe('the description', () => {
  it('has every door and the doors of sign-in, each under a name of its own, and no other', () => {
    const found = operations().map(({ name }) => name);
    const listed = contracts.map((contract) => `${contract.method} ${addressOf(contract)}`);
    expect(found.sort()).toEqual([...listed, ...authDoors.map(({ path }) => `POST /api/auth${path}`)].sort());
    const ids = operations().map(({ operation }) => operation.operationId);
    expect(new Set(ids).size).toBe(ids.length);
  });

  it('names for each door its roles, and asks for a session where somebody must be signed in', () => {
    for (const contract of contracts) {
      const { security, 'x-roles': roles, 'x-refusals': refusals } = operationOf(contract);
      expect([contract.name, roles, refusals]).toEqual([contract.name, contract.who, contract.refusals ?? []]);
      expect([contract.name, security]).toEqual([
        contract.name,
        contract.who.includes('anyone') ? [] : [{ session: [] }],
      ]);
    }
  });

  it('has for each door what goes in and what comes out', () => {
    for (const contract of contracts) {
      const operation = operationOf(contract);
      const sent = Object.keys(operation.requestBody?.content ?? {});
      const expected = contract.method === 'GET' ? [] : [contract.upload ? 'multipart/form-data' : 'application/json'];
      expect([contract.name, sent]).toEqual([contract.name, expected]);
      const media = goodAnswer(operation);
      expect([contract.name, media?.type]).toEqual([contract.name, contract.raw ? media?.type : 'application/json']);
      expect([contract.name, Object.keys(operation.responses)]).toEqual([
        contract.name,
        expect.arrayContaining([String(contract.status ?? 200), '422', '503']),
      ]);
    }
  });

  it('has a parameter for each part of an address in braces, and for the key where one is honoured', () => {
    for (const { path, name, operation } of operations()) {
      const { parameters = [] } = operation;
      const inPath = parameters.filter((one) => one.in === 'path');
      expect([name, inPath.map((one) => one.name).sort()]).toEqual([
        name,
        [...path.matchAll(/\{([a-zA-Z]+)\}/g)].map(([, part]) => part).sort(),
      ]);
      for (const { name: part, required } of inPath) expect([name, part, required]).toEqual([name, part, true]);
      expect(new Set(parameters.map((one) => `${one.in} ${one.name}`)).size).toBe(parameters.length);
    }
    for (const contract of contracts) {
      const key = operationOf(contract).parameters?.find(
        (one) => one.in === 'header' && one.name === 'Idempotency-Key',
      );
      expect([contract.name, key?.required]).toEqual([
        contract.name,
        contract.once ? contract.once === 'required' : undefined,
      ]);
      const query = contract.query instanceof z.ZodObject ? Object.keys(contract.query.shape) : [];
      const named = operationOf(contract).parameters?.flatMap((one) => (one.in === 'query' ? [one.name] : []));
      expect([contract.name, named]).toEqual([contract.name, query]);
    }
  });

  it('holds schemas that are schemas, in every place', () => {
    const found = operations().flatMap(({ name, operation }) => [
      ...(operation.parameters ?? []).flatMap((one) => schemaProblems(one.schema, `${name} ${one.name}`)),
      ...Object.values(operation.requestBody?.content ?? {}).flatMap(({ schema }) =>
        schemaProblems(schema, `${name} body`),
      ),
      ...Object.values(operation.responses).flatMap((answer) =>
        'content' in answer
          ? Object.values(answer.content).flatMap(({ schema }) => schemaProblems(schema, `${name} answer`))
          : [],
      ),
    ]);
    expect(found).toEqual([]);
    expect(
      Object.entries(described.components.schemas).flatMap(([name, schema]) => schemaProblems(schema, name)),
    ).toEqual([]);
  });

  it('refers only to what it holds, problems among it', () => {
    const text = JSON.stringify(described);
    const refs = new Set([...text.matchAll(/"\$ref":"([^"]+)"/g)].map(([, ref]) => ref ?? ''));
    expect(refs.size).toBeGreaterThan(8);
    for (const ref of refs) {
      const [, , kind, name] = ref.split('/');
      const { schemas, responses } = described.components;
      expect([ref, kind === 'schemas' ? name && name in schemas : name && name in responses]).toEqual([ref, true]);
    }
    for (const [name, { content }] of Object.entries(described.components.responses))
      expect([name, Object.keys(content)]).toEqual([name, ['application/problem+json']]);
  });

  it('is strict about bodies: none of them takes a field that it does not know', () => {
    const loose = (schema: unknown): boolean => {
      if (typeof schema !== 'object' || schema === null) return false;
      if ('properties' in schema && !('additionalProperties' in schema && schema.additionalProperties === false))
        return true;
      return Object.values(schema).some(loose);
    };
    const found = operations().filter(({ operation }) =>
      Object.entries(operation.requestBody?.content ?? {}).some(
        ([type, { schema }]) => type === 'application/json' && loose(schema),
      ),
    );
    expect(found.map(({ name }) => name)).toEqual([]);
  });
});

/** What others build on: a body where something is sent, and an answer. */
const fixed: readonly (readonly [method: 'get' | 'post', path: string])[] = [
  ['get', '/api/health'],
  ['get', '/api/me'],
  ['get', '/api/clearance'],
  ['post', '/api/prechecks'],
  ['post', '/api/permits'],
  ['post', '/api/permits/{permitId}/events'],
  ['post', '/api/sessions/{sessionId}/diary'],
  ['get', '/api/worklist'],
  ['post', '/api/prescriptions'],
  ['post', '/api/prescriptions/{prescriptionId}/sign'],
  ['get', '/api/audit'],
];

describe('an example', () => {
  it.each(fixed)('stands at %s %s, of what goes in and of what comes out', (method, path) => {
    const operation = described.paths[path]?.[method];
    expect(operation).toBeDefined();
    const body = operation?.requestBody?.content['application/json'];
    expect(body?.example !== undefined).toBe(method === 'post');
    expect(operation && goodAnswer(operation)?.example).toBeDefined();
  });

  it('stands at the door of signing in', () => {
    const { requestBody } = described.paths['/api/auth/sign-in/email']?.post ?? {};
    expect(requestBody?.content['application/json']?.example).toBeDefined();
  });

  it('fits the schema beside it, wherever one stands', () => {
    let count = 0;
    for (const { name, operation } of operations()) {
      const bodies = Object.values(operation.requestBody?.content ?? {});
      const answers = Object.values(operation.responses).flatMap((answer) =>
        'content' in answer ? Object.values(answer.content) : [],
      );
      for (const { schema, example } of [...bodies, ...answers]) {
        if (example === undefined) continue;
        count += 1;
        expect([name, misfits(example, schema)]).toEqual([name, []]);
      }
    }
    expect(count).toBeGreaterThan(fixed.length);
  });

  it('would not fit with a field more or a field less, so the schemas do judge', () => {
    for (const [method, path] of fixed) {
      const operation = described.paths[path]?.[method];
      const media = operation && goodAnswer(operation);
      const example = z.record(z.string(), z.unknown()).parse(media?.example);
      const [first = '', ...rest] = Object.keys(example);
      expect([path, misfits({ ...example, unheardOf: 1 }, media?.schema)]).not.toEqual([path, []]);
      expect([path, misfits(Object.fromEntries(rest.map((name) => [name, example[name]])), media?.schema)]).not.toEqual(
        [path, []],
      );
      expect(first).not.toBe('');
    }
  });
});
