// What: each reason of clearance alone turns yes into no, all compatible pairs give both, each missing fact gives no.
import { wholeSuite } from '../ground/suite.mjs';

export const what = 'each reason of clearance decides alone, hides no other, and each missing fact refuses';
const files = ['clearance', 'clearance-pairs', 'clearance-properties'].map((name) => `tests/rules/${name}.test.ts`);

export default ({ seed }) => wholeSuite({ project: 'rules', files, seed });
