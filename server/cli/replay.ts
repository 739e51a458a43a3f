import { readFileSync } from 'node:fs';
import { fromNdjson } from '#shared/journal/ndjson.ts';
import { replay } from '#shared/journal/replay.ts';
import { runSheet } from '#shared/pace/sheet.ts';

/** `npm run -s replay -- FILE`: prints the run sheet of an exported journal (NDJSON) as JSON. `-` reads standard input. */

const USAGE = 'Usage: npm run -s replay -- FILE   (a journal exported as NDJSON; - for standard input)';

function readInput(argument: string): string {
  try {
    return readFileSync(argument === '-' ? 0 : argument, 'utf8');
  } catch (error) {
    throw new Error(`Cannot read ${argument === '-' ? 'standard input' : argument}: ${(error as Error).message}`);
  }
}

function main(args: readonly string[]): number {
  const [argument, ...more] = args;
  if (argument === undefined || more.length > 0) {
    process.stderr.write(`${USAGE}\n`);
    return 1;
  }
  let text: string;
  try {
    text = readInput(argument);
  } catch (error) {
    process.stderr.write(`${(error as Error).message}\n`);
    return 1;
  }
  const journal = fromNdjson(text);
  if (!journal.ok) {
    process.stderr.write(`${journal.error.message}\n`);
    return 1;
  }
  const { header, observations } = journal.value;
  process.stdout.write(`${JSON.stringify(runSheet(replay(header, observations), header), null, 2)}\n`);
  return 0;
}

// a reader that has seen enough (head, less) is no failure
process.stdout.on('error', (error: NodeJS.ErrnoException) => {
  if (error.code !== 'EPIPE') throw error;
});
process.exitCode = main(process.argv.slice(2));
