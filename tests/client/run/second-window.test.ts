import { describe, expect, it } from 'vitest';
import { fromNdjson } from '#shared/journal/ndjson.ts';
import type { EpochV1 } from '#shared/journal/observation.ts';
import { replay } from '#shared/journal/replay.ts';
import { readout } from '#shared/pace/run.ts';
import type { RunSession } from '#src/run/run-session-contract.ts';
import { must } from '#tests/client/storage/device.ts';
import { Car } from './car.ts';
import { type OpenedWindow, Rig } from './rig.ts';

async function two(seconds: number): Promise<{ rig: Rig; car: Car; first: OpenedWindow; second: OpenedWindow }> {
  const rig = new Rig(10_000);
  const first = await rig.open('open or new');
  const car = new Car(rig.world, rig.pack, 4, 10_000);
  must(
    await first.session.attach(
      car.source(first.window, () => first.session, first.originMs),
      { ask: true },
    ),
  );
  await rig.world.pass(seconds * 1000);
  const second = await rig.open('open or new');
  await rig.world.pass(300);
  return { rig, car, first, second };
}

const figures = (session: RunSession) => {
  const { phase, distance, speed, timeError, scale, lastTap, next } = session.readout();
  return { phase, distance, speed, timeError, scale, lastTap, next: next?.checkpoint.id };
};

describe('a second window', () => {
  it('reads only, and shows the same figures at the same instants', async () => {
    const { rig, first, second } = await two(30);
    expect([first.session.role, second.session.role]).toEqual(['writer', 'reader']);
    expect(second.session.header).toEqual(first.session.header);
    expect(second.session.act({ type: 'note.v1', text: 'x' })).toMatchObject({ ok: false, error: { code: 'read-only' } });
    expect(await second.session.checkClock()).toMatchObject({ ok: false, error: { code: 'read-only' } });
    for (let i = 0; i < 8; i++) {
      await rig.world.pass(730);
      expect(Math.abs(second.session.clock.now() - first.session.clock.now())).toBeLessThanOrEqual(1);
      expect(figures(second.session)).toEqual(figures(first.session));
    }
    must(first.session.act({ type: 'target-set.v1', targetTimeMs: 81_000 }));
    await rig.world.pass(20);
    expect(second.session.course().targetTimeMs).toBe(81_000);
    expect(second.session.status()).toMatchObject({ sensor: { name: 'serial', state: 'live' }, storage: { state: 'saved' } });
  });

  it('opened in mid-batch misses nothing that is not yet in storage', async () => {
    const { rig, first } = await two(20.13);
    await rig.world.pass(110);
    const third = await rig.open({ runId: first.session.header.runId });
    await rig.world.pass(0);
    expect(figures(third.session)).toEqual(figures(first.session));
  });

  it('takes over within two seconds of the death of the first, sensor included, without a gap', async () => {
    const { rig, car, first, second } = await two(30);
    let told = 0;
    second.session.subscribe(() => told++);
    const refused = await second.session.attach(
      car.source(second.window, () => second.session, second.originMs),
      { ask: true },
    );
    expect(refused).toMatchObject({ ok: false, error: { code: 'in-use' } });
    await rig.world.pass(170);
    const seen = must(fromNdjson(await first.session.exportJournal())).observations;
    const trueAt = first.session.clock.now();
    first.kill();
    await rig.world.pass(2000);
    expect(second.session.role).toBe('writer');
    expect(told).toBeGreaterThan(0);
    const all = must(fromNdjson(await second.session.exportJournal())).observations;
    // What only the dead window had numbered, and this one had heard of, is in the journal too.
    expect(all.slice(0, seen.length)).toEqual(seen);
    expect(all.map((o) => o.seq)).toEqual(all.map((_, i) => i));
    const epoch = all[seen.length] as EpochV1;
    expect(epoch).toMatchObject({ type: 'epoch.v1', n: 1, bridgedBy: 'page' });
    expect(epoch.uncertaintyMs).toBeLessThan(5);
    expect(Math.abs(second.session.clock.now() - trueAt - 2_000_000)).toBeLessThan(25_000);
    expect(second.session.status().sensor?.state).toBe('live');
    const at = second.session.clock.now();
    expect(second.session.readout()).toEqual(readout(replay(second.session.header, all), at));
    must(second.session.act({ type: 'note.v1', text: 'mine now' }));
    await second.session.close();
    expect((await rig.journal(second.session.header.runId)).some((o) => o.type === 'note.v1')).toBe(true);
  });

  it('takes over when the first is closed, and lets go of the lock when it is closed itself', async () => {
    const { rig, first, second } = await two(12);
    await first.session.close();
    await rig.world.pass(100);
    expect(second.session.role).toBe('writer');
    expect(first.session.act({ type: 'note.v1', text: 'late' })).toMatchObject({ ok: false, error: { code: 'closed' } });
    await second.session.close();
    const third = await rig.open('open or new');
    expect(third.session.role).toBe('writer');
    expect(third.session.header.runId).toBe(first.session.header.runId);
  });

  it('that was closed while it waited does not take over', async () => {
    const { rig, first, second } = await two(12);
    await second.session.close();
    await first.session.close();
    await rig.world.pass(100);
    const third = await rig.open('open or new');
    expect(third.session.role).toBe('writer');
  });

  it('ends in the same run when both open the attempt at once', async () => {
    const rig = new Rig(60_000);
    const [a, b] = await Promise.all([rig.open('open or new'), rig.open('open or new')]);
    expect(a.session.header.runId).toBe(b.session.header.runId);
    expect([a.session.role, b.session.role].sort()).toEqual(['reader', 'writer']);
  });
});
