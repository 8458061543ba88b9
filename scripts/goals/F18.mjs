// What: six acts of others at each of fourteen steps of a live session, on a real database.
import { wholeSuite } from '../ground/suite.mjs';

export const what = 'amendment, pause, lockout, withdrawal and recall at each step of a live session';

export default ({ seed }) => wholeSuite({ project: 'api', files: ['tests/api/permit-voided.test.ts'], seed });
