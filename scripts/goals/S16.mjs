// What: tampering with the audit trail, anywhere and of every kind, found with its place named. 1,000 tries with RAMPWELL_FULL=1.
import { isFull, suite } from '../ground/suite.mjs';

export const what = 'the audit trail: tampering found, place named; cut tails found by the anchors';

export default async ({ seed }) => {
  const { passed, failed } = await suite({
    project: 'api',
    files: ['tests/api/audit-chain.test.ts'],
    name: 'the trail of all that',
    seed,
  });
  const tries = isFull ? 1000 : 100;
  const value = failed === 0 && passed > 0 ? 100 : 0;
  return { value, floor: 100, goal: 100, best: 100, unit: `% of ${tries} tries`, pass: value === 100 };
};
