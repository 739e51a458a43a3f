import { setImmediate } from 'node:timers/promises';

/** Asks again and again until the answer is not null; the test's own time limit ends it. */
export async function until<T>(ask: () => Promise<T | null>): Promise<T> {
  for (;;) {
    const answer = await ask();
    if (answer !== null) return answer;
    await setImmediate();
  }
}
