import { mkdirSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { markLives } from './processes.mjs';

/**
 * Several programs may use one cluster (a server, a watcher); the last one out stops it. Marks of programs that crashed
 * do not count. Call these under the start lock.
 *
 * @typedef {import('./cluster-folder.mjs').ClusterFolder} ClusterFolder
 */

/** @param {ClusterFolder} folder @param {string} mark */
export function enter(folder, mark) {
  mkdirSync(folder.users, { recursive: true });
  writeFileSync(join(folder.users, mark), '');
}

/** @param {ClusterFolder} folder @param {string} mark */
export function leave(folder, mark) {
  rmSync(join(folder.users, mark), { force: true });
}

/** @param {ClusterFolder} folder @returns {boolean} */
export function hasUsers(folder) {
  try {
    return readdirSync(folder.users).some(markLives);
  } catch {
    return false;
  }
}
