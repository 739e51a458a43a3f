import { describe, expect, it, vi } from 'vitest';
import { createDrive } from '#shared/drive/drive-model.ts';
import { USUAL_PARAMETERS } from '#shared/drive/drive-parameters.ts';
import { inventRoad, surveyRoad } from '#shared/drive/drive-road.ts';
import { createDriveWorld } from '#shared/drive/drive-world.ts';
import { driveOnce, FAST_RATES } from '#tests/bench/accuracy/drive-once.ts';
import { SETTINGS } from '#tests/bench/accuracy/settings.ts';
import { SHORT_PACK } from '#tests/unit/drive/base-pack.ts';
import { ofType } from '#tests/unit/sensor/reading.ts';

vi.setConfig({ testTimeout: 60_000 });

const RELEASE = 5e6;
const WHOLE = 270e6;
const OPTIONS = { pack: SHORT_PACK, seed: 3, releaseAt: RELEASE };

describe('what a drive is drawn from', () => {
  it('loses every pulse of a stretch of time, and nothing else', () => {
    const losses = { count: 1, low: 0.6, high: 0.6 };
    const whole = createDrive(OPTIONS).advance(WHOLE, null);
    const lossy = createDrive({ ...OPTIONS, parameters: { ...USUAL_PARAMETERS, losses } }).advance(WHOLE, null);
    const [all, some] = [ofType(whole, 'pulse.v1'), ofType(lossy, 'pulse.v1')];
    const count = (list: typeof all): number => ((list.at(-1)?.count ?? 0) - (list[0]?.count ?? 0)) >>> 0;
    // 0.6 s at about 50 m/s are some 60 pulses of half a metre.
    expect(count(all) - count(some)).toBeGreaterThan(50);
    expect(count(all) - count(some)).toBeLessThan(75);
    const gaps = some
      .slice(1)
      .map((to, i) => ({ s: (to.at - (some[i]?.at ?? 0)) / 1e6, pulses: to.count - (some[i]?.count ?? 0), at: to.at }));
    const gap = gaps.filter(({ at, s }) => at > 60e6 && at < 240e6 && s > 0.1);
    expect(gap).toHaveLength(1);
    expect(gap[0]?.s).toBeCloseTo(0.62, 1);
    expect(gap[0]?.pulses).toBeLessThan(5);
  });

  it('gives a second wheel a count and a factor of its own on the same road', () => {
    const pack = { ...SHORT_PACK, wheel: { ...SHORT_PACK.wheel, secondChannel: 5 } };
    const seen = ofType(createDrive({ ...OPTIONS, pack }).advance(WHOLE, null), 'pulse.v1');
    const turned = [SHORT_PACK.wheel.channel, 5].map((channel) => {
      const records = seen.filter((o) => o.channel === channel);
      return ((records.at(-1)?.count ?? 0) - (records[0]?.count ?? 0)) >>> 0;
    });
    const [first, second] = turned as [number, number];
    expect(second).not.toBe(first);
    expect(Math.abs(second / first - 1)).toBeLessThan(0.02);
    // The first wheel does not notice it.
    expect(seen.filter((o) => o.channel === SHORT_PACK.wheel.channel)).toEqual(
      ofType(createDrive(OPTIONS).advance(WHOLE, null), 'pulse.v1'),
    );
  });

  it('has the navigator and the aerial pass a place later than the nose', () => {
    const behind = { ...SHORT_PACK, car: { ...SHORT_PACK.car, behindNose: { seatM: 20, aerialM: 0 } } };
    const taps = [SHORT_PACK, behind].map((pack) => ofType(createDrive({ ...OPTIONS, pack }).advance(WHOLE, null), 'tap.v1'));
    const [nose, seat] = taps as [(typeof taps)[0], (typeof taps)[0]];
    expect(seat.length).toBe(nose.length);
    for (const [i, tap] of seat.entries()) expect((tap.at - (nose[i]?.at ?? 0)) / 1e6).toBeCloseTo(20 / 50, 1);
  });

  it('tells GNSS the metres of the driven line, and the wheel those and its own', () => {
    const line = { sigma: 0.03, wanderSigma: 0, spanM: 5000 };
    const world = createDriveWorld({ ...OPTIONS, parameters: { ...USUAL_PARAMETERS, line }, rates: FAST_RATES });
    const speeds: number[] = [];
    while (world.at < 200e6) {
      const { v } = world.car;
      for (const o of world.tick({ holdSpeed: null, stopped: false }))
        if (o.type === 'fix.v1' && world.at > 60e6) speeds.push((o.speed ?? 0) / v);
    }
    const share = speeds.reduce((sum, s) => sum + s, 0) / speeds.length;
    expect(Math.abs(share - 1)).toBeGreaterThan(0.003);
    expect(world.driven / (world.car.x + 3)).toBeCloseTo(share, 3);
  });

  it('surveys the road it drives on', () => {
    const road = inventRoad(4);
    const line = surveyRoad(road, -100, 2000);
    for (const { d, lat, lon } of line) expect(road.at(d)).toMatchObject({ lat, lon });
    expect(line.at(-1)?.d).toBeGreaterThanOrEqual(2000);
  });

  it('drives the same for the same seed through the engine, and another for another', () => {
    const setting = {
      ...SETTINGS.base,
      pack: {
        ...SETTINGS.base.pack,
        courseBook: SHORT_PACK.courseBook,
        raceClass: SHORT_PACK.raceClass,
        ownCheckpoints: SHORT_PACK.ownCheckpoints,
      },
    };
    expect(driveOnce(setting, 'gain', 5)).toEqual(driveOnce(setting, 'gain', 5));
    expect(driveOnce(setting, 'gain', 6).finishMs).not.toBe(driveOnce(setting, 'gain', 5).finishMs);
  });
});
