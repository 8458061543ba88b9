// What: named properties of the rules, 300 tries each (100 000 with RAMPWELL_FULL=1).
import { wholeSuite } from '../ground/suite.mjs';

export const what = '41 named properties of the rules';

export default ({ seed }) => wholeSuite({ project: 'rules', files: ['tests/rules/properties.test.ts'], seed });
