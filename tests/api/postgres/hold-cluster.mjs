import { openCluster } from '#server/postgres/cluster.mjs';
import { clusterFolder } from '#server/postgres/cluster-folder.mjs';

/** Opens the cluster in the folder given, says where, and holds it until told by a line, or killed. */
const cluster = await openCluster(clusterFolder(process.argv[2] ?? ''), { say: () => undefined });
console.log(cluster.url);
process.stdin.once('data', async () => {
  await cluster.release();
  process.exit(0);
});
