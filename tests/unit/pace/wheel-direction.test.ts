import { describe, expect, it } from 'vitest';
import { copyPlain } from '#tests/unit/pace/copy-plain.ts';
import { clockCheck, fromRest, journal, type Motion, pulses } from '#tests/unit/pace/drives.ts';
import { metresOf, pieces, records, roll, type Sensor } from '#tests/unit/pace/faulty-sensor.ts';
import { fold, leg, sheetOf } from '#tests/unit/pace/folds.ts';
import { pack } from '#tests/unit/pace/packs.ts';

const launch = pieces([5, 0], [10, 2.5]);
const MIRRORED: Sensor = { hz: 20, metresPerPulse: 0.25, sign: -1 };

/** Pieces of steady speed: seconds and m/s each. */
function walk(...parts: readonly (readonly [seconds: number, speed: number])[]): Motion {
  return {
    metresAt(t) {
      let [left, x] = [Math.max(0, t), 0];
      for (const [seconds, v] of parts) {
        x += v * Math.min(left, seconds);
        left = Math.max(0, left - seconds);
      }
      return x;
    },
  };
}
const then = (first: Motion, second: Motion, at: number): Motion => ({
  metresAt: (t) => first.metresAt(t) + second.metresAt(Math.max(0, t - at)),
});

describe('a sensor mounted the other way round', () => {
  it.each([
    [2, 1 / 20_180],
    [20, 0.25],
    [100, 1 / 20_180],
    [20, 2],
  ])('is mirrored from the first record on: %d records/s', (hz, metresPerPulse) => {
    const o = roll(records(launch, 60, { ...MIRRORED, hz, metresPerPulse }), metresPerPulse);
    const up = roll(records(launch, 60, { hz, metresPerPulse }), metresPerPulse);
    expect(o.wheel).toMatchObject({ sign: -1, forward: -1, wild: 0 });
    // counting down, the part of a pulse is on the other side
    expect(Math.abs(o.w - up.w)).toBeLessThanOrEqual(1);
    expect(Math.abs(metresOf(o, metresPerPulse) - launch.metresAt(60))).toBeLessThanOrEqual(metresPerPulse + 1e-6);
  });

  it.each([9.7, 40])('also where it was switched on at %d m/s', (v) => {
    const o = roll(records(walk([100, v]), 60, MIRRORED), 0.25);
    expect(o.wheel.sign).toBe(-1);
    expect(Math.abs(metresOf(o, 0.25) - 60 * v)).toBeLessThan(1);
  });

  it('starts the run and passes places as any other', () => {
    const motion = fromRest(2.5, 40, 0.4);
    const up = pulses(motion, { until: 320 });
    const down = up.map((o) => (o.type === 'pulse.v1' ? { ...o, count: (2 ** 32 - o.count) % 2 ** 32 } : o));
    const [a, b] = [sheetOf(pack, journal([clockCheck(pack)], up)), sheetOf(pack, journal([clockCheck(pack)], down))];
    // counting down, each pulse comes one place earlier: the two agree as well as either is known
    for (const { reactionS } of [a, b]) expect(Math.abs((reactionS as number) - 0.4)).toBeLessThan(0.06);
    expect(leg(b, 'settle').elapsedS as number).toBeCloseTo(leg(a, 'settle').elapsedS as number, 2);
    expect(leg(b, 'one').elapsedS as number).toBeCloseTo(leg(a, 'one').elapsedS as number, 2);
    const { trace } = fold(pack, journal([clockCheck(pack)], down)).odometer.track;
    expect(trace.h.every((h, i) => i === 0 || h >= (trace.h[i - 1] as number))).toBe(true);
  });

  it('is remembered, and the same stopped and taken up again anywhere', () => {
    const list = records(launch, 15, MIRRORED);
    const whole = roll(list, 0.25);
    for (let cut = 0; cut < list.length; cut += 3) {
      expect(roll(list.slice(cut), 0.25, { channel: 0 }, copyPlain(roll(list.slice(0, cut), 0.25)))).toEqual(whole);
    }
  });
});

describe('what does not mirror it', () => {
  it.each([
    ['a metre back on the grid', walk([5, 0], [1, -1], [5, 0]), 11, -1],
    ['fifteen metres back onto the line at a walk', walk([5, 0], [10, -1.5], [5, 0]), 20, -15],
    ['out and back and out again', walk([5, 0], [10, 4], [4, -4], [3, 0]), 22, 24],
  ])('%s: counted backwards, then the launch forwards', (_, shuffle, until, metres) => {
    expect(metresOf(roll(records(shuffle, until, { hz: 50, metresPerPulse: 0.02 }), 0.02), 0.02)).toBeCloseTo(metres, 1);
    const motion = then(shuffle, launch, until);
    const o = roll(records(motion, 60, { hz: 50, metresPerPulse: 0.02 }), 0.02);
    expect(o.wheel).toMatchObject({ sign: 1, forward: 1 });
    expect(metresOf(o, 0.02)).toBeCloseTo(motion.metresAt(60), 1);
  });

  it('a quick reverse that did is put right by the launch', () => {
    const reverse = pieces([5, 0], [3, 2], [2, 0], [3, -2]);
    const motion = then({ metresAt: (t) => -reverse.metresAt(t) }, launch, 14);
    expect(roll(records(motion, 14, { hz: 50, metresPerPulse: 0.02 }), 0.02).wheel.sign).toBe(-1);
    const o = roll(records(motion, 60, { hz: 50, metresPerPulse: 0.02 }), 0.02);
    expect(o.wheel.sign).toBe(1);
    expect(metresOf(o, 0.02)).toBeCloseTo(motion.metresAt(60), 1);
  });

  it('anything once the car has gone well forwards: wild records backwards are dropped', () => {
    const list = records(launch, 60, { hz: 20, metresPerPulse: 0.25 }).map((o, i) => (i % 97 === 50 ? { ...o, count: 0 } : o));
    const o = roll(list, 0.25);
    expect(o.wheel.sign).toBe(1);
    expect(o.wheel.wild).toBeGreaterThan(5);
    expect(Math.abs(metresOf(o, 0.25) - launch.metresAt(60))).toBeLessThan(0.5);
  });
});
