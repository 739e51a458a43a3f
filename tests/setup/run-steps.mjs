import { say } from '#server/setup/progress.mjs';
import { addTallies, lastLine } from './tally.mjs';

/**
 * Runs the steps one after another, all of them even where one fails, and ends with one line that adds up their counts.
 *
 * @param {readonly import('./steps.mjs').Step[]} steps
 * @param {AbortSignal} signal
 */
export async function runSteps(steps, signal) {
  const tallies = [];
  for (const { name, run } of steps) {
    if (signal.aborted) break;
    const begun = performance.now();
    say(`\n── ${name}`);
    const tally = await run(signal);
    say(`── ${name}: ${lastLine(tally)} in ${((performance.now() - begun) / 1000).toFixed(1)} s`);
    tallies.push(tally);
  }
  const total = addTallies(tallies);
  // A run broken off half-way has not passed.
  if (signal.aborted) total.failed += 1;
  if (total.failed > 0) process.exitCode = 1;
  console.log(`\n${lastLine(total)}`);
}
