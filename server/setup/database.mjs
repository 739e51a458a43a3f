import { openCluster } from '#server/postgres/cluster.mjs';
import { projectClusterFolder } from '#server/postgres/cluster-folder.mjs';
import { runCommand } from '#server/postgres/run-command.mjs';
import { SetupError } from '#server/postgres/setup-error.mjs';
import { say, step } from './progress.mjs';

/**
 * The database that DATABASE_URL names, or else the project's own cluster.
 *
 * @param {string} root
 * @returns {Promise<{ url: string, release: () => Promise<void> }>}
 */
export async function openDatabase(root) {
  const given = process.env['DATABASE_URL'];
  if (given !== undefined && given !== '') return { url: given, release: async () => undefined };
  return await step('Starting PostgreSQL', async () => await openCluster(await projectClusterFolder(root), { say }));
}

/**
 * Migrates, and seeds the demo where the database is empty.
 *
 * @param {string} root
 * @param {string} url
 * @param {AbortSignal} signal
 * @returns {Promise<string>} what the command has to say to the person
 */
export async function prepareDatabase(root, url, signal) {
  return await step('Preparing the database (the demo drives its runs the first time)', async () => {
    const args = ['--import', 'tsx', 'server/cli/prepare-database.ts'];
    const { code, output } = await runCommand(process.execPath, args, { cwd: root, signal, env: { ...process.env, DATABASE_URL: url } });
    if (code !== 0) {
      throw new SetupError(
        `${output}\nThe database could not be prepared. If DATABASE_URL is set, is it right, and may its user create tables?`,
      );
    }
    return output.trim();
  });
}
