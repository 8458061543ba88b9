// What: the access matrix with the server deceived about who is asking: the database alone refuses every cell out of reach.
import { suite } from '../ground/suite.mjs';

export const what = 'row security: the database alone refuses every cell out of reach';

export default async ({ seed }) => {
  const { passed, failed } = await suite({ project: 'api', files: ['tests/api/row-security.test.ts'], seed });
  const value = passed + failed === 0 ? 0 : Math.floor((100 * passed) / (passed + failed));
  return { value, floor: 100, goal: 100, best: 100, unit: '% of doors', pass: failed === 0 && passed > 0 };
};
