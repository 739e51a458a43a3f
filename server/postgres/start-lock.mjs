import { createHash } from 'node:crypto';
import { createServer } from 'node:net';
import { setTimeout as wait } from 'node:timers/promises';
import { SetupError } from './setup-error.mjs';

const PATIENCE_MS = 180_000;

/**
 * @param {string} path an abstract socket: a name in the kernel, no file, free again the moment its holder dies
 * @returns {Promise<(() => void) | null>}
 */
function take(path) {
  return new Promise((resolve, reject) => {
    const server = createServer();
    server.unref();
    server.on('error', (error) => (/** @type {NodeJS.ErrnoException} */ (error).code === 'EADDRINUSE' ? resolve(null) : reject(error)));
    server.listen(path, () => resolve(() => server.close()));
  });
}

/**
 * Runs `act` while no other process does so for the same name. Nothing is left locked after a crash.
 *
 * @template T
 * @param {string} name
 * @param {() => Promise<T>} act
 * @returns {Promise<T>}
 */
export async function withStartLock(name, act) {
  const path = `\0evenline-${createHash('sha256').update(name).digest('hex').slice(0, 32)}`;
  const deadline = Date.now() + PATIENCE_MS;
  for (;;) {
    const release = await take(path);
    if (release !== null) {
      try {
        return await act();
      } finally {
        release();
      }
    }
    if (Date.now() > deadline)
      throw new SetupError(`Another Evenline has been starting for minutes on ${name}. Stop it, then start again.`);
    await wait(100);
  }
}
