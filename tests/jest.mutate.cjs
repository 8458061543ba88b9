// What: the tests of the rules alone, for `npm run mutate`. Must not: differ from the project of the same tests in `npm test`.
const path = require('node:path');
const { projects } = require('./jest.config.cjs');

process.env.RAMPWELL_FEW = '1';
const rules = projects.find(({ displayName }) => displayName === 'rules');

module.exports = {
  ...rules,
  rootDir: path.resolve(__dirname, '..'),
  testMatch: ['<rootDir>/tests/{rules,published}/**/*.test.ts'],
  // These read the server's source and nothing of the rules, or try again by the thousand what others try once.
  testPathIgnorePatterns: [
    '/node_modules/',
    ...['sentences', 'description', 'trace', 'qualify-command', 'signatures'].map((name) => `/${name}.test.ts$`),
    ...['device-seeds', 'hours-of-years', 'late-record'].map((name) => `/${name}.test.ts$`),
  ],
};
