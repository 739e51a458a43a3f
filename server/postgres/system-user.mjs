import { readFileSync } from 'node:fs';
import { SetupError } from './setup-error.mjs';

/**
 * PostgreSQL refuses to run as root; then Debian's user `postgres` owns the data and runs the server.
 *
 * @typedef {{ uid?: number, gid?: number, env: NodeJS.ProcessEnv }} RunAs
 * @param {string} home a folder this user may enter
 * @returns {RunAs} what to give a child process
 */
export function postgresUser(home) {
  const env = { ...process.env, HOME: home, LC_ALL: 'C.UTF-8' };
  if (process.getuid?.() !== 0) return { env };
  const line = readFileSync('/etc/passwd', 'utf8')
    .split('\n')
    .find((entry) => entry.startsWith('postgres:'));
  const [, , uid, gid] = line?.split(':') ?? [];
  if (uid === undefined)
    throw new SetupError("There is no user `postgres`: run as another user than root, or install Debian's postgresql.");
  return { uid: Number(uid), gid: Number(gid), env };
}
