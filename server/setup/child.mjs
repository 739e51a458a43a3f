import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { fileURLToPath } from 'node:url';

const FOLLOW = fileURLToPath(new URL('./follow-parent.mjs', import.meta.url));
const GRACE_MS = 10_000;

/**
 * A Node program that lives no longer than this one. What it prints goes to stderr.
 *
 * @typedef {object} Child
 * @property {number | undefined} pid
 * @property {Promise<number | null>} ended its exit code; null where a signal ended it
 * @property {() => Promise<void>} stop
 *
 * @param {readonly string[]} args
 * @param {{ cwd: string, env: NodeJS.ProcessEnv }} options
 * @returns {Child}
 */
export function startChild(args, options) {
  const child = spawn(process.execPath, ['--import', FOLLOW, ...args], {
    ...options,
    stdio: ['ignore', process.stderr, process.stderr, 'ipc'],
  });
  const ended = once(child, 'exit').then(([code]) => /** @type {number | null} */ (code));
  return {
    pid: child.pid,
    ended,
    stop: async () => {
      if (child.exitCode !== null || child.signalCode !== null) return;
      child.kill('SIGTERM');
      const force = setTimeout(() => child.kill('SIGKILL'), GRACE_MS);
      await ended;
      clearTimeout(force);
    },
  };
}
