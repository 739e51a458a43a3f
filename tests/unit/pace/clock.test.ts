import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { NewObservation } from '#shared/journal/observation.ts';
import { clockCheck, fromRest, instantOf, journal, pulses } from '#tests/unit/pace/drives.ts';
import { act, fold, leg, look, sheetOf, us } from '#tests/unit/pace/folds.ts';
import { pack } from '#tests/unit/pace/packs.ts';

const motion = fromRest(2.5, 40, 0.4);
const releaseMs = pack.attempt.releaseMs as number;
const drive = pulses(motion, { until: 130 });
/** A sample at t seconds after the release that says the official clock reads so, off by some ms. */
const sample = (t: number, source: string, offMs: number, uncertaintyMs: number): NewObservation =>
  act(t, { type: 'clock.v1', source, officialMs: releaseMs + t * 1000 + offMs, uncertaintyMs });
const elapsedAt = (samples: NewObservation[], t = 120): number => look(pack, journal(drive, samples), [t])[0]?.elapsed as number;

describe('the official clock', () => {
  it('weighs its sources, takes the wall only if nothing else, and the device last', () => {
    // 1/(bias² + scatter²): 5 ms at 0, 1 ms at 7; a receiver 80 ms off, of unknown latency, changes neither
    const both = elapsedAt([sample(-50, 'exchange', 0, 5), sample(-40, 'pps', 7, 1)]);
    expect(both).toBeCloseTo(120 + (7 * 25) / 26 / 1000, 3);
    expect(elapsedAt([sample(-50, 'exchange', 0, 5), sample(-40, 'pps', 7, 1), sample(-30, 'nmea', 90, 80)])).toBeCloseTo(both, 3);
    expect(elapsedAt([sample(-50, 'wall', 500, 1), sample(-40, 'nmea', 90, 80)])).toBeCloseTo(120.09, 9);
    const epoch = act(-60, { type: 'epoch.v1', n: 0, mono: 0, wall: releaseMs - 60_000 + 300, bridgedBy: 'first', uncertaintyMs: 0 });
    expect(elapsedAt([epoch])).toBeCloseTo(120.3, 9);
    expect(elapsedAt([epoch, sample(-50, 'wall', 500, 3_000)])).toBeCloseTo(120.5, 9);
    const [none, device] = [look(pack, journal(drive), [10])[0], look(pack, journal(drive, [epoch]), [10])[0]];
    expect(none).toMatchObject({ official: null, elapsed: null, phase: 'grid' });
    expect(device?.warnings).toContainEqual({ code: 'clock-unchecked' });
  });

  it('grows less certain with age: by 29 ppm from one fix, by far less once the rate is known', () => {
    const [r] = look(pack, journal(drive, [sample(-50, 'exchange', 0, 3)]), [3550]);
    expect(r?.official?.age).toBeCloseTo(3600, 6);
    // ±50 ppm, evenly spread, is 28.9 ppm: 104 ms in an hour
    expect(r?.official?.sigma).toBeCloseTo(Math.hypot(0.003, 0.104), 3);
    expect(look(pack, journal(drive, [sample(-50, 'exchange', 0, 3)]), [20])[0]?.warnings).toEqual([]);
    const often = Array.from({ length: 9 }, (_, i) => sample(-90 + i * 10, 'pps', 0, 1));
    expect(look(pack, journal(drive, often), [3590])[0]?.official?.sigma).toBeLessThan(0.05);
  });

  it('counts official seconds: the rate of a crystal that is 40 ppm slow is learnt and taken out', () => {
    const list = Array.from({ length: 31 }, (_, i) => sample(-95 + i * 3, 'pps', 0.04 * (-95 + i * 3), 1));
    const [r] = look(pack, journal(drive, list), [2400]);
    expect(r?.elapsed).toBeCloseTo(2400 * (1 + 40e-6), 1);
    expect(Math.abs((r?.elapsed as number) - 2400.096)).toBeLessThan(2 * (r?.official?.sigma as number));
  });

  it('stands from the release on, but for a clearly better one', () => {
    const before = [sample(-50, 'exchange', 0, 10)];
    // together with what was known the next two are surer, but not twice as sure; the third is
    expect(elapsedAt([...before, sample(60, 'exchange', 8, 8)])).toBeCloseTo(120, 9);
    expect(elapsedAt([...before, sample(60, 'exchange', 8, 10)])).toBeCloseTo(120, 9);
    const better = elapsedAt([...before, sample(60, 'exchange', 8, 2)]);
    expect(better).toBeGreaterThan(120.0075);
    expect(better).toBeLessThan(120.0085);
    const grid = elapsedAt([...before, sample(-5, 'exchange', 8, 9)]);
    expect(grid).toBeGreaterThan(120.003);
    expect(grid).toBeLessThan(120.006);
  });

  it('is not taken over by a server clock that was stepped: it says so, and on the grid believes it the third time', () => {
    const good = [sample(-90, 'exchange', 0, 5)];
    const odd = (t: number) => sample(t, 'exchange', 3_000, 5);
    const [doubted] = look(pack, journal(drive, [...good, odd(-60)]), [-50]);
    expect(Math.abs((doubted?.official?.now as number) - (releaseMs - 50_000))).toBeLessThan(1);
    expect(doubted?.warnings).toContainEqual({ code: 'clock-disagrees' });
    expect(sheetOf(pack, journal(drive, [...good, odd(-60)])).warnings.join()).toContain(
      'The server contradicted the official clock by 3.000 s',
    );
    const [believed] = look(pack, journal(drive, [...good, odd(-60), odd(-50), odd(-40)]), [-30]);
    expect((believed?.official?.now as number) - (releaseMs - 30_000)).toBeCloseTo(3_000, -1);
    // another source that agrees with the first breaks no ties, but the run has begun: never
    expect(elapsedAt([...good, odd(20), odd(40), odd(60), odd(80)])).toBeCloseTo(120, 9);
  });

  it("is the event's own where touches along it show it to be off server and receiver, and stays so", () => {
    const list = [sample(-95, 'exchange', 0, 3), sample(-80, 'tap', 2_400, 20)];
    expect(elapsedAt(list)).toBeCloseTo(122.4, 2);
    expect(elapsedAt([...list, sample(-60, 'exchange', 0, 3), sample(-30, 'exchange', 0, 3)])).toBeCloseTo(122.4, 2);
    expect(elapsedAt([sample(-80, 'tap', 2_400, 20), sample(-60, 'exchange', 0, 3)])).toBeCloseTo(122.4, 2);
  });

  it('does not follow a wall clock that is set during the run', () => {
    const steps = [sample(30, 'wall', 90_000, 1), sample(60, 'wall', -5_000, 0.1)];
    const pairs = [0, 10, 20, 30, 40].map((t) =>
      act(t, { type: 'clock-pair.v1', mono: t * 1000, wall: releaseMs + t * 1000 + (t >= 30 ? 90_000 : 0) }),
    );
    const list = journal([clockCheck(pack)], drive, steps, pairs);
    const [a, b] = [fold(pack, journal([clockCheck(pack)], drive)), fold(pack, list)];
    expect(b.derived).toEqual(a.derived);
    const [warned, later] = look(pack, list, [31, 120]);
    expect(warned?.warnings).toContainEqual({ code: 'slept' });
    expect(later?.warnings).not.toContainEqual({ code: 'slept' });
    expect(sheetOf(pack, list).warnings.join()).toContain('came apart by 90000 ms');
  });

  it('is unsure after a sleep, by as much, until the box or a sample tells what it was', () => {
    const pair = (t: number, ahead: number) => act(t, { type: 'clock-pair.v1', mono: t * 1000, wall: releaseMs + t * 1000 + ahead });
    const pairs = [pair(0, 0), pair(10, 0), pair(20, 400), pair(30, 400)];
    const still = pulses(motion, { until: 12 });
    const good = sample(-50, 'exchange', 0, 5);
    const [slept, long] = look(pack, journal(still, pairs, [good]), [21, 100]);
    expect(slept?.official?.sigma).toBeCloseTo(Math.hypot(0.005, 0.4), 3);
    expect(long?.warnings).toContainEqual({ code: 'slept' });
    // the box went on: its clock says that nothing stood still
    const [set] = look(pack, journal(drive, pairs, [good]), [21]);
    expect(set?.official?.sigma).toBeLessThan(0.007);
    // the device did sleep, and the next exchange finds it 400 ms behind
    const [checked] = look(pack, journal(still, pairs, [good, sample(40, 'exchange', 400, 5)]), [110]);
    expect(checked?.elapsed).toBeCloseTo(110.4, 2);
    expect(checked?.warnings).not.toContainEqual({ code: 'slept' });
  });

  it('a page that died and came back costs certainty, not the clock', () => {
    const epoch = act(60, { type: 'epoch.v1', n: 1, mono: 5, wall: releaseMs + 999_000, bridgedBy: 'wall', uncertaintyMs: 40 });
    const [before, after] = look(pack, journal([clockCheck(pack)], drive, [epoch]), [59, 61]);
    expect(after?.elapsed).toBeCloseTo(61, 9);
    // 79 and 81 s of a rate that nobody knows
    expect(before?.official?.sigma).toBeCloseTo(Math.hypot(0.005, 79 * 28.9e-6), 5);
    expect(after?.official?.sigma).toBeCloseTo(Math.hypot(0.005, 81 * 28.9e-6, 0.04), 4);
    expect(after?.warnings).not.toContainEqual({ code: 'slept' });
  });

  it('costs what the box says once the box is heard again, not the guess before it as well', () => {
    const epoch = (t: number, n: number, bridgedBy: string, uncertaintyMs: number): NewObservation =>
      act(t, { type: 'epoch.v1', n, mono: 5, wall: releaseMs, bridgedBy, uncertaintyMs });
    const sigma = (...epochs: NewObservation[]): number =>
      (look(pack, journal([clockCheck(pack)], drive, epochs), [80])[0]?.official?.sigma as number) * 1000;
    const own = sigma();
    expect(sigma(epoch(60, 1, 'wall', 50), epoch(60.3, 1, 'box', 3))).toBeCloseTo(Math.hypot(own, 3), 6);
    expect(sigma(epoch(60, 1, 'page', 8), epoch(60.3, 1, 'box', 3))).toBeCloseTo(Math.hypot(own, 3), 6);
    // another life, and a sleep later in the same one, are gaps of their own
    expect(sigma(epoch(60, 1, 'wall', 50), epoch(70, 2, 'box', 3))).toBeCloseTo(Math.hypot(own, 50, 3), 6);
    expect(sigma(epoch(60, 1, 'wall', 50), epoch(60.3, 1, 'box', 3), epoch(75, 1, 'box', 4))).toBeCloseTo(Math.hypot(own, 3, 4), 6);
  });

  it('a check after the guess stands alone: what the box then says of that life is added to it', () => {
    const list = journal(drive, [
      sample(-50, 'exchange', 0, 5),
      act(-40, { type: 'epoch.v1', n: 1, mono: 5, wall: releaseMs, bridgedBy: 'wall', uncertaintyMs: 50 }),
      sample(-39, 'exchange', 0, 5),
      act(-38, { type: 'epoch.v1', n: 1, mono: 5, wall: releaseMs, bridgedBy: 'box', uncertaintyMs: 3 }),
    ]);
    expect(look(pack, list, [-37])[0]?.official?.sigma).toBeCloseTo(Math.hypot(0.005, 0.003), 5);
  });
});

describe('instants', () => {
  it('of passings are whole microseconds, elapsed from the release', () => {
    const sheet = sheetOf(pack, journal([clockCheck(pack)], drive));
    const row = leg(sheet, 'settle');
    expect(Number.isInteger(row.atUs)).toBe(true);
    expect(row.elapsedS).toBe(((row.atUs as number) - us(0)) / 1e6);
    expect(row.elapsedS).toBeCloseTo(instantOf(motion, 4_000), 1);
  });
});

describe('the pulse per second', () => {
  const edges = (from: number, to: number, lateMs: (i: number) => number): NewObservation[] =>
    Array.from({ length: to - from }, (_, i) => {
      const at = us(from + i) + Math.round(lateMs(i) * 1000);
      return { type: 'pps.v1', at, boxUs: (at + 4_000_000_000) % 2 ** 32 };
    });
  const late = (i: number): number => (i * 37) % 11;

  it('is worth nothing until somebody tells the second, and then a millisecond', () => {
    const list = edges(-95, -20, late);
    expect(look(pack, journal(drive, list), [-10])[0]?.official).toBeNull();
    const [told] = look(pack, journal(drive, list, [sample(-94, 'nmea', 120, 113)]), [-20]);
    expect(told?.official).toMatchObject({ source: 'pps' });
    expect(Math.abs((told?.official?.now as number) - (releaseMs - 20_000))).toBeLessThan(2);
    expect(told?.official?.sigma).toBeLessThan(0.003);
    const unsure = look(pack, journal(drive, list, [sample(-94, 'exchange', 300, 400)]), [-20])[0];
    expect(unsure?.official?.source).toBe('exchange');
  });

  it('has the right second whenever the coarse source is within 0.4 s', () => {
    fc.assert(
      fc.property(fc.double({ min: -400, max: 400, noNaN: true }), fc.integer({ min: 0, max: 1000 }), (off, phase) => {
        const shifted = edges(-95, -70, (i) => phase + late(i + phase));
        const [r] = look(pack, journal(drive, shifted, [sample(-95, 'exchange', off - phase, 159)]), [-60]);
        const wrong = (r?.official?.now as number) - (releaseMs - 60_000 - phase);
        expect(Math.abs(wrong)).toBeLessThan(40 + 2000 * 40 * 29e-6);
      }),
      { numRuns: 40 },
    );
  });

  it('teaches the latency of the sentences, which then carry the clock when the edges are gone', () => {
    const sentences = (from: number, to: number): NewObservation[] =>
      Array.from({ length: Math.floor((to - from) / 60) }, (_, i) => sample(from + 60 * i, 'nmea', -90, Math.hypot(80, 2)));
    const list = journal(drive, [sample(-98, 'exchange', 0, 20)], edges(-97, -15, late), sentences(-95, 3000));
    const [r] = look(pack, list, [2990]);
    expect(Math.abs((r?.official?.now as number) - (releaseMs + 2_990_000))).toBeLessThan(2000 * (r?.official?.sigma as number));
    expect(r?.official?.sigma).toBeLessThan(0.012);
  });

  it('is not led astray by noise on the wire', () => {
    const noise = [-80.3, -60.7, -41.2].flatMap((t) => edges(t, t + 1, () => 0));
    const [r] = look(pack, journal(drive, [sample(-96, 'exchange', 30, 60)], edges(-95, -20, late), noise), [-19]);
    expect(Math.abs((r?.official?.now as number) - (releaseMs - 19_000))).toBeLessThan(2);
  });
});
