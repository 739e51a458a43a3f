import { readdirSync } from 'node:fs';
import { parseArgs } from 'node:util';
import { type Bench, figuresJson, figuresTable } from './figures.ts';

/**
 * `npm run bench -- NAME… [--quick] [--json]`: a table for people; with `--json` the last line of each bench is one JSON
 * object of its figures.
 */
const FOLDER = new URL('./', import.meta.url);
const ENDING = '.bench.ts';

const names = readdirSync(FOLDER)
  .filter((file) => file.endsWith(ENDING))
  .map((file) => file.slice(0, -ENDING.length))
  .sort();

const { values, positionals } = parseArgs({
  allowPositionals: true,
  options: { quick: { type: 'boolean', default: false }, json: { type: 'boolean', default: false } },
});

const unknown = positionals.filter((name) => !names.includes(name));
if (positionals.length === 0 || unknown.length > 0) {
  if (unknown.length > 0) console.error(`There is no bench ${unknown.join(', ')}.`);
  console.error(`npm run bench -- NAME… [--quick] [--json], NAME one of: ${names.join(', ')}`);
  process.exit(unknown.length > 0 ? 1 : 0);
}

for (const name of positionals) {
  const { bench }: { bench: Bench } = await import(new URL(`${name}${ENDING}`, FOLDER).href);
  const begun = performance.now();
  const figures = await bench({ quick: values.quick });
  const seconds = (performance.now() - begun) / 1000;
  console.log(`\n${name}${values.quick ? ', quick' : ''}: ${seconds.toFixed(1)} s\n\n${figuresTable(figures)}\n`);
  if (values.json) console.log(figuresJson(figures));
}
// A bench may leave a database pool or a browser closing behind it.
process.exit();
