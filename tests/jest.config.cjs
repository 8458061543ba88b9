// What: the five kinds of tests, each with what it runs in. `npm test -- rules` (api, screens, native, browser) runs one.
// Must not: hold facts or clocks; those come from tests/support/.
const path = require('node:path');

const rootDir = path.resolve(__dirname, '..');
const alias = { '^@/(.*)$': '<rootDir>/$1' };
const support = '<rootDir>/tests/support/jest';

// Libraries that ship only ES modules; Jest loads CommonJS, so these are translated too.
const esmOnly = 'better-auth|@better-auth|@better-fetch|better-call|@noble|nanostores|jose|rou3|defu|kysely';

const inNode = {
  rootDir,
  testEnvironment: 'node',
  transform: { '\\.(mjs|[jt]sx?)$': `${support}/esbuild-transform.cjs` },
  transformIgnorePatterns: [`/node_modules/(?!(${esmOnly})/)`],
  moduleNameMapper: alias,
  modulePathIgnorePatterns: ['<rootDir>/(dist|\\.rampwell)/'],
};

/** Projects that render screens: Expo's own preset with the alias; victory's parts by the files that Jest can load. */
function onScreen(preset, ownAlias = {}) {
  return {
    rootDir,
    preset,
    moduleNameMapper: {
      ...ownAlias,
      ...alias,
      '^(victory-[a-z-]+)/es$': '$1/lib',
      '^(victory-[a-z-]+)/es/(.*)$': '$1/lib/$2',
    },
    modulePathIgnorePatterns: ['<rootDir>/(dist|\\.rampwell)/'],
    // The preset's own list, and two that ship ES modules only: the stimulator checks signatures and codes with them.
    transformIgnorePatterns: require(`${preset}/jest-preset`).transformIgnorePatterns.map((pattern) =>
      pattern.replace('(?!(', '(?!((jose|@noble)/|'),
    ),
  };
}

module.exports = {
  rootDir,
  // Two cores are the machine this is measured on; more workers than cores only wait for each other and for the database.
  maxWorkers: 2,
  projects: [
    {
      ...inNode,
      displayName: 'rules',
      testMatch: ['<rootDir>/tests/{rules,published}/**/*.test.ts'],
    },
    {
      ...inNode,
      displayName: 'api',
      testMatch: ['<rootDir>/tests/api/**/*.test.ts'],
      globalSetup: `${support}/database-setup.mjs`,
      globalTeardown: `${support}/database-teardown.mjs`,
      setupFiles: [`${support}/database-of-this-worker.ts`],
      setupFilesAfterEnv: [`${support}/time-for-api.ts`],
    },
    {
      // Libraries that Babel does not pass through ask for react-native itself; the preset's own alias for it comes too late.
      ...onScreen('jest-expo/web', { '^react-native$': 'react-native-web' }),
      displayName: 'screens',
      testMatch: ['<rootDir>/tests/screens/**/*.test.{ts,tsx}'],
      setupFiles: [`${support}/browser-gaps.ts`],
      setupFilesAfterEnv: [`${support}/screen-matchers.ts`],
    },
    {
      ...onScreen('jest-expo'),
      displayName: 'native',
      testMatch: ['<rootDir>/tests/native/**/*.test.{ts,tsx}'],
    },
    {
      ...inNode,
      displayName: 'browser',
      testMatch: ['<rootDir>/tests/browser/**/*.test.ts'],
      globalSetup: `${support}/browser-setup.mjs`,
      globalTeardown: `${support}/database-teardown.mjs`,
      setupFilesAfterEnv: [`${support}/time-for-walks.ts`],
    },
  ],
};
