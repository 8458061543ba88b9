// From each safety rule and each hazard to a test, and from each rule code to a hazard. The pages are read as they stand in docs/: a rule without
// a test, a test that has gone or was renamed, and a code that no hazard names fail here.

import { existsSync, readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import {
  doseQuantities,
  lockoutCodes,
  permitReasonCodes,
  precheckFindingCodes,
  reasonCodes,
} from '@/shared/values/codes';

const root = path.resolve(__dirname, '..', '..');
const read = (file: string) => readFileSync(path.join(root, file), 'utf8');

type Row = {
  readonly id: string;
  readonly cells: readonly string[];
  readonly shown: readonly (readonly [file: string, title: string])[];
};
/** The rows of a page's tables that begin with an id of this form. */
function rowsOf(page: string, form: RegExp): Row[] {
  return read(page)
    .split('\n')
    .map((line) =>
      line
        .split('|')
        .slice(1, -1)
        .map((cell) => cell.trim()),
    )
    .filter(([id]) => id !== undefined && form.test(id))
    .map((cells) => {
      const shown = [...(cells.at(-1) ?? '').matchAll(/`([^`]+)` › “([^”]+)”/g)].map(
        ([, file = '', title = '']) => [file, title] as const,
      );
      return { id: cells[0] ?? '', cells, shown };
    });
}
const rules = rowsOf('docs/safety-rules.md', /^SR-\d+\.\d+$/);
const hazards = rowsOf('docs/hazards.md', /^H-\d+$/);

/** The source of a test file by its short name: `rules/clearance`, `screens/session/run`. */
const sources = new Map<string, string>(
  ['rules', 'api', 'screens'].flatMap((part) =>
    readdirSync(path.join(root, 'tests', part), { recursive: true, encoding: 'utf8' })
      .filter((file) => /\.test\.tsx?$/.test(file))
      .map((file) => [`${part}/${file.replace(/\.test\.tsx?$/, '')}`, read(path.join('tests', part, file))] as const),
  ),
);
/** True where the file has a test of exactly this title, as it is written there. */
function isThere(file: string, title: string): boolean {
  const source = sources.get(file);
  return source !== undefined && [`'${title}'`, `"${title}"`, `\`${title}\``].some((text) => source.includes(text));
}

describe.each([
  ['safety rule', rules, 50],
  ['hazard', hazards, 25],
] as const)('each %s', (_kind, rows, count) => {
  it.each(rows.map((row) => [row.id, row] as const))(
    '%s has a test, and each of its tests exists',
    (_id, { shown }) => {
      expect(shown.length).toBeGreaterThan(0);
      expect(shown.filter(([file, title]) => !isThere(file, title))).toEqual([]);
    },
  );

  it('has an id of its own, and every cell is filled', () => {
    expect(rows).toHaveLength(count);
    expect(new Set(rows.map(({ id }) => id)).size).toBe(count);
    expect(rows.filter(({ cells }) => cells.length !== 5 || cells.some((cell) => cell === ''))).toEqual([]);
  });
});

describe('each rule code', () => {
  const named = new Set(
    hazards.flatMap(({ cells }) => [...(cells[3] ?? '').matchAll(/`([a-z0-9_]+)`/g)].map(([, code]) => code)),
  );
  const codes = [
    ...new Set<string>([
      ...reasonCodes,
      ...doseQuantities,
      ...lockoutCodes,
      ...precheckFindingCodes,
      ...permitReasonCodes,
    ]),
  ];

  it.each(codes)('%s stands in a hazard’s control', (code) => {
    expect([...named]).toContain(code);
  });
});

it('names no code, constraint or file that is not there', () => {
  const folders = ['shared', 'db/schema', 'components/runtime'];
  const text = folders
    .flatMap((folder) =>
      readdirSync(path.join(root, folder), { recursive: true, encoding: 'utf8' })
        .filter((file) => file.endsWith('.ts'))
        .map((file) => read(path.join(folder, file))),
    )
    .join('\n');
  const names = [...rules.map(({ cells }) => cells[2] ?? ''), ...hazards.map(({ cells }) => cells[3] ?? '')].flatMap(
    (cell) => [...cell.matchAll(/`([^`]+)`/g)].map(([, name = '']) => name),
  );
  const isNamed = (name: string) => (name.includes('/') ? existsSync(path.join(root, name)) : text.includes(name));
  expect(names.length).toBeGreaterThan(150);
  expect(names.filter((name) => !isNamed(name))).toEqual([]);
});

it('finds no test that is not there', () => {
  expect(isThere('rules/clearance', 'refuses with %s, and with nothing else')).toBe(true);
  expect(isThere('rules/clearance', 'refuses with %s, and with nothing')).toBe(false);
  expect(isThere('rules/nothing', 'refuses')).toBe(false);
});
