// What: the simulated stimulator under chance, by seeds (10 000 each with RAMPWELL_FULL=1).
import { wholeSuite } from '../ground/suite.mjs';

export const what = 'simulated stimulator: never above its permit, no step, contact rules to 0.1 s';

export default ({ seed }) => wholeSuite({ project: 'rules', files: ['tests/rules/device-seeds.test.ts'], seed });
