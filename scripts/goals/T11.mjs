// What: each safety rule and each hazard has a test that exists, and each rule code a hazard.
import { wholeSuite } from '../ground/suite.mjs';

export const what = 'trace: safety rules and hazards to tests, rule codes to hazards';

export default ({ seed }) => wholeSuite({ project: 'rules', files: ['tests/rules/trace.test.ts'], seed });
