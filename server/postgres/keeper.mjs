import { spawn } from 'node:child_process';
import { fileURLToPath } from 'node:url';

/**
 * A program killed outright cannot stop its database. So a shell waits on a pipe that the kernel closes when the program
 * ends, however it ends, and then releases the cluster in its place.
 *
 * @param {string} base
 * @param {string} mark
 * @param {boolean} disposable
 * @returns {{ end: () => void }}
 */
export function keepWatch(base, mark, disposable) {
  const script = fileURLToPath(new URL('./release-after-crash.mjs', import.meta.url));
  const args = [process.execPath, script, base, mark, disposable ? 'disposable' : 'lasting'];
  const keeper = spawn('/bin/sh', ['-c', 'read -r done && exit 0; exec "$0" "$@"', ...args], {
    cwd: '/',
    detached: true,
    stdio: ['pipe', 'ignore', 'ignore'],
  });
  keeper.on('error', () => undefined);
  keeper.stdin.on('error', () => undefined);
  keeper.unref();
  if ('unref' in keeper.stdin && typeof keeper.stdin.unref === 'function') keeper.stdin.unref();
  return { end: () => keeper.stdin.end('done\n') };
}
