// What: before the api tests: a migrated database for each worker. Must not: put rows in it; tests make their own.
import { copyForWorkers, openCluster } from './test-cluster.mjs';

export default async function setUp(globalConfig) {
  await openCluster();
  copyForWorkers(globalConfig.maxWorkers);
}
