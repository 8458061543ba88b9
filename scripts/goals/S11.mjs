// What: no signed row without a signature that was given with the password for exactly its bytes.
import { wholeSuite } from '../ground/suite.mjs';

export const what = 'signatures: the password again, bound to the bytes; what was altered is invalid';

export default ({ seed }) => wholeSuite({ project: 'api', files: ['tests/api/signature.test.ts'], seed });
