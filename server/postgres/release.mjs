import { rmSync } from 'node:fs';
import { hasUsers, leave } from './cluster-users.mjs';
import { stopPostmaster } from './postmaster.mjs';
import { withStartLock } from './start-lock.mjs';

/**
 * The last user out stops the cluster; a disposable one goes with its files.
 *
 * @param {import('./cluster-folder.mjs').ClusterFolder} folder
 * @param {string} mark
 * @param {boolean} disposable
 */
export async function releaseCluster(folder, mark, disposable) {
  await withStartLock(folder.base, async () => {
    leave(folder, mark);
    if (hasUsers(folder)) return;
    await stopPostmaster(folder.data, disposable ? 'SIGQUIT' : 'SIGINT');
    if (disposable) rmSync(folder.base, { recursive: true, force: true });
  });
}
