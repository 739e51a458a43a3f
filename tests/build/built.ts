import { existsSync, readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { gzipSync } from 'node:zlib';

/** Reads what `npm run build` left in dist/. */
interface Chunk {
  readonly file: string;
  /** The module this chunk was made for, or null where it is only shared by others. */
  readonly entry: string | null;
  readonly imports: readonly string[];
  readonly modules: readonly string[];
}

export const DIST = 'dist';

export function chunks(): Chunk[] {
  const path = join(DIST, '.vite/modules.json');
  if (!existsSync(path)) throw new Error('dist/ holds no build: run `npm run build` first.');
  return JSON.parse(readFileSync(path, 'utf8'));
}

/** Everything fetched to show one world: the page's own script, the world's entry and all they import. */
export function chunksToShow(entry: string): Chunk[] {
  const all = chunks();
  const byFile = new Map(all.map((chunk) => [chunk.file, chunk]));
  const wanted = new Set<Chunk>();
  const want = (chunk: Chunk | undefined) => {
    if (chunk === undefined || wanted.has(chunk)) return;
    wanted.add(chunk);
    for (const file of chunk.imports) want(byFile.get(file));
  };
  const first = all.find((chunk) => chunk.entry?.endsWith('index.html'));
  const world = all.find((chunk) => chunk.entry === entry);
  if (first === undefined || world === undefined) throw new Error(`The build has no chunk for ${entry}.`);
  want(first);
  want(world);
  return [...wanted];
}

export function gzipBytes(files: readonly string[]): number {
  return files.reduce((sum, file) => sum + gzipSync(readFileSync(join(DIST, file))).length, 0);
}

export function precached(): string[] {
  const worker = readFileSync(join(DIST, 'sw.js'), 'utf8');
  return [...new Set([...worker.matchAll(/url:"([^"]+)"/g)].map((match) => match[1] ?? ''))];
}

export function assets(): string[] {
  return readdirSync(join(DIST, 'assets')).map((file) => `assets/${file}`);
}
