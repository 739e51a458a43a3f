import { beforeEach, describe, expect, it } from 'vitest';
import { encodeBlock } from '#shared/journal/block.ts';
import { blockAt, blocksOfRun, Device, type DeviceWindow, headerOf, must } from './device.ts';

const RUN = 'run-1';
let device: Device;
let window: DeviceWindow;

beforeEach(async () => {
  device = new Device();
  window = await device.window();
  must(await window.store.createRun(headerOf(RUN)));
});

async function append(howMany: number, runId = RUN): Promise<void> {
  for (const block of blocksOfRun(howMany)) must(await window.store.append(runId, block));
}

describe('a journal', () => {
  it('comes back block by block as it was written, with its header', async () => {
    await append(12);
    const run = must(await window.store.readRun(RUN));
    expect(run).toEqual({ header: headerOf(RUN), blocks: blocksOfRun(12), recovered: 'database' });
  });

  it('takes the same block twice as once, and the same run', async () => {
    await append(3);
    await append(3);
    must(await window.store.createRun(headerOf(RUN)));
    expect(must(await window.store.readRun(RUN)).blocks).toHaveLength(3);
  });

  it('keeps several runs apart, and lists them with where they stand', async () => {
    must(await window.store.createRun(headerOf('run-2')));
    await append(3);
    await append(11, 'run-2');
    const listed = await window.store.listRuns();
    expect(listed.map(({ runId, nextSeq, ended, upload }) => [runId, nextSeq, ended, upload])).toEqual([
      ['run-1', 75, false, 'on this device'],
      ['run-2', 9 * 25 + 1 + 25, false, 'on this device'],
    ]);
  });

  it('knows when the crew closed the run', async () => {
    must(
      await window.store.append(RUN, {
        firstSeq: 0,
        count: 1,
        bytes: encodeBlock(0, [{ seq: 0, at: 1, type: 'run-ended.v1', outcome: 'finished' }]),
      }),
    );
    expect(await window.store.listRuns()).toMatchObject([{ ended: true }]);
  });
});

describe('what it refuses, unchanged', () => {
  it('a block of a run it does not hold', async () => {
    expect(await window.store.append('another', blockAt(0, 25))).toMatchObject({ ok: false, error: { code: 'unknown-run' } });
    expect(await window.store.readRun('another')).toMatchObject({ ok: false, error: { code: 'unknown-run' } });
    // Asking left nothing behind.
    expect(device.disk.names()).toEqual([`${RUN}.journal`]);
  });

  it('a block of another run, or one that does not follow', async () => {
    await append(2);
    for (const stranger of [blockAt(75, 25), blockAt(25, 1), blockAt(0, 1), blockAt(30, 25)]) {
      expect(await window.store.append(RUN, stranger)).toMatchObject({ ok: false, error: { code: 'out-of-order' } });
    }
    expect(must(await window.store.readRun(RUN)).blocks).toEqual(blocksOfRun(2));
  });

  it('bytes that are not the block they are said to be', async () => {
    const block = blockAt(0, 25);
    const flipped = block.bytes.slice();
    flipped[30] = (flipped[30] as number) ^ 1;
    for (const bad of [
      { ...block, bytes: flipped },
      { ...block, count: 24 },
      { ...block, bytes: block.bytes.slice(0, -1) },
    ]) {
      expect(await window.store.append(RUN, bad)).toMatchObject({ ok: false, error: { code: 'corrupt' } });
    }
  });

  it('another header under a known name', async () => {
    const other = { ...headerOf(RUN), packDigest: 'cd'.repeat(32) };
    expect(await window.store.createRun(other)).toMatchObject({ ok: false, error: { code: 'out-of-order' } });
  });

  it('removing a run that is not safe on the server', async () => {
    await append(2);
    expect(await window.store.removeRun(RUN)).toMatchObject({ ok: false, error: { code: 'not-safe' } });
    await window.store.progress(RUN, { state: 'safe on server' });
    must(await window.store.removeRun(RUN));
    expect(await window.store.listRuns()).toEqual([]);
    expect(device.disk.names()).toEqual([]);
  });
});

describe('snapshots', () => {
  it('are kept one a run, and are gone with it', async () => {
    await window.store.putSnapshot(RUN, { engine: '1', seq: 10, state: { a: [1] } });
    await window.store.putSnapshot(RUN, { engine: '1', seq: 20, state: { a: [2] } });
    expect(await window.store.getSnapshot(RUN)).toEqual({ engine: '1', seq: 20, state: { a: [2] } });
    expect(await window.store.getSnapshot('another')).toBeNull();
  });
});
