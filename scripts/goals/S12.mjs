// What: tampered, replayed and misplaced permits, each refused by the stimulator with its reason.
import { suite } from '../ground/suite.mjs';

export const what = 'at least 30 tampered or replayed permits refused, each with its reason';
const files = ['tests/screens/device/permit-under-fire.test.ts'];
const tokensLeast = 30;

export default async ({ seed }) => {
  const { passed, failed } = await suite({ project: 'screens', files, name: 'refuses', seed });
  const goal = Math.max(tokensLeast, passed + failed);
  return { value: passed, floor: goal, goal, best: goal, unit: 'tokens refused', pass: passed === goal };
};
