import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { createDrive } from '#shared/drive/drive-model.ts';
import { recordingListener } from '#tests/client/sensors/sensor-source-contract.ts';
import { makeSimulator } from '#tests/client/sensors/simulator-case.ts';
import { SHORT_PACK } from '#tests/unit/drive/base-pack.ts';

const BEGIN = 7_000_000;
const RELEASE = BEGIN + 3e6;

describe('simulator source', () => {
  beforeEach(() => void vi.useFakeTimers({ now: Date.UTC(2026, 0, 1) }));
  afterEach(() => void vi.useRealTimers());

  it('gives the same drive at any rate of the clock', async () => {
    const runs = [];
    for (const rate of [1, 30]) {
      const { source, run } = makeSimulator({ granted: true, rate, deps: { drive: { releaseAt: RELEASE } } });
      const heard = recordingListener();
      await source.open(heard.listener, { ask: false });
      await run(60_000 / rate);
      await source.close();
      runs.push(heard.observations.filter((o) => o.at <= BEGIN + 59e6));
    }
    expect(runs[1]?.length).toBeGreaterThan(2000);
    expect(runs[1]).toEqual(runs[0]);
  });

  it.each([1, 10, 30])('never leaves the wheel unheard for half a second of the clock at %i×', async (rate) => {
    const { source, clock, run } = makeSimulator({ granted: true, rate, deps: { drive: { releaseAt: RELEASE } } });
    const heard = recordingListener();
    await source.open(heard.listener, { ask: false });
    await run(20_000 / rate);
    const ages: number[] = [];
    for (let ms = 0; ms < 20_000 / rate; ms++) {
      await run(1);
      const newest = heard.observations.findLast((o) => o.type === 'pulse.v1');
      ages.push(clock.now() - (newest?.at ?? 0));
    }
    await source.close();
    expect(Math.max(...ages)).toBeLessThan(500_000);
    expect(Math.min(...ages)).toBeGreaterThanOrEqual(0);
  });

  it('catches a late timer up by time', async () => {
    const { source, clock } = makeSimulator({ granted: true, rate: 20, deps: { drive: { releaseAt: RELEASE } } });
    const heard = recordingListener();
    await source.open(heard.listener, { ask: false });
    // A timer that was held back for 5 s of 20-fold time.
    vi.setSystemTime(Date.now() + 5000);
    await vi.advanceTimersByTimeAsync(50);
    const last = heard.observations.at(-1)?.at ?? 0;
    expect(clock.now() - last).toBeLessThan(500_000);
    const pulses = heard.observations.filter((o) => o.type === 'pulse.v1').map((o) => o.at);
    expect(Math.max(...pulses.slice(1).map((at, i) => at - (pulses[i] ?? at)))).toBeLessThanOrEqual(1_100_000);
    await source.close();
  });

  it('hands touches over as a hand’s, with the stamp of an event, at the drive’s own instants', async () => {
    const touches: { checkpoint: string | null; at: number }[] = [];
    const made = makeSimulator({
      granted: true,
      rate: 10,
      deps: {
        drive: { releaseAt: RELEASE },
        act: (act, stamp) => void touches.push({ checkpoint: act.checkpoint, at: made.clock.at(stamp) }),
      },
    });
    const heard = recordingListener();
    await made.source.open(heard.listener, { ask: false });
    await made.run(27_000);
    await made.source.close();
    expect(heard.observations.some((o) => o.type === 'tap.v1')).toBe(false);
    const same = createDrive({ pack: SHORT_PACK, seed: 5, releaseAt: RELEASE, beginAt: BEGIN }).advance(BEGIN + 269e6, null);
    const expected = same.flatMap((o) => (o.type === 'tap.v1' ? [{ checkpoint: o.checkpoint, at: o.at }] : []));
    expect(expected.length).toBeGreaterThan(4);
    expect(touches).toEqual(expected);
  });

  it('follows what the cockpit shows, its countdown too', async () => {
    let shown: { holdSpeed: number | null; toRelease: number | null } | null = null;
    const made = makeSimulator({ granted: true, deps: { display: () => shown } });
    const heard = recordingListener();
    await made.source.open(heard.listener, { ask: false });
    await made.run(5000);
    const counts = (): Set<number> => new Set(heard.observations.flatMap((o) => (o.type === 'pulse.v1' ? [o.count] : [])));
    expect(counts().size).toBe(1);
    shown = { holdSpeed: 30, toRelease: 2 };
    await made.run(100);
    shown = { holdSpeed: 30, toRelease: null };
    await made.run(40_000);
    const speeds = heard.observations.slice(-50).flatMap((o) => (o.type === 'fix.v1' && o.speed !== null ? [o.speed] : []));
    expect(speeds.length).toBeGreaterThan(2);
    for (const speed of speeds) expect(Math.abs(speed - 30)).toBeLessThan(2.5);
    await made.source.close();
  });

  it('drives on while closed, and what arrived then is lost', async () => {
    const { source, run } = makeSimulator({ granted: true, deps: { drive: { releaseAt: RELEASE } } });
    const [first, second] = [recordingListener(), recordingListener()];
    await source.open(first.listener, { ask: false });
    await run(20_000);
    await source.close();
    await run(10_000);
    await source.open(second.listener, { ask: false });
    await run(1000);
    await source.close();
    const last = first.observations.findLast((o) => o.type === 'pulse.v1');
    const next = second.observations.find((o) => o.type === 'pulse.v1');
    if (last?.type !== 'pulse.v1' || next?.type !== 'pulse.v1') return expect.fail('no pulses');
    expect(next.at - last.at).toBeGreaterThan(9.5e6);
    expect((next.count - last.count + 2 ** 32) % 2 ** 32).toBeGreaterThan(500);
  });
});
