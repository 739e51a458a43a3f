import { describe, expect, it } from 'vitest';
import type { KeptChunk } from '#src/storage/chunk-store.ts';
import { HEADER, PACK } from '#tests/unit/journal/header.ts';
import { blocksOfRun, Device, headerOf, must } from './device.ts';

const chunk = (n: number, digest: string): KeptChunk => ({ n, firstSeq: n * 75, nextSeq: n * 75 + 75, length: 500, digest });
const pack = { attemptId: HEADER.attemptId, digest: HEADER.packDigest, pack: PACK, grant: 'g'.repeat(43), storedMs: 1 };

async function device() {
  const tablet = new Device();
  const window = await tablet.window();
  must(await window.store.createRun(headerOf('run-1')));
  for (const block of blocksOfRun(6)) must(await window.store.append('run-1', block));
  return { tablet, ...window };
}

describe('chunks', () => {
  it('stay as they were first cut', async () => {
    const { store } = await device();
    await store.keepChunks('run-1', [chunk(0, 'a'), chunk(1, 'b')]);
    await store.keepChunks('run-1', [chunk(1, 'x'), chunk(2, 'c')]);
    expect(await store.chunks('run-1')).toEqual([chunk(0, 'a'), chunk(1, 'b'), chunk(2, 'c')]);
    expect(await store.chunks('another')).toEqual([]);
  });

  it('outlive the loss of the database, so that what was sent is cut the same again', async () => {
    const { store, tablet, kill } = await device();
    await store.keepChunks('run-1', [chunk(0, 'a'), chunk(1, 'b')]);
    kill();
    tablet.loseDatabases();
    const { store: next } = await tablet.window();
    expect(await next.chunks('run-1')).toEqual([chunk(0, 'a'), chunk(1, 'b')]);
    expect(must(await next.readRun('run-1')).blocks).toEqual(blocksOfRun(6));
  });

  it('are cut from the committed blocks', async () => {
    const { store } = await device();
    expect(must(await store.blocks('run-1', 50))).toEqual(blocksOfRun(6).slice(2));
  });
});

describe('what is left to send', () => {
  it('is every run until it is sealed and has its result, oldest first', async () => {
    const { store } = await device();
    must(await store.createRun({ ...headerOf('older'), createdMs: 5 }));
    expect((await store.pending()).map((run) => run.runId)).toEqual(['older', 'run-1']);
    await store.progress('older', { state: 'safe on server', confirmed: 3 });
    expect((await store.pending())[0]).toMatchObject({
      runId: 'older',
      ended: false,
      progress: { state: 'safe on server', confirmed: 3, derived: false, blocked: null },
    });
    await store.progress('older', { derived: true });
    expect((await store.pending()).map((run) => run.runId)).toEqual(['run-1']);
  });
});

describe('packs', () => {
  it('are kept one an attempt with their grant', async () => {
    const { store } = await device();
    must(await store.putPack({ ...pack, grant: 'old', storedMs: 0 }));
    must(await store.putPack(pack));
    expect(await store.getPackForAttempt(HEADER.attemptId)).toEqual(pack);
    expect(await store.listPacks()).toEqual([pack]);
    expect(await store.grant(HEADER.attemptId)).toBe(pack.grant);
    expect(await store.getPackForAttempt('another')).toBeNull();
    expect(await store.grant('another')).toBeNull();
  });

  it('stay while a run needs their grant', async () => {
    const { store } = await device();
    must(await store.putPack(pack));
    expect(await store.removePack(HEADER.attemptId)).toMatchObject({ ok: false, error: { code: 'not-safe' } });
    await store.progress('run-1', { state: 'safe on server' });
    must(await store.removePack(HEADER.attemptId));
    expect(await store.listPacks()).toEqual([]);
  });
});
