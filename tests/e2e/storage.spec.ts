import { readdirSync } from 'node:fs';
import type { Page } from 'playwright/test';
import { decodeBlock, encodeBlock, type Journalled } from '#shared/journal/block.ts';
import type { StoredRun, StoreFacts } from '#src/storage/journal-store.ts';
import type { StoredBlock } from '#src/storage/stored-block.ts';
import { expect, test } from '#tests/e2e/fixtures.ts';
import { HEADER } from '#tests/unit/journal/header.ts';

/**
 * The journal worker as it was built, in a real browser: strict database in its own Storage Bucket, mirror in the private file
 * system. It is called over its own port, as the page's store client calls it.
 */
const RUN = HEADER.runId;
const FILE = `${RUN}.journal`;

declare global {
  interface Window {
    journal: { call(method: string, ...args: readonly unknown[]): Promise<never>; end(): void };
  }
}

function workerPath(): string {
  const file = readdirSync('dist/assets').find((name) => name.startsWith('journal-worker'));
  if (file === undefined) throw new Error('The build has no journal worker.');
  return `/assets/${file}`;
}

/** A window with a journal worker of its own, at a page of this origin that has none: the application's would be first to heal. */
async function openWindow(page: Page): Promise<void> {
  await page.route('**/bare', (route) => route.fulfill({ contentType: 'text/html', body: '<link rel="icon" href="/favicon.svg">' }));
  await page.goto('/bare');
  await page.evaluate((path) => {
    const worker = new Worker(path, { type: 'module' });
    const waiting = new Map<number, (answer: { value?: unknown; error?: string }) => void>();
    let next = 0;
    worker.onmessage = ({ data }) => waiting.get(data.id)?.(data);
    window.journal = {
      call: (method, ...args) =>
        new Promise((resolve, reject) => {
          const id = next++;
          waiting.set(id, ({ value, error }) => (error === undefined ? resolve(value as never) : reject(new Error(error))));
          worker.postMessage({ id, method, args });
        }),
      end: () => worker.terminate(),
    };
  }, workerPath());
}

const blocksOf = (howMany: number): readonly StoredBlock[] =>
  Array.from({ length: howMany }, (_, n) => {
    const observations: Journalled[] = Array.from({ length: 25 }, (_, i) => {
      const seq = n * 25 + i;
      return { seq, at: seq * 10_000, type: 'pulse.v1', channel: 1, count: seq, boxUs: seq * 10_000 };
    });
    return { firstSeq: n * 25, count: 25, bytes: encodeBlock(n * 25, observations) };
  });

async function record(page: Page, from: number, to: number): Promise<readonly number[]> {
  const blocks = blocksOf(to)
    .slice(from)
    .map(({ bytes, ...rest }) => ({ ...rest, bytes: [...bytes] }));
  return page.evaluate(
    async ({ blocks: all, header, runId }) => {
      await window.journal.call('createRun', header);
      const took: number[] = [];
      for (const block of all) {
        const began = performance.now();
        const answer: { ok: boolean; error?: { message: string } } = await window.journal.call('append', runId, {
          ...block,
          bytes: Uint8Array.from(block.bytes),
        });
        if (!answer.ok) throw new Error(answer.error?.message);
        took.push(performance.now() - began);
      }
      return took;
    },
    { blocks, header: HEADER, runId: RUN },
  );
}

/** The run as the worker gives it, checked block by block. */
async function read(page: Page): Promise<{ readonly recovered: StoredRun['recovered']; readonly seqs: readonly number[] }> {
  const run = await page.evaluate(async (runId) => {
    const answer: { ok: boolean; value: StoredRun; error?: { message: string } } = await window.journal.call('readRun', runId);
    if (!answer.ok) throw new Error(answer.error?.message);
    return { recovered: answer.value.recovered, blocks: answer.value.blocks.map((block) => [...block.bytes]) };
  }, RUN);
  const seqs = run.blocks.flatMap((bytes) => {
    const block = decodeBlock(Uint8Array.from(bytes));
    if (!block.ok) throw new Error(block.error.message);
    return block.value.observations.map((o) => o.seq);
  });
  return { recovered: run.recovered, seqs };
}

const facts = (page: Page): Promise<StoreFacts> => page.evaluate(() => window.journal.call('facts'));
const upTo = (seq: number): readonly number[] => Array.from({ length: seq }, (_, i) => i);

function mirrorSize(page: Page): Promise<number> {
  return page.evaluate(async (name) => {
    const folder = await (await navigator.storage.getDirectory()).getDirectoryHandle('evenline-mirror');
    return (await (await folder.getFileHandle(name)).getFile()).size;
  }, FILE);
}

/** Changes the mirror behind the worker's back: its last bytes cut off, then others put there. */
async function damageMirror(page: Page, cut: number, garbage: readonly number[]): Promise<void> {
  await page.evaluate(
    async ({ name, cut: less, garbage: more }) => {
      const folder = await (await navigator.storage.getDirectory()).getDirectoryHandle('evenline-mirror');
      const handle = await folder.getFileHandle(name);
      const size = (await handle.getFile()).size - less;
      const writer = await handle.createWritable({ keepExistingData: true });
      await writer.truncate(size);
      await writer.write({ type: 'write', position: size, data: Uint8Array.from(more) });
      await writer.close();
    },
    { name: FILE, cut, garbage },
  );
}

async function loseDatabase(page: Page): Promise<void> {
  await page.evaluate(async () => {
    const { storageBuckets } = navigator as unknown as {
      storageBuckets: { open(name: string, options: object): Promise<{ indexedDB: IDBFactory }> };
    };
    const bucket = await storageBuckets.open('evenline-journal', { durability: 'strict', persisted: true });
    await new Promise((done, failed) => {
      const request = bucket.indexedDB.deleteDatabase('evenline-journal');
      request.onsuccess = done;
      request.onerror = failed;
    });
  });
}

/** The page goes away and comes back with a new worker. */
async function reopen(page: Page, meanwhile: () => Promise<void> = async () => undefined): Promise<void> {
  await page.evaluate(() => window.journal.end());
  await meanwhile();
  await openWindow(page);
}

test('journals lie in a bucket of their own and in a mirror outside it', async ({ page }) => {
  await openWindow(page);
  const took = await record(page, 0, 40);
  expect(await facts(page)).toEqual({ database: 'own bucket', mirror: true, warning: null, mendedRuns: [] });
  const inDefault = await page.evaluate(async () => (await indexedDB.databases()).map(({ name }) => name));
  expect(inDefault).not.toContain('evenline-journal');
  await reopen(page);
  expect(await read(page)).toEqual({ recovered: 'database', seqs: upTo(1000) });
  const sorted = [...took].sort((a, b) => a - b);
  test
    .info()
    .annotations.push({ type: 'commit and mirror, ms', description: `median ${sorted[20]?.toFixed(1)}, worst ${sorted[39]?.toFixed(1)}` });
});

test('a torn or garbled mirror is mended from the database', async ({ page }) => {
  await openWindow(page);
  await record(page, 0, 12);
  await page.evaluate((runId) => window.journal.call('releaseRun', runId), RUN);
  const size = await mirrorSize(page);
  for (const [cut, garbage] of [
    [0, [1, 2, 3, 4, 5, 6, 7]],
    [100, []],
    [size, []],
    [size - 3, [9]],
  ] as const) {
    await reopen(page, () => damageMirror(page, cut, garbage));
    expect(await read(page)).toEqual({ recovered: 'database', seqs: upTo(300) });
    expect(await mirrorSize(page)).toBe(size);
  }
});

test('a lost database is restored from the mirror, and the run goes on', async ({ page }) => {
  await openWindow(page);
  await record(page, 0, 12);
  await reopen(page, () => loseDatabase(page));
  expect((await facts(page)).mendedRuns).toEqual([RUN]);
  expect(await read(page)).toEqual({ recovered: 'mirror', seqs: upTo(300) });
  await record(page, 12, 20);
  await reopen(page);
  expect(await read(page)).toEqual({ recovered: 'database', seqs: upTo(500) });
});

test('a second window reads while the first writes, and takes the mirror when the first is gone', async ({ page, context }) => {
  await openWindow(page);
  await record(page, 0, 4);
  const second = await context.newPage();
  await openWindow(second);
  expect((await read(second)).seqs).toEqual(upTo(100));
  await record(page, 4, 8);
  await page.close();
  expect((await read(second)).seqs).toEqual(upTo(200));
  await record(second, 8, 12);
  await reopen(second, () => loseDatabase(second));
  expect(await read(second)).toEqual({ recovered: 'mirror', seqs: upTo(300) });
});
