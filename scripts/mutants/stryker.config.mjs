// What: `npm run mutate`. Changes shared/rules a little at a time and asks whether a test of the rules notices. What is left alive is
// explained in docs/mutants.md. `npm run mutate -- -m shared/rules/permit.ts` tries one file, with `--testRunner jest` by Jest itself.
// Must not: run in `npm test`, or leave anything that git sees.
/** @type {import('@stryker-mutator/api/core').PartialStrykerOptions} */
export default {
  testRunner: 'rules',
  plugins: ['@stryker-mutator/jest-runner', './scripts/mutants/runner.mjs'],
  jest: { configFile: 'tests/jest.mutate.cjs' },
  mutate: ['shared/rules/**/*.ts'],
  coverageAnalysis: 'perTest',
  // What runs once when a file is loaded is tried with every test otherwise, and nearly all of it is tables of names.
  ignoreStatic: true,
  concurrency: 2,
  timeoutMS: 10_000,
  timeoutFactor: 3,
  incremental: true,
  incrementalFile: '.rampwell/mutants/incremental.json',
  tempDirName: '.rampwell/mutants/tmp',
  ignorePatterns: ['/dist', '/screens-out', '/public', '/assets', '/app', '/db', '/tests/browser', '/tests/api'],
  // Only what is changed is read as TypeScript; the rest is bundled as it stands.
  disableTypeChecks: 'shared/rules/**/*.ts',
  reporters: ['progress-append-only', 'clear-text', 'json'],
  jsonReporter: { fileName: '.rampwell/mutants/report.json' },
  clearTextReporter: { allowColor: false, logTests: false, reportTests: false },
  thresholds: { high: 95, low: 90, break: 85 },
};
