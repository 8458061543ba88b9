// What: before the walks in a real browser: the server and the pages as they are shipped, and a cluster for their databases.
// Must not: start a server; each walk starts its own by tests/support/server-process.ts.
import { buildServer, buildWeb } from '../../../scripts/build.mjs';
import { openCluster } from './test-cluster.mjs';

export default async function setUp() {
  await openCluster();
  await buildServer(console.log);
  await buildWeb(console.log);
}
