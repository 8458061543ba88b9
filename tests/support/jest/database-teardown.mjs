// What: after the last test: stops the cluster if this run started it.
import { closeCluster } from './test-cluster.mjs';

export default closeCluster;
