import { describe, expect, it } from 'vitest';
import { decodeBlock, type Journalled } from '#shared/journal/block.ts';
import { fromNdjson } from '#shared/journal/ndjson.ts';
import { isSensorObservation } from '#shared/journal/observation.ts';
import { replay } from '#shared/journal/replay.ts';
import { readout } from '#shared/pace/run.ts';
import { runSheet } from '#shared/pace/sheet.ts';
import { ok } from '#shared/result.ts';
import type { SensorSource } from '#src/sensors/sensor-source.ts';
import { must } from '#tests/client/storage/device.ts';
import { Car } from './car.ts';
import { type OpenedWindow, Rig } from './rig.ts';

async function driven(seconds: number): Promise<{ rig: Rig; car: Car; opened: OpenedWindow }> {
  const rig = new Rig(20_000);
  const opened = await rig.open('open or new');
  const car = new Car(rig.world, rig.pack, 3, 20_000);
  must(
    await opened.session.attach(
      car.source(opened.window, () => opened.session, opened.originMs),
      { ask: true },
    ),
  );
  await rig.world.pass(seconds * 1000);
  return { rig, car, opened };
}

describe('recording', () => {
  it('journals sensors at most 250 ms late, acts at once and alone, and nothing else than what it shows', async () => {
    const { rig, opened } = await driven(50);
    const { session } = opened;
    const at = session.clock.now();
    const shown = session.readout();
    await session.close();
    const blocks = must(await (await rig.device.window()).store.readRun(session.header.runId)).blocks.map(
      (b) => must(decodeBlock(b.bytes)).observations,
    );
    const all = blocks.flat();
    expect(all.map((o) => o.seq)).toEqual(all.map((_, i) => i));
    expect(all.filter((o) => o.type === 'tap.v1').length).toBeGreaterThan(0);
    expect(all.filter((o) => o.type === 'pulse.v1').length).toBeGreaterThan(300);
    for (const block of blocks) {
      if (block.some((o) => !isSensorObservation(o))) expect(block).toHaveLength(1);
      const [first, last] = [block[0] as Journalled, block[block.length - 1] as Journalled];
      expect(last.at - first.at).toBeLessThan(1_000_000);
    }
    expect(all[0]).toMatchObject({ type: 'epoch.v1', n: 0, at: 0, bridgedBy: 'first' });
    expect(
      readout(
        replay(
          session.header,
          all.filter((o) => o.at <= at && o.type !== 'sensor-lost.v1'),
        ),
        at,
      ),
    ).toEqual(shown);
  });

  it('commits an act before the sensors of the next moment, with nothing lost when the page is killed right after', async () => {
    const { rig, opened } = await driven(50);
    const { seq } = must(opened.session.act({ type: 'note.v1', text: 'deer' }));
    await rig.world.pass(0);
    opened.kill();
    const journal = await rig.journal(opened.session.header.runId);
    expect(journal.at(-1)).toMatchObject({ seq, type: 'note.v1', text: 'deer' });
  });

  it('loses no more than 250 ms of sensors at a kill, and none when the page was hidden first', async () => {
    const { rig, opened } = await driven(40.1);
    const shown = must(fromNdjson(await opened.session.exportJournal()));
    opened.kill();
    const journal = await rig.journal(opened.session.header.runId);
    expect(shown.observations.slice(0, journal.length)).toEqual(journal);
    const lost = shown.observations.slice(journal.length);
    expect(lost.every(isSensorObservation)).toBe(true);
    expect((lost.at(-1)?.at ?? 0) - (lost[0]?.at ?? 0)).toBeLessThanOrEqual(250_000);

    const again = await driven(40.1);
    const before = must(fromNdjson(await again.opened.session.exportJournal()));
    again.opened.window.hide();
    await again.rig.world.pass(0);
    again.opened.kill();
    expect(await again.rig.journal(again.opened.session.header.runId)).toEqual(before.observations);
  });

  it('stamps a touch with the instant of its event, however late it is heard', async () => {
    const { rig, opened } = await driven(10);
    const { session, originMs } = opened;
    const touchedAt = session.clock.now();
    const stamp = rig.world.now() - originMs;
    await rig.world.pass(180);
    must(session.act({ type: 'tap.v1', input: 'glass', checkpoint: null }, stamp));
    // A stamp from the future or from long ago is no stamp of this touch.
    must(session.act({ type: 'note.v1', text: 'future' }, stamp + 60_000));
    must(session.act({ type: 'note.v1', text: 'past' }, stamp - 60_000));
    const now = session.clock.now();
    const journal = must(fromNdjson(await session.exportJournal())).observations;
    expect(journal.find((o) => o.type === 'tap.v1')?.at).toBe(touchedAt);
    expect(journal.filter((o) => o.type === 'note.v1').map((o) => o.at)).toEqual([now, now]);
  });

  it('journals what it showed at the finish, once, and the run sheet agrees with it', async () => {
    const { rig, opened } = await driven(115);
    const { session } = opened;
    const { finish } = session.readout();
    expect(finish).not.toBeNull();
    must(session.act({ type: 'run-ended.v1', outcome: 'finished' }));
    await session.close();
    const journal = await rig.journal(session.header.runId);
    const shown = journal.filter((o) => o.type === 'finish-shown.v1');
    expect(shown).toHaveLength(1);
    expect(shown[0]).toMatchObject({ elapsedMs: expect.closeTo((finish?.elapsed ?? 0) * 1000, 2) });
    expect(session.derive(runSheet)).toMatchObject({ outcome: 'finished', shown: { agrees: true } });
  });

  it('takes nothing more once the run has ended: its journal may be sealed', async () => {
    const { rig, opened } = await driven(60);
    const { session } = opened;
    const ended = must(session.act({ type: 'run-ended.v1', outcome: 'retired' }));
    await rig.world.pass(12_000);
    expect(session.act({ type: 'note.v1', text: 'too late' })).toMatchObject({ ok: false, error: { code: 'closed' } });
    await session.close();
    const journal = await rig.journal(session.header.runId);
    expect(journal.at(-1)).toMatchObject({ seq: ended.seq, type: 'run-ended.v1' });
    expect(session.derive(runSheet).observations).toBe(journal.length);
  });

  it('writes the pair of clocks every ten seconds', async () => {
    const { opened } = await driven(35);
    const journal = must(fromNdjson(await opened.session.exportJournal())).observations;
    const pairs = journal.filter((o) => o.type === 'clock-pair.v1');
    expect(pairs).toHaveLength(3);
    expect(pairs.slice(1).every((pair, i) => pair.at - (pairs[i]?.at ?? 0) === 10_000_000)).toBe(true);
  });
});

describe('telling the screen', () => {
  it('happens at most once a frame, and not for figures that move with the car', async () => {
    const { rig, opened } = await driven(45);
    let told = 0;
    opened.session.subscribe(() => told++);
    must(opened.session.act({ type: 'note.v1', text: 'nothing to see' }));
    await rig.world.pass(16);
    expect(told).toBe(0);
    for (let i = 0; i < 5; i++) must(opened.session.act({ type: 'target-set.v1', targetTimeMs: 80_000 + i }));
    expect(told).toBe(0);
    await rig.world.pass(16);
    expect(told).toBe(1);
    await rig.world.pass(1000);
    expect(told).toBeLessThanOrEqual(2);
  });

  it('gives the same status object while nothing in it changed', async () => {
    const { opened } = await driven(5);
    expect(opened.session.status()).toBe(opened.session.status());
    expect(opened.session.status()).toMatchObject({
      sensor: { name: 'serial', state: 'live' },
      storage: { state: 'saved' },
      restored: false,
    });
  });
});

describe('a sensor', () => {
  it('gained and lost is an observation', async () => {
    const { opened } = await driven(5);
    await opened.session.detach();
    const journal = must(fromNdjson(await opened.session.exportJournal())).observations;
    expect(journal.filter((o) => o.type.startsWith('sensor-'))).toMatchObject([
      { type: 'sensor-gained.v1', sensor: 'serial' },
      { type: 'sensor-lost.v1', sensor: 'serial' },
    ]);
    expect(opened.session.status().sensor).toBeNull();
  });

  it('that speaks before it reports itself live is named in the journal before what it says', async () => {
    const { rig, opened } = await driven(5);
    const { session } = opened;
    // as a serial worker does: lines are handed on as they come, the state of the line a little later
    const hasty: SensorSource = {
      name: 'simulator',
      open: async (listener) => {
        listener.observed([{ type: 'pulse.v1', at: session.clock.now(), channel: 0, count: 500, boxUs: 9 }]);
        listener.status({ state: 'live', goodLines: 1, garbledLines: 0, failure: null });
        return ok(undefined);
      },
      close: async () => undefined,
    };
    must(await session.attach(hasty, { ask: false }));
    await rig.world.pass(1000);
    const journal = must(fromNdjson(await session.exportJournal())).observations;
    const pulse = journal.findIndex((o) => o.type === 'pulse.v1' && o.count === 500);
    expect(journal.slice(0, pulse).findLast((o) => o.type.startsWith('sensor-'))).toMatchObject({
      type: 'sensor-gained.v1',
      sensor: 'simulator',
    });
    expect(journal.filter((o) => o.type === 'sensor-gained.v1' && o.sensor === 'simulator')).toHaveLength(1);
  });
});
