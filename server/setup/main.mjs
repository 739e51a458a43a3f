import { SetupError } from '#server/postgres/setup-error.mjs';
import { say } from './progress.mjs';
import { stopSignal } from './stop-signal.mjs';

/**
 * Runs a command from beginning to end: stops on request, undoes what was done in reverse order, says what to do on failure.
 *
 * @typedef {{ signal: AbortSignal, later: (undo: () => Promise<void>) => void }} Command
 * @param {(command: Command) => Promise<void>} act
 */
export async function main(act) {
  const signal = stopSignal();
  /** @type {(() => Promise<void>)[]} */
  const undo = [];
  try {
    await act({ signal, later: (step) => undo.push(step) });
  } catch (error) {
    // What a stop interrupted is no failure.
    if (!signal.aborted) {
      process.exitCode = 1;
      say(`\n${error instanceof SetupError ? error.message : error instanceof Error ? error.stack : String(error)}`);
    }
  }
  for (const step of undo.reverse()) await step().catch((error) => say(String(error)));
  process.exit();
}
