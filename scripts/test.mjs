// What: `npm test`. From a bare clone to one last line, `N passed, N failed`: installs what is missing, then runs every part.
// `npm test -- rules lint` runs some; what is no part's name goes to Jest (`npm test -- api -t "second live permit"`).
// Must not: let a part pass that ran nothing.
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { buildServer, buildWeb } from './build.mjs';
import { checkNode, installChromium, installPackages, postgresFolder } from './ground/install.mjs';
import { root } from './ground/paths.mjs';
import { startThrowAwayCluster } from './ground/postgres.mjs';
import { beforeEnd, end, main, Plainly, run } from './ground/processes.mjs';

const say = console.log;
const scratch = mkdtempSync(path.join(os.tmpdir(), 'rampwell-results-'));
process.once('exit', () => rmSync(scratch, { recursive: true, force: true }));

/** A check counts as one: it passes or it fails. */
function check(script) {
  return async () => {
    await run('npm', ['run', '--silent', script], { cwd: root });
    return { passed: 1, failed: 0 };
  };
}

/** Counts from Jest's own record. A skipped test, a file that does not load and a part without tests are failures. */
function jest(project, ...more) {
  return async (extra) => {
    const record = path.join(scratch, `${project}.json`);
    const program = path.join(root, 'node_modules', 'jest', 'bin', 'jest.js');
    const wanted = ['-c', 'tests/jest.config.cjs', '--selectProjects', project, ...more, ...extra];
    let broken;
    await run(process.execPath, [program, ...wanted, '--json', `--outputFile=${record}`], {
      cwd: root,
      stdio: ['ignore', 'ignore', 'inherit'],
      env: { ...process.env, NODE_ENV: 'test', TZ: 'UTC' },
    }).catch((error) => (broken = error));
    let result;
    try {
      result = JSON.parse(readFileSync(record, 'utf8'));
    } catch {
      throw broken ?? new Plainly(`No tests ran in "${project}".`);
    }
    // With a filter (-t, a path) the tests that it leaves out are "pending" and say nothing.
    const skipped = extra.length > 0 ? 0 : result.numPendingTests + result.numTodoTests;
    const failed = result.numFailedTests + result.numRuntimeErrorTestSuites + skipped;
    if (skipped > 0) say(`${skipped} skipped: a test that does not run counts as failed.`);
    if (result.numPassedTests + failed === 0) throw new Plainly(`No tests ran in "${project}".`);
    return { passed: result.numPassedTests, failed: failed || (broken ? 1 : 0) };
  };
}

async function build() {
  await buildServer(say);
  await buildWeb(say);
  return { passed: 1, failed: 0 };
}

const parts = {
  types: check('check:types'),
  lint: check('check:lint'),
  arrows: check('check:arrows'),
  words: check('check:words'),
  rules: jest('rules'),
  api: jest('api'),
  screens: jest('screens'),
  native: jest('native'),
  build,
  browser: jest('browser', '--runInBand'),
};

function choose() {
  const given = process.argv.slice(2);
  const chosen = Object.keys(parts).filter((name) => given.includes(name));
  const extra = given.filter((word) => !(word in parts));
  if (chosen.length === 0 && extra.length > 0)
    throw new Plainly(`Name a part first: ${Object.keys(parts).join(', ')}.`);
  return { chosen: chosen.length > 0 ? chosen : Object.keys(parts), extra };
}

async function prepare(chosen) {
  await installPackages(say);
  if (chosen.includes('browser')) await installChromium(say);
  if (!chosen.includes('api') && !chosen.includes('browser')) return;
  const cluster = await startThrowAwayCluster(await postgresFolder(say));
  beforeEnd(cluster.stop);
  process.env.RAMPWELL_TEST_PORT = String(cluster.port);
}

await main(
  async () => {
    checkNode();
    const { chosen, extra } = choose();
    await prepare(chosen);

    const lines = [];
    const sum = { passed: 0, failed: 0 };
    for (const name of chosen) {
      const began = performance.now();
      say(`\n== ${name}`);
      const { passed, failed } = await parts[name](extra).catch((error) => {
        say(error.message);
        return { passed: 0, failed: 1 };
      });
      sum.passed += passed;
      sum.failed += failed;
      const seconds = ((performance.now() - began) / 1000).toFixed(1);
      lines.push(
        `${name.padEnd(8)} ${String(passed).padStart(5)} passed ${String(failed).padStart(4)} failed ${seconds.padStart(7)} s`,
      );
      say(lines.at(-1));
    }
    if (chosen.length > 1) say(`\n${lines.join('\n')}`);
    process.once('exit', () => say(`\n${sum.passed} passed, ${sum.failed} failed`));
    await end(sum.failed > 0 || sum.passed === 0 ? 1 : 0);
  },
  { whenAskedToStop: 130 },
);
