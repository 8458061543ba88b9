// What: the tests of the rules alone, for `npm run mutate`. Must not: differ from the project of the same tests in `npm test`.
const path = require('node:path');
const { projects } = require('./jest.config.cjs');

const rules = projects.find(({ displayName }) => displayName === 'rules');

module.exports = {
  ...rules,
  rootDir: path.resolve(__dirname, '..'),
  testMatch: ['<rootDir>/tests/{rules,published}/**/*.test.ts'],
  // These read the server's source, and nothing of the rules.
  testPathIgnorePatterns: ['/node_modules/', 'sentences.test.ts$', 'description.test.ts$', 'trace.test.ts$'],
};
