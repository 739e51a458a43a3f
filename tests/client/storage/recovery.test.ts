import fc from 'fast-check';
import { beforeEach, describe, expect, it } from 'vitest';
import { decodeBlock } from '#shared/journal/block.ts';
import type { StoredRun } from '#src/storage/journal-store.ts';
import { blocksOfRun, Device, type DeviceWindow, headerOf, must } from './device.ts';

const RUN = 'run-1';
const FILE = `${RUN}.journal`;
let device: Device;

beforeEach(() => {
  device = new Device();
});

async function recorded(howMany: number): Promise<void> {
  const window = await device.window();
  must(await window.store.createRun(headerOf(RUN)));
  for (const block of blocksOfRun(howMany)) must(await window.store.append(RUN, block));
  window.kill();
}

async function reopened(): Promise<{ readonly window: DeviceWindow; readonly run: StoredRun }> {
  const window = await device.window();
  return { window, run: must(await window.store.readRun(RUN)) };
}

/** Both copies hold the same, and the run can go on. */
async function healed(window: DeviceWindow, howMany: number): Promise<void> {
  const all = blocksOfRun(howMany + 3);
  for (const block of all.slice(howMany)) must(await window.store.append(RUN, block));
  window.kill();
  const rows = await device.tamper((db) => db.blocksOf(RUN));
  expect(rows.map(({ firstSeq, count, bytes }) => ({ firstSeq, count, bytes }))).toEqual(all);
  device.loseDatabases();
  const { run } = await reopened();
  expect(run).toEqual({ header: headerOf(RUN), blocks: all, recovered: 'mirror' });
}

describe('the longer valid copy wins and heals the other', () => {
  it('when both are alike', async () => {
    await recorded(20);
    const { window, run } = await reopened();
    expect(run).toMatchObject({ recovered: 'database', blocks: { length: 20 } });
    await healed(window, 20);
  });

  it('when the browser lost every database', async () => {
    await recorded(20);
    device.loseDatabases();
    const window = await device.window();
    expect(await window.store.listRuns()).toMatchObject([{ runId: RUN, nextSeq: 2 * 1 + 18 * 25 }]);
    expect((await window.store.facts()).mendedRuns).toEqual([RUN]);
    await healed(window, 20);
  });

  it('when the database lost its last rows', async () => {
    await recorded(20);
    const rows = await device.tamper((db) => db.blocksOf(RUN));
    await device.tamper((db) => db.blocks.bulkDelete(rows.slice(14).map((row): [string, number] => [RUN, row.firstSeq])));
    const { window, run } = await reopened();
    expect(run.blocks).toEqual(blocksOfRun(20));
    expect((await window.store.facts()).mendedRuns).toEqual([RUN]);
    await healed(window, 20);
  });

  it('when a row of the database was damaged in the middle', async () => {
    await recorded(20);
    await device.tamper(async (db) => {
      const row = (await db.blocksOf(RUN))[7];
      if (row === undefined) throw new Error('no row to damage');
      const bytes = row.bytes.slice();
      bytes[20] = (bytes[20] as number) ^ 0x10;
      await db.blocks.put({ ...row, bytes });
    });
    const { window, run } = await reopened();
    expect(run).toEqual({ header: headerOf(RUN), blocks: blocksOfRun(20), recovered: 'mirror' });
    // The damaged row and what stood behind it were set aside, not thrown away.
    expect(await device.tamper((db) => db.damaged.count())).toBe(13);
    await healed(window, 20);
  });

  it('when the mirror is gone, short, torn, or followed by seven bytes of garbage', async () => {
    await recorded(20);
    const whole = device.disk.contentOf(FILE).slice();
    const damages = [
      new Uint8Array(),
      whole.slice(0, 5),
      whole.slice(0, whole.length >> 1),
      whole.slice(0, -3),
      Uint8Array.from([...whole, 1, 2, 3, 4, 5, 6, 7]),
      Uint8Array.from(whole, (byte, i) => (i === 100 ? byte ^ 4 : byte)),
    ];
    for (const damage of damages) {
      device.disk.overwrite(FILE, damage);
      const { window, run } = await reopened();
      expect(run).toEqual({ header: headerOf(RUN), blocks: blocksOfRun(20), recovered: 'database' });
      window.kill();
      expect([...device.disk.contentOf(FILE)]).toEqual([...whole]);
    }
  });

  it('when both are damaged: the longer sound beginning, the rest set aside', async () => {
    await recorded(20);
    const rows = await device.tamper((db) => db.blocksOf(RUN));
    await device.tamper((db) => db.blocks.delete([RUN, rows[12]?.firstSeq as number]));
    device.disk.overwrite(FILE, device.disk.contentOf(FILE).slice(0, 3000));
    const { window, run } = await reopened();
    expect(run.blocks).toEqual(blocksOfRun(20).slice(0, 12));
    expect(await device.tamper((db) => db.damaged.where('runId').equals(RUN).count())).toBeGreaterThanOrEqual(7);
    await healed(window, 12);
  });
});

describe('a mirror that cannot be written', () => {
  it('never stops the database, warns, and catches up by itself', async () => {
    const window = await device.window();
    must(await window.store.createRun(headerOf(RUN)));
    const all = blocksOfRun(12);
    window.folder.full = true;
    for (const block of all.slice(0, 6)) must(await window.store.append(RUN, block));
    expect((await window.store.facts()).warning).toMatch(/second copy.*Export/i);
    window.folder.full = false;
    for (const block of all.slice(6)) must(await window.store.append(RUN, block));
    expect((await window.store.facts()).warning).toBeNull();
    window.kill();
    device.loseDatabases();
    expect((await reopened()).run.blocks).toEqual(all);
  });

  it('because another window holds it, goes on without, and takes it when it is free', async () => {
    const first = await device.window();
    must(await first.store.createRun(headerOf(RUN)));
    const all = blocksOfRun(9);
    for (const block of all.slice(0, 3)) must(await first.store.append(RUN, block));
    const second = await device.window();
    expect(must(await second.store.readRun(RUN)).blocks).toHaveLength(3);
    for (const block of all.slice(3, 6)) must(await second.store.append(RUN, block));
    await first.store.releaseRun(RUN);
    for (const block of all.slice(6)) must(await second.store.append(RUN, block));
    second.kill();
    device.loseDatabases();
    expect((await reopened()).run.blocks).toEqual(all);
  });
});

describe('a kill at any moment', () => {
  it('loses no acknowledged block, leaves no gap, and never invents one', async () => {
    await fc.assert(
      fc.asyncProperty(fc.integer({ min: 0, max: 40 }), fc.nat(400), fc.boolean(), async (acknowledgedBefore, turns, losesDatabase) => {
        device = new Device();
        const all = blocksOfRun(44);
        const window = await device.window();
        must(await window.store.createRun(headerOf(RUN)));
        let acknowledged = 0;
        // All are under way at once; the kill comes so many turns of the event loop after some were acknowledged.
        const pending = all.map((block) =>
          window.store.append(RUN, block).then((result) => {
            if (result.ok) acknowledged++;
          }),
        );
        await Promise.all(pending.slice(0, acknowledgedBefore));
        for (let turn = 0; turn < turns; turn++) await Promise.resolve();
        const promised = acknowledged;
        window.kill();
        if (losesDatabase) device.loseDatabases();
        const { run, window: next } = await reopened();
        expect(run.blocks.length).toBeGreaterThanOrEqual(promised);
        expect(run.blocks).toEqual(all.slice(0, run.blocks.length));
        expect(run.blocks.every((block) => decodeBlock(block.bytes).ok)).toBe(true);
        next.kill();
        await Promise.allSettled(pending);
      }),
      { numRuns: 25 },
    );
  }, 30_000);
});
