// What: local time over twelve years in six odd zones; every hour with RAMPWELL_FULL=1, a sample otherwise.
import { wholeSuite } from '../ground/suite.mjs';

export const what = 'summer time and odd zones, hours of 2024 to 2035 (all of them with RAMPWELL_FULL=1)';
const files = ['hours-of-years', 'zone', 'schedule'].map((name) => `tests/rules/${name}.test.ts`);

export default ({ seed }) => wholeSuite({ project: 'rules', files, seed });
