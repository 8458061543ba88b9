// Every code that leaves the server has its sentence: no refusal and no bad field is answered with "not possible" alone.
import { readFileSync, readdirSync } from 'node:fs';
import path from 'node:path';
import errors from '@/locales/en/errors.json';
import { doors } from '@/shared/contracts/doors';
import type { ContractShape } from '@/shared/contracts/contract';
import { hasWords, sentence } from '@/server/words';

const root = path.resolve(__dirname, '..', '..');

/** Code of ours that answers, as text. */
function sources(...folders: string[]): string {
  return folders
    .flatMap((folder) =>
      readdirSync(path.join(root, folder), { recursive: true, encoding: 'utf8' }).map((file) =>
        path.join(root, folder, file),
      ),
    )
    .filter((file) => file.endsWith('.ts'))
    .map((file) => readFileSync(file, 'utf8'))
    .join('\n');
}

const found = (text: string, form: RegExp) =>
  [...new Set([...text.matchAll(form)].map((match) => match[1] ?? ''))].sort();

const contracts: readonly ContractShape[] = Object.values(doors);
const server = sources('server');

describe('the sentence of a refusal', () => {
  const named = contracts.flatMap(({ refusals }) => refusals ?? []);
  const refused = found(server, /refuse\(\s*'([a-z_.]+)'/g);
  const atTheDoor = found(sources('server/http'), /status: \d{3}, code: '([a-z_.]+)'/g);

  it.each([...new Set([...named, ...refused, ...atTheDoor])].sort())('exists for %s', (code) => {
    expect(hasWords(`errors:code.${code}`)).toBe(true);
  });

  it('exists for many: the forms above find what they look for', () => {
    expect(named.length).toBeGreaterThan(50);
    expect(refused.length).toBeGreaterThan(30);
    expect(atTheDoor.length).toBeGreaterThan(15);
  });
});

describe('the sentence of a bad field', () => {
  const codes = found(`${server}\n${sources('shared/rules')}`, /path(?:: [^,\n]+)?, code: '([a-z_.]+)'/g);

  it.each(codes)('exists for %s', (code) => {
    expect(hasWords(`errors:field.${code}`) || hasWords(`errors:code.${code}`)).toBe(true);
  });

  it('exists for many: the form above finds what it looks for', () => {
    expect(codes.length).toBeGreaterThan(15);
  });
});

it('leaves no placeholder and no key in a sentence, whatever facts are missing', () => {
  const keys: string[] = [];
  const walk = (words: unknown, key: string): void => {
    if (typeof words === 'string') keys.push(key);
    else if (typeof words === 'object' && words !== null)
      for (const [name, more] of Object.entries(words)) walk(more, key ? `${key}.${name}` : name);
  };
  walk(errors, '');
  const odd = keys.map((key) => sentence(`errors:${key}`)).filter((words) => /\{\{|\}\}|undefined|errors:/.test(words));
  expect(odd).toEqual([]);
});
