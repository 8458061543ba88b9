// What: records late, doubled, out of order, after a revoked permit, with a gap; 10 000 tries each with RAMPWELL_FULL=1.
import { wholeSuite } from '../ground/suite.mjs';

export const what = 'events late, doubled, out of order, 30 days old, of a revoked permit, with a gap';

export default ({ seed }) => wholeSuite({ project: 'rules', files: ['tests/rules/late-record.test.ts'], seed });
