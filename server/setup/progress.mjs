/** What the person reads while setting up. It goes to stderr, so that a command's own output stays clean. */

/** @param {string} text */
export function say(text) {
  process.stderr.write(`${text}\n`);
}

/**
 * Says what is being done before a step that may take long, and how long it took.
 *
 * @template T
 * @param {string} label
 * @param {() => Promise<T>} act
 * @returns {Promise<T>}
 */
export async function step(label, act) {
  const begun = performance.now();
  say(`${label} …`);
  const result = await act();
  const seconds = (performance.now() - begun) / 1000;
  say(`  done in ${seconds.toFixed(1)} s`);
  return result;
}
