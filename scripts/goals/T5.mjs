// What: every limit just below, at and just above, by layer and moment. The database's own checks are tried with SQL in tests/api.
import { wholeSuite } from '../ground/suite.mjs';

export const what = 'boundary values of every limit, by layer, when written and when a permit is issued';

export default ({ seed }) => wholeSuite({ project: 'rules', files: ['tests/rules/boundaries.test.ts'], seed });
