// Every door that changes something shows in the description a body that it takes, so that others can begin from it.
import { z } from 'zod';
import { authDoors } from '@/server/auth/doors';
import { openApiOf } from '@/server/http/openapi';
import type { ContractShape } from '@/shared/contracts/contract';
import { doors } from '@/shared/contracts/doors';

const contracts: readonly ContractShape[] = Object.values(doors);
const Described = z.object({
  paths: z.record(
    z.string(),
    z.object({ post: z.object({ requestBody: z.object({ content: z.record(z.string(), z.unknown()) }) }).optional() }),
  ),
});
const { paths } = Described.parse(
  openApiOf(contracts, { version: '1', baseUrl: 'https://clinic.example', isDemo: true }),
);

function exampleOf(path: string): unknown {
  const media = paths[path.replace(/:([A-Za-z]+)/g, '{$1}')]?.post?.requestBody.content['application/json'];
  return z.object({ example: z.unknown().optional() }).parse(media).example;
}

const asking = [
  ...contracts
    .filter(({ method, upload }) => method === 'POST' && !upload)
    .map(({ name, path, body }) => ({ name, path, body })),
  ...authDoors.map(({ path, body }) => ({ name: path, path: `/api/auth${path}`, body })),
];

it.each(asking)('$name shows a body that it takes', ({ path, body }) => {
  const takesNothing = body?.safeParse({}).success === true;
  const example = exampleOf(path);
  expect(example !== undefined || takesNothing).toBe(true);
  expect(body?.safeParse(example ?? {}).error?.issues ?? []).toEqual([]);
});
