import { parentOf } from '#server/postgres/processes.mjs';

/** How often to look whether npm, which started this program, is still there. */
const LOOK_MS = 1000;

/** npm runs its commands through a shell, so npm itself is the parent's parent. */
function ancestry() {
  return `${process.ppid} ${parentOf(process.ppid)}`;
}

/**
 * @returns {AbortSignal} aborted when the person or the system asks this program to stop, or when the npm command that
 *   started it is gone
 */
export function stopSignal() {
  const stop = new AbortController();
  for (const name of /** @type {const} */ (['SIGINT', 'SIGTERM', 'SIGHUP'])) process.on(name, () => stop.abort());
  if (process.env['npm_lifecycle_event'] !== undefined) {
    const begun = ancestry();
    setInterval(() => {
      if (ancestry() !== begun) stop.abort();
    }, LOOK_MS).unref();
  }
  return stop.signal;
}

/** @param {AbortSignal} signal @returns {Promise<void>} */
export function aborted(signal) {
  return new Promise((resolve) => {
    if (signal.aborted) resolve();
    else signal.addEventListener('abort', () => resolve(), { once: true });
  });
}
