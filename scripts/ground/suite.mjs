// What: runs some test files of one Jest project and counts, for goals that are a suite. The full numbers come with RAMPWELL_FULL=1.
// Must not: call a suite passed in which nothing ran, or print on standard output.
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { root } from './paths.mjs';
import { Plainly, run } from './processes.mjs';

/** @returns passed, failed, and what the tests told of themselves in their titles */
export async function suite({ project, files, name, seed }) {
  const folder = mkdtempSync(path.join(os.tmpdir(), 'rampwell-goal-'));
  const record = path.join(folder, 'record.json');
  const jest = path.join(root, 'node_modules', 'jest', 'bin', 'jest.js');
  const named = name ? ['-t', name] : [];
  const wanted = ['-c', 'tests/jest.config.cjs', '--selectProjects', project, ...named, '--runTestsByPath', ...files];
  try {
    // A failed test is a number here; what it says goes to the terminal by standard error.
    await run(process.execPath, [jest, ...wanted, '--json', `--outputFile=${record}`], {
      cwd: root,
      stdio: ['ignore', 'ignore', 'inherit'],
      env: { ...process.env, NODE_ENV: 'test', TZ: 'UTC', RAMPWELL_SEED: String(seed) },
    }).catch(() => undefined);
    const result = JSON.parse(readFileSync(record, 'utf8'));
    const { numPassedTests: passed, numFailedTests, numRuntimeErrorTestSuites } = result;
    const failed = numFailedTests + numRuntimeErrorTestSuites;
    if (passed + failed === 0) throw new Plainly(`No tests ran in ${files.join(', ')}.`);
    return { passed, failed };
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

/** A goal that is reached when all tests of a suite pass. */
export async function wholeSuite(parts) {
  const { passed, failed } = await suite(parts);
  const total = passed + failed;
  return { value: passed, floor: total, goal: total, best: total, unit: 'tests', pass: failed === 0 };
}

/** Full or small, as the tests read it (tests/support/runs.ts). */
export const isFull = process.env.RAMPWELL_FULL === '1';
