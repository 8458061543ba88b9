// The command itself, as a site's engineer starts it: what it prints, and what it ends with.

import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';

const root = path.resolve(__dirname, '..', '..');
const folder = mkdtempSync(path.join(os.tmpdir(), 'rampwell-qualify-'));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

/** A process is started for each; a busy machine takes its time. */
const patience = 120_000;

function fileOf(name: string, content: unknown): string {
  const file = path.join(folder, name);
  writeFileSync(file, typeof content === 'string' ? content : JSON.stringify(content));
  return file;
}

function qualify(...files: string[]) {
  const { stdout, stderr, status } = spawnSync(
    process.execPath,
    [path.join(root, 'scripts', 'qualify.mjs'), ...files],
    {
      cwd: folder,
      encoding: 'utf8',
    },
  );
  return { lines: stdout.trimEnd().split('\n'), stderr, status };
}

const half = {
  ...{ id: 'half', kind: 'fraction', method: 'by hand', source: 'arithmetic' },
  ...{ input: { prescribed_C: 2, delivered_C: 1 }, expected: { fraction: 0.5 }, tolerance: { abs: 1e-9, rel: 0 } },
};
const wrong = { ...half, id: 'wrong', expected: { fraction: 0.6 } };

describe('npm run qualify', () => {
  it(
    'prints a line a case over several files, the count last, and ends with 0 when all passed',
    () => {
      const published = path.join(root, 'tests', 'published');
      const { lines, stderr, status } = qualify(
        ...['rules.json', 'scales.json', 'dose.json', 'hotp.json'].map((name) => path.join(published, name)),
      );
      expect([stderr, status, lines.at(-1)]).toEqual(['', 0, '385 passed, 0 failed']);
      expect(lines).toHaveLength(386);
      expect(JSON.parse(lines.at(-2) ?? '')).toEqual({
        ...{ id: 'rfc4226-d-9', pass: true },
        ...{ expected: { code: '520489' }, actual: { code: '520489' } },
      });
    },
    patience,
  );

  it(
    'shows a failing case and ends with 1',
    () => {
      const { lines, status } = qualify(fileOf('good.json', { cases: [half] }), fileOf('bad.json', { cases: [wrong] }));
      expect(lines.map((line) => (line.startsWith('{') ? JSON.parse(line) : line))).toEqual([
        expect.objectContaining({ id: 'half', pass: true }),
        { id: 'wrong', pass: false, expected: { fraction: 0.6 }, actual: { fraction: 0.5 } },
        '1 passed, 1 failed',
      ]);
      expect(status).toBe(1);
    },
    patience,
  );

  it(
    'names file, case and what is not known of it, goes on with the others, and ends with 1',
    () => {
      const file = fileOf('odd.json', {
        cases: [{ ...half, id: 'star', kind: 'horoscope' }, { ...half, id: 'red', colour: 'red' }, half],
      });
      const { lines, stderr, status } = qualify(file);
      expect(stderr).toContain(`${file}: case star: kind: horoscope is not known`);
      expect(stderr).toMatch(/case red: .*colour/);
      expect([lines.at(-1), status]).toEqual(['1 passed, 2 failed', 1]);
    },
    patience,
  );

  it(
    'says plainly of each file that cannot be used why not and what is allowed, and ends with 1',
    () => {
      const broken = fileOf('broken.json', '{"cases": [');
      const list = fileOf('list.json', []);
      const missing = path.join(folder, 'missing.json');
      const { lines, stderr, status } = qualify(broken, list, missing, folder, fileOf('good.json', { cases: [half] }));
      expect(stderr).toContain(`${broken} is not JSON`);
      expect(stderr).toContain(`${list} does not have the form of worked cases`);
      expect(stderr).toContain(`${missing} cannot be read: it is not there`);
      expect(stderr).toContain(`${folder} cannot be read: it is a folder`);
      expect(stderr).toContain('A file is {"cases": […]}');
      expect(stderr).not.toContain('    at ');
      expect([lines.at(-1), status]).toEqual(['1 passed, 4 failed', 1]);
    },
    patience,
  );

  it(
    'asks for a file when none is named, and ends with 1',
    () => {
      const { stderr, status } = qualify();
      expect([stderr.split(':')[0], status]).toEqual(['Name at least one file of worked cases', 1]);
    },
    patience,
  );
});
