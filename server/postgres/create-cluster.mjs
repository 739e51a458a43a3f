import { randomBytes } from 'node:crypto';
import { appendFileSync, chmodSync, chownSync, existsSync, mkdirSync, readFileSync, renameSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { runCommand } from './run-command.mjs';
import { SetupError } from './setup-error.mjs';
import { postgresUser } from './system-user.mjs';

/** @typedef {import('./cluster-folder.mjs').ClusterFolder} ClusterFolder */

export const OWNER = 'evenline';

/** @param {string} path @param {string} text for the PostgreSQL user's eyes only */
export function writePrivate(path, text) {
  writeFileSync(path, text, { mode: 0o600 });
  const { uid, gid } = postgresUser('/');
  if (uid !== undefined && gid !== undefined) chownSync(path, uid, gid);
}

/** @param {ClusterFolder} folder @returns {string} */
export function readPassword(folder) {
  if (!existsSync(folder.password)) {
    throw new SetupError(
      `${folder.password} is missing, so the database cannot be opened. Put it back, or remove ${folder.base} to begin anew.`,
    );
  }
  return readFileSync(folder.password, 'utf8').trim();
}

/**
 * Makes the data folder. A half-made one (the machine stopped meanwhile) never takes the finished one's name.
 *
 * @param {ClusterFolder} folder
 * @param {string} binaries
 * @param {boolean} disposable
 */
export async function createCluster(folder, binaries, disposable) {
  const half = `${folder.data}.half-made`;
  rmSync(half, { recursive: true, force: true });
  writePrivate(folder.password, `${randomBytes(24).toString('hex')}\n`);
  const user = postgresUser(folder.base);
  const settings = ['-D', half, '-U', OWNER, '-A', 'scram-sha-256', '--pwfile', folder.password, '-E', 'UTF8', '--locale=C.UTF-8'];
  const { code, output } = await runCommand(join(binaries, 'initdb'), [...settings, ...(disposable ? ['--no-sync'] : [])], {
    ...user,
    cwd: folder.base,
  });
  if (code !== 0) throw new SetupError(`${output}\nThe database could not be made in ${folder.base}. Is the disk full?`);
  appendFileSync(join(half, 'postgresql.conf'), "\ninclude = '../settings.conf'\n");
  renameSync(half, folder.data);
}

const DISPOSABLE = ['fsync = off', 'synchronous_commit = off', 'full_page_writes = off'];
/** A socket's path has room for 107 bytes (unix(7)), `/.s.PGSQL.65535` and its lock included. */
const LONGEST_SOCKET_FOLDER = 85;

/**
 * @param {ClusterFolder} folder
 * @param {number} port
 * @param {boolean} disposable
 */
export function writeSettings(folder, port, disposable) {
  const fits = Buffer.byteLength(folder.socket) <= LONGEST_SOCKET_FOLDER;
  const socket = fits ? folder.socket.replaceAll("'", "''") : '';
  if (fits) {
    mkdirSync(folder.socket, { recursive: true });
    const { uid, gid } = postgresUser('/');
    if (uid !== undefined && gid !== undefined) chownSync(folder.socket, uid, gid);
    chmodSync(folder.socket, 0o700);
  }
  const lines = [
    "listen_addresses = '127.0.0.1'",
    `port = ${port}`,
    `unix_socket_directories = '${socket}'`,
    "timezone = 'UTC'",
    ...(disposable ? DISPOSABLE : []),
  ];
  writePrivate(join(folder.base, 'settings.conf'), `${lines.join('\n')}\n`);
}
