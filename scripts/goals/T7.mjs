// What: the session as a state machine: every pair of place and command, then sequences by chance (2 000 with RAMPWELL_FULL=1).
import { wholeSuite } from '../ground/suite.mjs';

export const what = 'session state machine, model-based: every pair visited, sequences of 60 commands';

export default ({ seed }) => wholeSuite({ project: 'rules', files: ['tests/rules/session-machine.test.ts'], seed });
