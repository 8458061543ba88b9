// The description of all doors (OpenAPI 3.1), made from the contracts: nothing in it is written twice. Describes, decides nothing.

import { z } from 'zod';
import { authDoors } from '@/server/auth/doors';
import type { Env } from '@/server/env';
import type { ContractShape } from '@/shared/contracts/contract';
import { Problem } from '@/shared/contracts/problem';
import { defaultProtocolSettings } from '@/shared/rules/protocol-defaults';
import { answerExampleOf } from './answer-examples';

type Json = Record<string, unknown>;

/** An example too long to write by hand, and wrong as soon as a limit is added: the settings that a site begins with. */
const madeExamples: Record<string, unknown> = {
  'protocol.change': {
    siteId: '7d2a9e4c-3b5f-4d6e-8a1c-0f9e8d7c6b5a',
    basedOnVersion: 0,
    settings: defaultProtocolSettings({
      contacts: [{ name: 'Maren Oakes', email: 'maren.oakes@harrowmere.example', phone: '020 7946 0101' }],
      consentRequiredFrom: '2026-05-11T08:00:00Z',
    }),
    reason: 'First version',
    password: 'the password again',
  },
};

/** What every door may answer beside its own: kept once under components. */
const problems = {
  '400': 'The body is not JSON that can be read.',
  '401': 'Nobody is signed in.',
  '403': 'The role may not do this, or the request did not come from our own pages.',
  '404': 'Not there, or out of reach.',
  '409': 'Refused by a rule, with its code and, for clearance, every reason.',
  '413': 'Too large.',
  '415': 'Another content type than the one named here.',
  '422': 'A field is missing, unknown or not allowed: each with path, code and message.',
  '429': 'Too many requests.',
  '503': 'Not ready, or the database is away.',
} as const;
type ProblemStatus = keyof typeof problems;

export function openApiOf(contracts: readonly ContractShape[], env: Pick<Env, 'version' | 'baseUrl' | 'isDemo'>): Json {
  const paths: Record<string, Json> = {};
  for (const contract of contracts) {
    if (contract.demo && !env.isDemo) continue;
    const path = contract.path.replace(/:([A-Za-z]+)/g, '{$1}');
    paths[path] = { ...paths[path], [contract.method.toLowerCase()]: operationOf(contract) };
  }
  for (const door of authDoors) paths[`/api/auth${door.path}`] = { post: authOperation(door) };
  return {
    openapi: '3.1.0',
    info: {
      title: 'Rampwell',
      version: env.version,
      description: 'Every door, who may use it, what goes in and what comes out.',
    },
    servers: [{ url: env.baseUrl }],
    paths,
    components: {
      securitySchemes: {
        session: {
          type: 'apiKey',
          in: 'cookie',
          name: `${env.baseUrl.startsWith('https:') ? '__Secure-' : ''}rampwell.session_token`,
        },
      },
      schemas: { Problem: schemaOf(Problem, 'output') },
      responses: Object.fromEntries(
        Object.entries(problems).map(([status, description]) => [`Problem${status}`, problemResponse(description)]),
      ),
    },
  };
}

function problemResponse(description: string): Json {
  return { description, content: { 'application/problem+json': { schema: { $ref: '#/components/schemas/Problem' } } } };
}

function schemaOf(schema: z.ZodType, io: 'input' | 'output'): Json {
  const { $schema: _dialect, ...rest } = z.toJSONSchema(schema, {
    io,
    unrepresentable: 'any',
    target: 'draft-2020-12',
  });
  return rest;
}

function refs(statuses: readonly ProblemStatus[]): Json {
  return Object.fromEntries(statuses.map((status) => [status, { $ref: `#/components/responses/Problem${status}` }]));
}

function operationOf(contract: ContractShape): Json {
  const isOpen = contract.who.includes('anyone');
  const roles = contract.who.filter((who) => who !== 'anyone');
  return {
    operationId: contract.name,
    tags: [contract.name.split('.')[0]],
    summary: contract.about,
    description: [
      isOpen ? 'Open to everybody.' : `Roles: ${roles.join(', ')}. Reach: ${contract.reach}.`,
      ...(contract.refusals ? [`Refusals: ${contract.refusals.join(', ')}.`] : []),
      ...(contract.confirm ? ['Asks for the password again: a signature.'] : []),
    ].join(' '),
    'x-roles': contract.who,
    'x-refusals': contract.refusals ?? [],
    security: isOpen ? [] : [{ session: [] }],
    parameters: parametersOf(contract),
    ...(contract.method === 'GET' ? {} : { requestBody: bodyOf(contract) }),
    responses: {
      [String(contract.status ?? 200)]: { description: 'Done.', content: answerOf(contract) },
      ...refs(problemsOf(contract, isOpen)),
    },
  };
}

function problemsOf(contract: ContractShape, isOpen: boolean): ProblemStatus[] {
  const found: ProblemStatus[] = ['503', '422'];
  if (!isOpen) found.push('401', '403');
  if (contract.params) found.push('404');
  if (contract.method !== 'GET') found.push('400', '403', '413', '415');
  if (contract.refusals || contract.once) found.push('409');
  if (contract.confirm || contract.once === 'required') found.push('429');
  return [...new Set(found)].sort();
}

function parametersOf(contract: ContractShape): Json[] {
  const key = contract.once
    ? [
        {
          name: 'Idempotency-Key',
          in: 'header',
          required: contract.once === 'required',
          schema: { type: 'string', minLength: 1, maxLength: 200 },
          description: 'The same key and body get the same answer.',
        },
      ]
    : [];
  return [...fieldsOf(contract.params, 'path', 'input'), ...fieldsOf(contract.query, 'query', 'input'), ...key];
}

function fieldsOf(schema: z.ZodType | undefined, place: 'path' | 'query', io: 'input' | 'output'): Json[] {
  if (!(schema instanceof z.ZodObject)) return [];
  return Object.entries(schema.shape).map(([name, field]) => ({
    name,
    in: place,
    required: place === 'path' || !isOptional(field),
    schema: field instanceof z.ZodType ? schemaOf(field, io) : {},
  }));
}

function isOptional(field: unknown): boolean {
  return field instanceof z.ZodType && field.safeParse(undefined).success;
}

function bodyOf(contract: ContractShape): Json {
  const schema = contract.body ? schemaOf(contract.body, 'input') : { type: 'object', additionalProperties: false };
  if (!contract.upload)
    return {
      required: true,
      content: { 'application/json': { schema, ...exampleOf(contract.example?.body ?? madeExamples[contract.name]) } },
    };
  const properties = typeof schema.properties === 'object' && schema.properties !== null ? schema.properties : {};
  return {
    required: true,
    content: {
      'multipart/form-data': {
        schema: {
          type: 'object',
          properties: { ...properties, file: { type: 'string', contentMediaType: 'application/octet-stream' } },
          required: ['file'],
        },
      },
    },
  };
}

function exampleOf(example: unknown): Json {
  return example === undefined ? {} : { example };
}

function answerOf(contract: ContractShape): Json {
  if (contract.raw) return { [rawTypeOf(contract)]: { schema: { type: 'string', contentEncoding: 'binary' } } };
  return {
    'application/json': {
      schema: schemaOf(contract.answer, 'output'),
      ...exampleOf(contract.example?.answer ?? answerExampleOf(contract)),
    },
  };
}

function rawTypeOf(contract: ContractShape): string {
  const type = contract.answer instanceof z.ZodObject ? contract.answer.shape.type : undefined;
  return type instanceof z.ZodLiteral ? String(type.value) : 'application/octet-stream';
}

function authOperation({ path, name, about, body, answer, example }: (typeof authDoors)[number]): Json {
  return {
    operationId: name,
    tags: ['account'],
    summary: about,
    security: path.startsWith('/sign-in') || path.includes('reset') || path.includes('verify') ? [] : [{ session: [] }],
    requestBody: {
      required: true,
      content: { 'application/json': { schema: schemaOf(body, 'input'), ...exampleOf(example) } },
    },
    responses: {
      '200': { description: 'Done.', content: { 'application/json': { schema: schemaOf(answer, 'output') } } },
      ...refs(['400', '401', '403', '409', '413', '415', '422', '429', '503']),
    },
  };
}
