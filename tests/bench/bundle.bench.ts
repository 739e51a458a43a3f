import { statSync } from 'node:fs';
import { join } from 'node:path';
import { ensureBuild } from '#server/setup/build.mjs';
import { chunksToShow, DIST, gzipBytes, precached } from '#tests/build/built.ts';
import type { Bench } from './figures.ts';

/** What a device has to fetch. */
export const bench: Bench = async () => {
  await ensureBuild(process.cwd(), new AbortController().signal);
  const scripts = (entry: string) => gzipBytes(chunksToShow(entry).map((chunk) => chunk.file)) / 1000;
  const precache = precached().reduce((sum, file) => sum + statSync(join(DIST, file)).size, 0);
  return {
    'cockpit JavaScript, gzipped': { value: scripts('src/cockpit/cockpit.tsx'), unit: 'kB', atMost: 130 },
    'paddock JavaScript, gzipped': { value: scripts('src/paddock/paddock.tsx'), unit: 'kB' },
    precache: { value: precache / 1e6, unit: 'MB', atMost: 1.2 },
  };
};
