import { readFileSync, writeFileSync } from 'node:fs';
import { biomeJson } from './biome-config.ts';

/** `npm run lint:generate`, from the repository root, writes biome.json from the matrices; `--check` only says whether it is stale. */
const wanted = biomeJson();

if (process.argv.includes('--check')) {
  if (readFileSync('biome.json', 'utf8') !== wanted) {
    console.error('biome.json does not match tests/lint/import-matrix.ts: run `npm run lint:generate` and commit the result.');
    process.exit(1);
  }
} else {
  writeFileSync('biome.json', wanted);
  console.log('biome.json written.');
}
