import { accessSync, constants, readdirSync, readFileSync, realpathSync } from 'node:fs';
import { delimiter, dirname, join } from 'node:path';
import { installDebianPackage } from './debian-package.mjs';
import { SetupError } from './setup-error.mjs';

/** Finds PostgreSQL's own programs. Debian keeps them out of PATH, one folder a version. */

const DEBIAN = '/usr/lib/postgresql';
const NEEDED = ['initdb', 'pg_ctl', 'postgres', 'psql'];

/** @param {string} folder */
function isComplete(folder) {
  try {
    for (const name of NEEDED) accessSync(join(folder, name), constants.X_OK);
    return true;
  } catch {
    return false;
  }
}

/** @returns {string[]} newest first */
function debianFolders() {
  try {
    const versions = readdirSync(DEBIAN).filter((name) => /^\d+$/.test(name));
    return versions.sort((a, b) => Number(b) - Number(a)).map((version) => join(DEBIAN, version, 'bin'));
  } catch {
    return [];
  }
}

function pathFolders() {
  return (process.env['PATH'] ?? '').split(delimiter).flatMap((folder) => {
    try {
      return [dirname(realpathSync(join(folder, 'pg_ctl')))];
    } catch {
      return [];
    }
  });
}

/** @param {string} folder @returns {string} for example '15' */
function majorOf(folder) {
  return /postgresql\/(\d+)\/bin$/.exec(folder)?.[1] ?? '';
}

/** @param {string} data @returns {string | null} the version that made this data folder */
export function dataVersion(data) {
  try {
    return readFileSync(join(data, 'PG_VERSION'), 'utf8').trim();
  } catch {
    return null;
  }
}

/** @returns {string[]} */
function candidates() {
  return [...new Set([...debianFolders(), ...pathFolders()])].filter(isComplete);
}

/**
 * A data folder is read only by the version that made it, so an existing one decides.
 *
 * @param {string | null} version
 * @param {import('./debian-package.mjs').Say} say
 * @returns {Promise<string>} the folder that holds pg_ctl and its kin
 */
export async function findBinaries(version, say) {
  if (candidates().length === 0) await installDebianPackage('postgresql', say);
  const found = candidates();
  const fitting = version === null ? found : found.filter((folder) => ['', version].includes(majorOf(folder)));
  if (fitting[0] !== undefined) return fitting[0];
  if (found.length === 0)
    throw new SetupError('PostgreSQL was installed but its programs were not found. Set DATABASE_URL to a PostgreSQL instead.');
  throw new SetupError(
    `The database was made by PostgreSQL ${version}, which is not here. Install postgresql-${version}, or set DATABASE_URL to a PostgreSQL instead.`,
  );
}
