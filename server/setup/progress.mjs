/** What the person reads while setting up. It goes to stderr, so that a command's own output stays clean. */

/** @param {string} text */
export function say(text) {
  process.stderr.write(`${text}\n`);
}

/** A step this long says now and then that it still runs. */
const REMINDER_S = 15;

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
  const seconds = () => (performance.now() - begun) / 1000;
  say(`${label} …`);
  const reminder = setInterval(() => say(`  still at it, ${seconds().toFixed(0)} s`), REMINDER_S * 1000);
  try {
    const result = await act();
    say(`  done in ${seconds().toFixed(1)} s`);
    return result;
  } finally {
    clearInterval(reminder);
  }
}
