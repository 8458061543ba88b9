// What: a test runner for Stryker that loads the tests of the rules once and then runs only those that reach a mutant, in the same process.
// Jest loads every file anew for each of some thousand mutants, which takes hours; the tests are pure, so nothing of one run is left for the next.
// Must not: know a test or a rule, or call a test passed that did not run. Its words (describe, it, expect) mean what Jest's mean.
import { createRequire } from 'node:module';
import { readdirSync } from 'node:fs';
import path from 'node:path';
import vm from 'node:vm';
import { declareClassPlugin, PluginKind } from '@stryker-mutator/api/plugin';
import {
  determineHitLimitReached,
  DryRunStatus,
  TestStatus,
  toMutantRunResult,
} from '@stryker-mutator/api/test-runner';
import { build } from 'esbuild';

const require = createRequire(import.meta.url);
const { expect } = require('expect');
const { bind } = require('jest-each');

/** What Jest would leave out too: one list for both. */
const leftOut = require('../../tests/jest.mutate.cjs').testPathIgnorePatterns.map((pattern) => new RegExp(pattern));

/** What Stryker's instrumented code reads and writes. */
const seen = (globalThis.__stryker__ ??= {});

class Suite {
  tests = [];
  names = [];
  befores = [[]];

  describe = Object.assign(
    (name, body) => {
      this.names.push(name);
      this.befores.push([]);
      body();
      this.befores.pop();
      this.names.pop();
    },
    { each: bind((name, body) => this.describe(name, body), false) },
  );

  it = Object.assign(
    (name, body) => {
      const id = `${this.file} › ${[...this.names, name].join(' › ')} #${this.tests.length}`;
      this.tests.push({ id, body, befores: this.befores.flat() });
    },
    { each: bind((name, body) => this.it(name, body)) },
  );

  /** Those of the file and of each group round a test. */
  before = (body) => this.befores.at(-1).push({ body, done: undefined });
  beforeEach = (body) => this.befores.at(-1).push({ body, isEach: true });

  globals() {
    const { describe, it, before, beforeEach } = this;
    return { describe, it, test: it, expect, beforeAll: before, beforeEach, afterAll: () => {}, afterEach: () => {} };
  }
}

async function bundleOf(root) {
  const folder = path.join(root, 'tests', 'rules');
  const files = readdirSync(folder).filter(
    (file) => /\.test\.ts$/.test(file) && !leftOut.some((pattern) => pattern.test(`/${file}`)),
  );
  const contents = files.map((file) => `begin(${JSON.stringify(file)}); require('./${file}');`).join('\n');
  const { outputFiles } = await build({
    stdin: { contents, resolveDir: folder, sourcefile: 'all.js' },
    ...{ bundle: true, write: false, platform: 'node', format: 'cjs', target: 'node20' },
    alias: { '@': root },
    logLevel: 'error',
  });
  return outputFiles[0].text;
}

class RulesRunner {
  suite = new Suite();

  capabilities() {
    // What is reckoned while a file loads is reckoned once.
    return { reloadEnvironment: false };
  }

  async init() {
    process.env.RAMPWELL_FEW = '1';
    process.env.TZ = 'UTC';
    const code = await bundleOf(process.cwd());
    const begin = (file) => {
      this.suite.file = file;
      this.suite.befores = [[]];
    };
    const words = { ...this.suite.globals(), begin, require, module: { exports: {} }, exports: {} };
    const run = vm.runInThisContext(`(function (${Object.keys(words).join(', ')}) {${code}\n})`);
    run(...Object.values(words));
  }

  async run({ body, befores }) {
    for (const before of befores) {
      if (before.isEach) await before.body();
      else await (before.done ??= (async () => before.body())());
    }
    await body();
  }

  async runAll(tests, disableBail) {
    const results = [];
    for (const test of tests) {
      const began = performance.now();
      seen.currentTestId = test.id;
      const result = { id: test.id, name: test.id, timeSpentMs: 0, status: TestStatus.Success };
      try {
        await this.run(test);
      } catch (error) {
        Object.assign(result, { status: TestStatus.Failed, failureMessage: String(error?.message ?? error) });
      }
      seen.currentTestId = undefined;
      result.timeSpentMs = performance.now() - began;
      results.push(result);
      if (result.status === TestStatus.Failed && !disableBail) break;
    }
    return { status: DryRunStatus.Complete, tests: results };
  }

  async dryRun({ coverageAnalysis, disableBail }) {
    const complete = await this.runAll(this.suite.tests, disableBail);
    return coverageAnalysis === 'off' ? complete : { ...complete, mutantCoverage: seen.mutantCoverage };
  }

  /** A test that noticed a change passes again without it, or something of the change was left behind and nothing here can be believed. */
  async sound(failed) {
    const ids = new Set(failed.map(({ id }) => id));
    const again = await this.runAll(
      this.suite.tests.filter(({ id }) => ids.has(id)),
      true,
    );
    const left = again.tests.find(({ status }) => status === TestStatus.Failed);
    if (left !== undefined) throw new Error(`"${left.id}" fails without any change: ${left.failureMessage}`);
  }

  async mutantRun({ activeMutant, testFilter, disableBail, hitLimit }) {
    const wanted = testFilter && new Set(testFilter);
    const tests = wanted ? this.suite.tests.filter(({ id }) => wanted.has(id)) : this.suite.tests;
    seen.activeMutant = activeMutant.id;
    seen.hitLimit = hitLimit;
    seen.hitCount = hitLimit === undefined ? undefined : 0;
    const complete = await this.runAll(tests, disableBail);
    const limitReached = determineHitLimitReached(seen.hitCount, seen.hitLimit);
    Object.assign(seen, { activeMutant: undefined, hitLimit: undefined, hitCount: undefined });
    await this.sound(complete.tests.filter(({ status }) => status === TestStatus.Failed));
    return limitReached ?? toMutantRunResult(complete, true);
  }
}

export const strykerPlugins = [declareClassPlugin(PluginKind.TestRunner, 'rules', RulesRunner)];
