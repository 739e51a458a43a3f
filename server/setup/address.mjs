import { connect } from 'node:net';
import { setTimeout as wait } from 'node:timers/promises';
import { freePort } from '#server/postgres/free-port.mjs';
import { SetupError } from '#server/postgres/setup-error.mjs';

const TRIES = 50;

/** @param {number} wanted @returns {Promise<number>} the wanted port, or the next free one */
export async function nextFreePort(wanted) {
  for (let port = wanted; port < wanted + TRIES && port < 65536; port += 1) {
    const free = await freePort(port);
    if (free !== null) return free;
  }
  throw new SetupError(`No free port from ${wanted} on. Set PORT to a free one.`);
}

/** @param {number} port @param {string} host @returns {Promise<boolean>} */
function answers(port, host) {
  return new Promise((resolve) => {
    const socket = connect(port, host, () => {
      socket.destroy();
      resolve(true);
    });
    socket.on('error', () => resolve(false));
  });
}

/**
 * @param {number} port
 * @param {string} host
 * @param {AbortSignal} signal ends the waiting
 */
export async function untilListening(port, host, signal) {
  const reach = host === '0.0.0.0' || host === '::' ? '127.0.0.1' : host;
  while (!signal.aborted && !(await answers(port, reach))) await wait(50);
}
