import { createHash } from 'node:crypto';
import { chmodSync, chownSync, mkdirSync, mkdtempSync, rmSync } from 'node:fs';
import { homedir, tmpdir } from 'node:os';
import { dirname, join, resolve } from 'node:path';
import { runCommand } from './run-command.mjs';
import { SetupError } from './setup-error.mjs';
import { postgresUser } from './system-user.mjs';

/**
 * Where a cluster's files lie. As root they belong to user `postgres`, who cannot enter every folder (a home, a private
 * temporary folder): then a place that he can enter is taken instead.
 *
 * @typedef {object} ClusterFolder
 * @property {string} base
 * @property {string} data
 * @property {string} socket
 * @property {string} log
 * @property {string} password
 * @property {string} users one file for each process that uses the cluster
 */

/** @param {string} base @returns {ClusterFolder} */
export function clusterFolder(base) {
  return {
    base,
    data: join(base, 'data'),
    socket: join(base, 'socket'),
    log: join(base, 'postgres.log'),
    password: join(base, 'password'),
    users: join(base, 'users'),
  };
}

/** @param {string} folder */
async function usable(folder) {
  try {
    mkdirSync(folder, { recursive: true });
    const user = postgresUser('/');
    if (user.uid !== undefined && user.gid !== undefined) chownSync(folder, user.uid, user.gid);
    chmodSync(folder, 0o700);
    return (await runCommand('/usr/bin/test', ['-w', folder], { ...user, cwd: '/' })).code === 0;
  } catch (error) {
    if (error instanceof SetupError) throw error;
    return false;
  }
}

/**
 * @param {string} root the repository
 * @returns {Promise<ClusterFolder>}
 */
export async function projectClusterFolder(root) {
  const name = createHash('sha256').update(resolve(root)).digest('hex').slice(0, 12);
  const elsewhere = process.getuid?.() === 0 ? '/var/lib/evenline' : join(homedir(), '.local/share/evenline');
  for (const base of [join(root, '.data/postgres'), join(elsewhere, name)]) {
    if (await usable(base)) return clusterFolder(base);
  }
  throw new SetupError(`No folder for the database: make ${join(root, '.data')} writable, or set DATABASE_URL to a PostgreSQL instead.`);
}

/** @returns {Promise<ClusterFolder>} a fresh folder of its own, to be removed with everything in it */
export async function disposableClusterFolder() {
  for (const parent of [tmpdir(), '/var/tmp', '/dev/shm']) {
    try {
      const base = mkdtempSync(join(parent, 'evenline-postgres-'));
      if (await usable(base)) return clusterFolder(base);
      rmSync(base, { recursive: true, force: true });
    } catch (error) {
      if (error instanceof SetupError) throw error;
    }
  }
  throw new SetupError(`No temporary folder for a database: make ${dirname(tmpdir())} writable, or set TMPDIR.`);
}
