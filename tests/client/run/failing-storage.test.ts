import { describe, expect, it } from 'vitest';
import { fail } from '#shared/result.ts';
import type { JournalStore } from '#src/storage/journal-store.ts';
import { storageFailure } from '#src/storage/storage-fault.ts';
import type { StorageFailure } from '#src/storage/stored-block.ts';
import { must } from '#tests/client/storage/device.ts';
import { Car } from './car.ts';
import { Rig, withCalls } from './rig.ts';

/** A store that refuses on command, and a run on it. */
async function onFaultyStore(code: StorageFailure['code'] | null) {
  const rig = new Rig(10_000);
  const { store } = await rig.device.window();
  const fault: { code: StorageFailure['code'] | null } = { code };
  const guard = <K extends 'append' | 'createRun'>(name: K): JournalStore[K] =>
    (async (...args: Parameters<JournalStore[K]>) =>
      fault.code === null ? (store[name] as (...a: typeof args) => unknown)(...args) : fail(storageFailure(fault.code))) as JournalStore[K];
  const opened = await rig.open('new', { store: withCalls(store, { append: guard('append'), createRun: guard('createRun') }) });
  const car = new Car(rig.world, rig.pack, 6, 10_000);
  must(
    await opened.session.attach(
      car.source(opened.window, () => opened.session, opened.originMs),
      { ask: true },
    ),
  );
  return { rig, opened, fault };
}

describe('storage that fails', () => {
  it('in mid-run stops neither engine nor display, is shown, and gets everything in order when it recovers', async () => {
    const { rig, opened, fault } = await onFaultyStore(null);
    const { session } = opened;
    await rig.world.pass(15_000);
    expect(session.status().storage).toMatchObject({ state: 'saved', message: null });
    fault.code = 'quota';
    const before = session.readout().distance;
    await rig.world.pass(8000);
    expect(session.status().storage).toMatchObject({ state: 'failing', message: expect.stringMatching(/no room/) });
    expect(session.status().storage.pending).toBeGreaterThan(20);
    expect(session.readout().distance).toBeGreaterThan(before + 50);
    must(session.act({ type: 'note.v1', text: 'while full' }));
    // Export needs no room.
    expect(await session.exportJournal()).toContain('while full');
    fault.code = null;
    await rig.world.pass(8000);
    expect(session.status().storage).toMatchObject({ state: 'saved', message: null });
    await session.close();
    const journal = await rig.journal(session.header.runId);
    expect(journal.map((o) => o.seq)).toEqual(journal.map((_, i) => i));
    expect(journal.some((o) => o.type === 'note.v1')).toBe(true);
  });

  it('from the beginning does not keep a crew from starting: the run is created as soon as it can be', async () => {
    const { rig, opened, fault } = await onFaultyStore('unavailable');
    const { session } = opened;
    await rig.world.pass(5000);
    expect(session.status().storage.state).toBe('failing');
    expect(session.readout().phase).toBe('countdown');
    fault.code = null;
    await rig.world.pass(8000);
    await session.close();
    const journal = await rig.journal(session.header.runId);
    expect(journal[0]).toMatchObject({ seq: 0, type: 'epoch.v1', bridgedBy: 'first' });
    expect(journal.length).toBeGreaterThan(5);
  });

  it('does not hold up leaving the run', async () => {
    const { opened, fault, rig } = await onFaultyStore(null);
    await rig.world.pass(2000);
    fault.code = 'quota';
    must(opened.session.act({ type: 'note.v1', text: 'x' }));
    await rig.world.pass(400);
    await opened.session.close();
    expect((await rig.journal(opened.session.header.runId)).every((o) => o.type !== 'note.v1')).toBe(true);
  });
});
