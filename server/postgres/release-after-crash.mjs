import { clusterFolder } from './cluster-folder.mjs';
import { releaseCluster } from './release.mjs';

/** Run by the keeper, with the base folder, the mark of the program that is gone, and whether the cluster is disposable. */
const [base = '', mark = '', kind] = process.argv.slice(2);
await releaseCluster(clusterFolder(base), mark, kind === 'disposable');
