import { readdirSync } from 'node:fs';
import { parseArgs } from 'node:util';
import { type Bench, figuresJson, figuresTable, isReport } from './figures.ts';

/**
 * `npm run bench -- NAME… [--quick] [--json]`: a table for people; with `--json` the last line of each bench is one JSON
 * object of its figures. `accuracy` takes `--only base,rough`, `--methods ratio,filter` and `--drives 300` as well.
 */
const FOLDER = new URL('./', import.meta.url);
const ENDING = '.bench.ts';

const names = readdirSync(FOLDER)
  .filter((file) => file.endsWith(ENDING))
  .map((file) => file.slice(0, -ENDING.length))
  .sort();

const { values, positionals } = parseArgs({
  allowPositionals: true,
  options: {
    quick: { type: 'boolean', default: false },
    json: { type: 'boolean', default: false },
    only: { type: 'string' },
    methods: { type: 'string' },
    drives: { type: 'string' },
  },
});
const drives = values.drives === undefined ? undefined : Number(values.drives);
if (drives !== undefined && !(Number.isInteger(drives) && drives > 0)) {
  console.error('--drives takes a whole number above 0.');
  process.exit(1);
}
const options = {
  quick: values.quick,
  ...(values.only === undefined ? {} : { only: values.only.split(',') }),
  ...(values.methods === undefined ? {} : { methods: values.methods.split(',') }),
  ...(drives === undefined ? {} : { drives }),
};

const unknown = positionals.filter((name) => !names.includes(name));
if (positionals.length === 0 || unknown.length > 0) {
  if (unknown.length > 0) console.error(`There is no bench ${unknown.join(', ')}.`);
  console.error(`npm run bench -- NAME… [--quick] [--json], NAME one of: ${names.join(', ')}`);
  process.exit(unknown.length > 0 ? 1 : 0);
}

for (const name of positionals) {
  const { bench }: { bench: Bench } = await import(new URL(`${name}${ENDING}`, FOLDER).href);
  const begun = performance.now();
  const answer = await bench(options);
  const seconds = (performance.now() - begun) / 1000;
  console.log(
    `\n${name}${values.quick ? ', quick' : ''}: ${seconds.toFixed(1)} s\n\n${isReport(answer) ? answer.text : figuresTable(answer)}\n`,
  );
  if (values.json) console.log(isReport(answer) ? JSON.stringify(answer.json) : figuresJson(answer));
}
// A bench may leave a database pool or a browser closing behind it.
process.exit();
