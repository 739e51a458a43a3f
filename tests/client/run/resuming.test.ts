import { crc32 } from 'node:zlib';
import { describe, expect, it } from 'vitest';
import { encodeBlock, type Journalled } from '#shared/journal/block.ts';
import { fromNdjson } from '#shared/journal/ndjson.ts';
import type { EpochV1 } from '#shared/journal/observation.ts';
import { replay } from '#shared/journal/replay.ts';
import { ENGINE_VERSION, readout } from '#shared/pace/run.ts';
import { runSheet } from '#shared/pace/sheet.ts';
import { restoreRun } from '#src/run/known-run.ts';
import type { RunSession } from '#src/run/run-session-contract.ts';
import { must } from '#tests/client/storage/device.ts';
import { Car } from './car.ts';
import { type OpenedWindow, Rig } from './rig.ts';

interface Drive {
  readonly rig: Rig;
  readonly car: Car;
  readonly opened: OpenedWindow;
}

async function attach(car: Car, opened: OpenedWindow): Promise<void> {
  must(
    await opened.session.attach(
      car.source(opened.window, () => opened.session, opened.originMs),
      { ask: false },
    ),
  );
}

async function driven(seconds: number): Promise<Drive> {
  const rig = new Rig(20_000);
  const opened = await rig.open('open or new');
  const car = new Car(rig.world, rig.pack, 5, 20_000);
  await attach(car, opened);
  await rig.world.pass(seconds * 1000);
  return { rig, car, opened };
}

/** The page dies, stays away so long, and comes back into the run with the sensor. */
async function reloaded({ rig, car, opened }: Drive, awayMs: number, meanwhile: () => void = () => undefined): Promise<OpenedWindow> {
  opened.kill();
  await rig.world.pass(awayMs);
  meanwhile();
  const again = await rig.open({ runId: opened.session.header.runId });
  await attach(car, again);
  return again;
}

const observationsOf = async (session: RunSession): Promise<readonly Journalled[]> =>
  must(fromNdjson(await session.exportJournal())).observations;

const epochs = (all: readonly Journalled[]): readonly EpochV1[] => all.filter((o): o is EpochV1 => o.type === 'epoch.v1');

describe('a run that is taken up again', () => {
  it('shows bit for bit what the uninterrupted fold of its journal shows, from a snapshot or without one', async () => {
    const drive = await driven(70);
    const { rig, opened } = drive;
    const { store } = await rig.device.window();
    const { runId } = opened.session.header;
    const saved = await store.getSnapshot(runId);
    expect(saved?.engine).toBe(ENGINE_VERSION);
    expect(saved?.seq).toBeGreaterThan(500);
    const again = await reloaded(drive, 1500);
    await rig.world.pass(400);
    const at = again.session.clock.now();
    const whole = replay(again.session.header, await observationsOf(again.session));
    expect(again.session.readout()).toEqual(readout(whole, at));
    expect(JSON.stringify(again.session.readout())).toBe(JSON.stringify(readout(whole, at)));
    expect(JSON.stringify(again.session.derive(runSheet))).toBe(JSON.stringify(runSheet(whole, again.session.header)));
    expect(again.session.status().restored).toBe(true);
    expect(again.session.role).toBe('writer');
  });

  it('uses no snapshot of another engine, nor one of more than the journal holds', async () => {
    const { rig, opened } = await driven(65);
    await opened.session.close();
    const { store } = await rig.device.window();
    const { runId } = opened.session.header;
    const truth = must(await restoreRun(store, runId));
    const poisoned = { ...truth.state, observations: -1 };
    for (const [engine, seq] of [
      ['0.0.0', 10],
      [ENGINE_VERSION, truth.nextSeq + 1],
    ] as const) {
      await store.putSnapshot(runId, { engine, seq, state: poisoned });
      expect(must(await restoreRun(store, runId)).state).toEqual(truth.state);
    }
    // One that fits is used: what is wrong in it shows.
    await store.putSnapshot(runId, { engine: ENGINE_VERSION, seq: truth.nextSeq, state: poisoned });
    expect(must(await restoreRun(store, runId)).state.observations).toBe(-1);
  });

  it('reaches the finish with the figures of a run that was never interrupted', async () => {
    const uninterrupted = await driven(115);
    const drive = await driven(50);
    const second = await reloaded(drive, 2000);
    await drive.rig.world.pass(20_000);
    const third = await reloaded({ ...drive, opened: second }, 1500);
    await drive.rig.world.pass(45_000);
    const [smooth, bumpy] = [uninterrupted.opened.session.readout().finish, third.session.readout().finish];
    expect(smooth).not.toBeNull();
    // The same car; two gaps, bridged by the box to a few milliseconds. At 25 m/s 0.02 s are half a metre, one pulse.
    expect(Math.abs((bumpy?.elapsed ?? 0) - (smooth?.elapsed ?? 0))).toBeLessThan(0.02);
    const all = await observationsOf(third.session);
    expect(all.map((o) => o.seq)).toEqual(all.map((_, i) => i));
    expect(epochs(all).map(({ n, bridgedBy }) => `${n} ${bridgedBy}`)).toEqual(['0 first', '1 wall', '1 box', '2 wall', '2 box']);
  });

  it('keeps two runs apart, and finds the open one of its attempt', async () => {
    const { rig, opened } = await driven(30);
    const first = opened.session.header.runId;
    const second = await rig.open('new');
    expect(second.session.header.runId).not.toBe(first);
    must(second.session.act({ type: 'note.v1', text: 'second' }));
    await rig.world.pass(500);
    await opened.session.close();
    await second.session.close();
    expect((await rig.journal(first)).some((o) => o.type === 'note.v1')).toBe(false);
    expect((await rig.journal(second.session.header.runId)).map((o) => o.type)).toEqual(['epoch.v1', 'note.v1']);

    const found = await rig.open({ runId: second.session.header.runId });
    must(found.session.act({ type: 'run-ended.v1', outcome: 'rerun' }));
    await found.session.close();
    const open = await rig.open('open or new');
    expect(open.session.header.runId).toBe(first);
    must(open.session.act({ type: 'run-ended.v1', outcome: 'void' }));
    await open.session.close();
    const fresh = await rig.open('open or new');
    expect([first, second.session.header.runId]).not.toContain(fresh.session.header.runId);
  });

  it('is refused where there is none, and where a block cannot be read', async () => {
    const { rig, opened } = await driven(10);
    await expect(rig.open({ runId: 'nowhere' })).rejects.toThrow(/no such run/);
    await expect(rig.open('new', { clockRate: 30 })).rejects.toThrow(/rate 1/);
    const { runId } = opened.session.header;
    await opened.session.close();
    const next = (await rig.journal(runId)).length;
    const bytes = encodeBlock(next, [{ seq: next, at: 0, type: 'start-marked.v1' }]);
    bytes[2] = 9;
    await rig.device.tamper((db) => db.blocks.put({ runId, firstSeq: next, count: 1, bytes: withChecksum(bytes) }));
    await expect(rig.open({ runId })).rejects.toThrow(/newer Evenline/);
  });
});

/** CRC-32 over a block that was changed on purpose; zlib's, not the code under test. */
function withChecksum(bytes: Uint8Array): Uint8Array {
  const view = new DataView(bytes.buffer);
  view.setUint32(bytes.length - 4, crc32(bytes.subarray(0, -4)), true);
  return bytes;
}

describe('the session clock over a gap', () => {
  it('is right to some milliseconds by the box, though the wall clock was set meanwhile', async () => {
    for (const step of [0, 90_000, -5_000]) {
      const drive = await driven(40);
      const trueAt = drive.opened.session.clock.now();
      const began = drive.rig.world.now();
      const again = await reloaded(drive, 3000, () => drive.rig.world.stepWall(step));
      await drive.rig.world.pass(2000);
      const off = again.session.clock.now() - (trueAt + (drive.rig.world.now() - began) * 1000);
      expect(Math.abs(off), `wall set by ${step} ms`).toBeLessThan(25_000);
      const last = epochs(await observationsOf(again.session)).at(-1);
      expect(last).toMatchObject({ bridgedBy: 'box', n: 1, uncertaintyMs: expect.any(Number) });
    }
  });

  it('falls back on the wall clock, wider, without a box, and never runs back', async () => {
    for (const step of [0, -3_600_000]) {
      const rig = new Rig(20_000);
      const opened = await rig.open('open or new');
      await rig.world.pass(30_000);
      const before = opened.session.clock.now();
      opened.kill();
      await rig.world.pass(4000);
      rig.world.stepWall(step);
      const again = await rig.open({ runId: opened.session.header.runId });
      const after = again.session.clock.now();
      if (step === 0) expect(after - before).toBeCloseTo(4_000_000, -4);
      else expect(after).toBeGreaterThanOrEqual(before - 10_000_000);
      const found = epochs(await observationsOf(again.session)).at(-1);
      expect(found).toMatchObject({ bridgedBy: 'wall', n: 1, uncertaintyMs: 50 });
      const all = await observationsOf(again.session);
      expect(found?.at).toBeGreaterThanOrEqual(Math.max(...all.slice(0, -1).map((o) => o.at)));
    }
  });

  it('keeps its rate in practice, over a reload too', async () => {
    const rig = new Rig(600_000);
    const opened = await rig.open('new', { clockRate: 20, practice: true });
    await rig.world.pass(15_000);
    const official = opened.session.readout().official?.now ?? 0;
    opened.kill();
    await rig.world.pass(1000);
    const again = await rig.open({ runId: opened.session.header.runId });
    expect(again.session.clock.rate).toBe(20);
    // 16 s of the device at twenty times.
    expect(again.session.clock.now() / 1e6).toBeCloseTo(320, 0);
    expect(((again.session.readout().official?.now ?? 0) - official) / 1000).toBeCloseTo(20, 0);
  });

  it('does not follow a wall clock set in mid-run: elapsed is wrong by 1 ms at most, and the step is journalled', async () => {
    for (const step of [90_000, -5_000]) {
      const { rig, opened } = await driven(40);
      const before = opened.session.clock.now();
      rig.world.stepWall(step);
      await rig.world.pass(3000);
      expect(Math.abs(opened.session.clock.now() - before - 3_000_000)).toBeLessThanOrEqual(1000);
      const all = await observationsOf(opened.session);
      const pairs = all.filter((o) => o.type === 'clock-pair.v1').slice(-2) as unknown as { wall: number; mono: number }[];
      const [a, b] = pairs as [{ wall: number; mono: number }, { wall: number; mono: number }];
      expect(b.wall - a.wall - (b.mono - a.mono)).toBeCloseTo(step, 3);
      expect(epochs(all)).toHaveLength(1);
      expect(opened.session.readout().warnings).toContainEqual({ code: 'slept' });
    }
  });

  it('makes up for the device having slept, by the box', async () => {
    const { rig, car, opened } = await driven(40);
    const before = opened.session.clock.now();
    car.driveOn(7000);
    rig.world.sleep(7000);
    await rig.world.pass(2000);
    const off = opened.session.clock.now() - before - 9_000_000;
    expect(Math.abs(off)).toBeLessThan(25_000);
    expect(epochs(await observationsOf(opened.session)).at(-1)).toMatchObject({ bridgedBy: 'box', n: 0 });
  });

  it('is not sent astray by a box that was restarted', async () => {
    const drive = await driven(40);
    const trueAt = drive.opened.session.clock.now();
    const began = drive.rig.world.now();
    drive.opened.kill();
    await drive.rig.world.pass(3000);
    const restarted = { ...drive.car.truth(), count: 3, boxUs: 400_000 };
    const other = new Car(drive.rig.world, drive.rig.pack, 5, 0, restarted);
    const again = await drive.rig.open({ runId: drive.opened.session.header.runId });
    await attach(other, again);
    await drive.rig.world.pass(20_000);
    const off = again.session.clock.now() - (trueAt + (drive.rig.world.now() - began) * 1000);
    expect(Math.abs(off)).toBeLessThan(60_000);
  });
});

describe('a page that was frozen', () => {
  it('changes nothing but for a gap: the state is a function of what happened and when', async () => {
    const { rig, car, opened } = await driven(40);
    await opened.session.detach();
    await rig.world.pass(600_000);
    await attach(car, opened);
    await rig.world.pass(2000);
    const at = opened.session.clock.now();
    const all = await observationsOf(opened.session);
    expect(opened.session.readout()).toEqual(readout(replay(opened.session.header, all), at));
    expect(all.filter((o) => o.type === 'sensor-lost.v1' || o.type === 'sensor-gained.v1').map((o) => o.type)).toEqual([
      'sensor-gained.v1',
      'sensor-lost.v1',
      'sensor-gained.v1',
    ]);
  });
});
