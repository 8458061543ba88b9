// What: I1 to I12 after five days of two people, and each of the questions notices when it is not so.
import { wholeSuite } from '../ground/suite.mjs';

export const what = 'I1 to I12 hold after a played course, and each notices when it does not';

export default ({ seed }) => wholeSuite({ project: 'api', files: ['tests/api/invariants.test.ts'], seed });
