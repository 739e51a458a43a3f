import { forceCloseDatabase, IDBDatabase, IDBFactory, IDBObjectStore } from 'fake-indexeddb';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { blocksOfRun, DATABASE_NAME, Device, headerOf, must } from './device.ts';

const RUN = 'run-1';

afterEach(() => vi.restoreAllMocks());

/** Watches every transaction of every database. Installed before anything is opened. */
function watchTransactions() {
  const real = IDBDatabase.prototype.transaction;
  const seen: { readonly stores: readonly string[]; readonly mode: string; readonly durability: string }[] = [];
  vi.spyOn(IDBDatabase.prototype, 'transaction').mockImplementation(function (this: IDBDatabase, stores, mode, options) {
    seen.push({ stores: [stores].flat() as string[], mode: mode ?? 'readonly', durability: options?.durability ?? 'default' });
    return real.call(this, stores, mode, options);
  } as typeof real);
  return seen;
}

describe('durability', () => {
  it('is strict in every transaction that writes', async () => {
    const seen = watchTransactions();
    const device = new Device();
    const { store } = await device.window();
    must(await store.createRun(headerOf(RUN)));
    for (const block of blocksOfRun(12)) must(await store.append(RUN, block));
    await store.keepChunks(RUN, [{ n: 0, firstSeq: 0, nextSeq: 25, length: 10, digest: 'a' }]);
    await store.progress(RUN, { confirmed: 1 });
    await store.putSnapshot(RUN, { engine: '1', seq: 5, state: {} });
    const writes = seen.filter(({ mode }) => mode === 'readwrite');
    expect(writes.filter(({ stores }) => stores.includes('blocks')).length).toBeGreaterThanOrEqual(12);
    expect(writes.filter(({ durability }) => durability !== 'strict')).toEqual([]);
  });

  it('commits every block in a transaction of its own', async () => {
    const seen = watchTransactions();
    const device = new Device();
    const { store } = await device.window();
    must(await store.createRun(headerOf(RUN)));
    const blocks = blocksOfRun(30);
    await Promise.all(blocks.map((block) => store.append(RUN, block)));
    expect(seen.filter(({ stores, mode }) => mode === 'readwrite' && stores.includes('blocks'))).toHaveLength(30);
  });
});

describe('a database that goes away under way', () => {
  it('closed by the browser: opened again, nothing lost', async () => {
    const device = new Device();
    const { store, db } = await device.window();
    must(await store.createRun(headerOf(RUN)));
    const blocks = blocksOfRun(9);
    for (const [i, block] of blocks.entries()) {
      // biome-ignore lint/suspicious/noExplicitAny: the double's own handle has no public type
      if (i % 3 === 1) forceCloseDatabase((db as any).idbdb);
      must(await store.append(RUN, block));
    }
    expect(must(await store.readRun(RUN)).blocks).toEqual(blocks);
  });

  it('deleted by another window (versionchange): restored from the mirror, nothing lost', async () => {
    vi.spyOn(console, 'warn').mockImplementation(() => undefined);
    const device = new Device();
    const { store } = await device.window();
    must(await store.createRun(headerOf(RUN)));
    const blocks = blocksOfRun(8);
    for (const block of blocks.slice(0, 5)) must(await store.append(RUN, block));
    await new Promise((done, failed) => {
      const request = device.indexedDB.deleteDatabase(DATABASE_NAME);
      request.onsuccess = done;
      request.onerror = failed;
    });
    for (const block of blocks.slice(5)) must(await store.append(RUN, block));
    expect(must(await store.readRun(RUN)).blocks).toEqual(blocks);
    expect((await store.facts()).mendedRuns).toEqual([RUN]);
  });

  it('full: says so, takes nothing half, and goes on when there is room', async () => {
    const device = new Device();
    const { store } = await device.window();
    must(await store.createRun(headerOf(RUN)));
    const blocks = blocksOfRun(3);
    must(await store.append(RUN, blocks[0] as (typeof blocks)[0]));
    const full = vi.spyOn(IDBObjectStore.prototype, 'add').mockImplementation(() => {
      throw new DOMException('no room', 'QuotaExceededError');
    });
    const refused = await store.append(RUN, blocks[1] as (typeof blocks)[0]);
    expect(refused).toMatchObject({ ok: false, error: { code: 'quota', message: expect.stringMatching(/no room.*free/i) } });
    full.mockRestore();
    for (const block of blocks.slice(1)) must(await store.append(RUN, block));
    expect(must(await store.readRun(RUN)).blocks).toEqual(blocks);
  });

  it('never opened: every call says so, none hangs', async () => {
    const device = new Device();
    vi.spyOn(IDBFactory.prototype, 'open').mockImplementation(() => {
      throw new DOMException('not here', 'SecurityError');
    });
    const { store } = await device.window();
    expect((await store.facts()).database).toBe('none');
    expect(await store.createRun(headerOf(RUN))).toMatchObject({ ok: false, error: { code: 'unavailable' } });
    expect(await store.append(RUN, blocksOfRun(1)[0] as never)).toMatchObject({ ok: false, error: { code: 'unavailable' } });
    await expect(store.listRuns()).rejects.toThrow(/cannot be written/);
  });
});
