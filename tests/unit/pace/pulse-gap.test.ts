import { describe, expect, it } from 'vitest';
import { createRandom } from '#shared/drive/random.ts';
import { lossVariance } from '#shared/pace/distance.ts';
import { copyPlain } from '#tests/unit/pace/copy-plain.ts';
import type { Motion } from '#tests/unit/pace/drives.ts';
import { merged, metresOf, pieces, records, roll, type Sensor, shown } from '#tests/unit/pace/faulty-sensor.ts';

/** 2 s at rest, then up to v m/s at 2.5 m/s². */
const cruise = (v: number): Motion => pieces([2, 0], [v / 2.5, 2.5]);
const ENCODER = 1 / 20_180;

/** Worst error in metres and number of fills at 60 s, of gaps that begin at eight places within records and pulses. */
function afterGap(v: number, gap: number, sensor: Sensor): { worst: number; fills: number } {
  const motion = cruise(v);
  let [worst, fills] = [0, 0];
  for (let k = 0; k < 8; k++) {
    const from = 40.003 + k * 0.0617;
    const o = roll(records(motion, 60, { ...sensor, phase: k / 8, misses: [[from, from + gap]] }), sensor.metresPerPulse);
    worst = Math.max(worst, Math.abs(metresOf(o, sensor.metresPerPulse) - motion.metresAt(60)));
    fills += o.fills.count;
  }
  return { worst, fills };
}

describe('pulses that the sensor missed', () => {
  it.each([
    // v m/s, gap s, records a second, metres a pulse, most error m; unfilled it would be v × gap
    [30, 0.05, 100, ENCODER, 0.1],
    [30, 0.5, 100, ENCODER, 0.1],
    [30, 1.9, 100, ENCODER, 0.2],
    [8, 0.3, 50, 0.02, 0.1],
    [15, 1, 20, 0.25, 1],
    [30, 0.2, 20, 0.25, 0.5],
    [30, 0.3, 50, 2, 2],
    [30, 1, 10, 0.5, 1.5],
    [50, 1.9, 20, 0.25, 1],
    [30, 1, 5, 0.25, 2],
    [30, 1, 2, ENCODER, 5],
  ])('%d m/s, %d s without pulses, %d records/s: filled by the speeds around', (v, gap, hz, metresPerPulse, most) => {
    const { worst, fills } = afterGap(v, gap, { hz, metresPerPulse });
    expect(fills).toBe(8);
    expect(worst).toBeLessThanOrEqual(most);
    // two of the sigma that the fill says of itself
    expect(worst).toBeLessThan(0.2 * v * gap);
  });

  it('half a second at two records a second is one or two intervals with too few counts', () => {
    const { worst, fills } = afterGap(30, 0.5, { hz: 2, metresPerPulse: 0.25 });
    expect(fills).toBe(8);
    expect(worst).toBeLessThan(0.4 * 30 * 0.5);
  });

  it('an encoder that dithers meanwhile hides nothing', () => {
    const { worst, fills } = afterGap(20, 0.7, { hz: 100, metresPerPulse: ENCODER, dithers: true });
    expect(fills).toBe(8);
    expect(worst).toBeLessThan(0.2);
  });

  it('the display goes on at the last speed meanwhile, and does not jump when the count goes on', () => {
    const motion = cruise(30);
    const sensor: Sensor = { hz: 50, metresPerPulse: 0.02, misses: [[40.003, 41.203]] };
    const times = Array.from({ length: 200 }, (_, i) => 39.9 + i * 0.01);
    const list = shown(records(motion, 60, sensor), 0.02, times);
    list.forEach((now, i) => {
      const t = times[i] as number;
      // what falls short of braking is seen within a few records
      expect(Math.abs(now.metres - motion.metresAt(t))).toBeLessThan(t < 40.2 ? 2.5 : 0.3);
      expect(now.source).toBe('wheel');
      expect(now.speed).toBeGreaterThan(27);
    });
  });

  it('fills by its own speed what braking with locked wheels leaves out, and is less sure of it', () => {
    // 25 m/s, then 1 s locked at 8 m/s², on at 17 m/s
    const motion = pieces([2, 0], [10, 2.5], [20, 0], [1, -8]);
    const o = roll(records(motion, 50, { hz: 50, metresPerPulse: 0.02, misses: [[32, 33]] }), 0.02);
    expect(o.fills.count).toBe(1);
    expect(Math.abs(metresOf(o, 0.02) - motion.metresAt(50))).toBeLessThan(0.5);
    const steady = roll(records(cruise(25), 50, { hz: 50, metresPerPulse: 0.02, misses: [[32, 33]] }), 0.02);
    const sigma = (losses: typeof o.losses): number => Math.sqrt(lossVariance(losses, 0, 1e12));
    expect(sigma(steady.losses)).toBeCloseTo(0.1 * 25, 1);
    expect(sigma(o.losses)).toBeGreaterThan(1.2 * sigma(steady.losses));
  });

  it('fills two seconds at most; the rest is lost, and said to be', () => {
    const motion = cruise(20);
    const list = records(motion, 60, { hz: 20, metresPerPulse: 0.25, misses: [[40, 46]] });
    const [during, lost, after] = shown(list, 0.25, [41.5, 44, 50]);
    expect(Math.abs((during?.metres as number) - motion.metresAt(41.5))).toBeLessThan(1);
    expect(lost).toMatchObject({ source: 'none', speed: null });
    expect((lost?.metres as number) - motion.metresAt(40)).toBeCloseTo(40, 0);
    expect(after).toMatchObject({ source: 'wheel' });
    const o = roll(list, 0.25);
    expect(motion.metresAt(60) - metresOf(o, 0.25)).toBeCloseTo(80, -1);
    // four seconds that nothing measured, as one sigma
    expect(Math.sqrt(lossVariance(o.losses, 0, 1e12))).toBeGreaterThan(75);
  });
});

describe('what is no gap', () => {
  it('braking to a stop, at any record rate and pulse, from any speed, is never filled', () => {
    for (const hz of [2, 5, 20, 100]) {
      for (const metresPerPulse of [ENCODER, 0.25, 2]) {
        for (const v of [6, 20, 50]) {
          for (const b of [4, 10]) {
            const random = createRandom(v * 100 + hz, 'late');
            const motion = pieces([2, 0], [v / 5, 5], [5.137, 0], [v / b, -b], [7, 0], [v / 6, 6], [2, 0], [v / b, -b]);
            const sensor: Sensor = { hz, metresPerPulse, dithers: metresPerPulse === ENCODER, jitter: () => random.range(0, 0.008) };
            const o = roll(records(motion, 40, sensor), metresPerPulse);
            expect(o.fills.count).toBe(0);
            expect(o.losses).toEqual([]);
            expect(Math.abs(metresOf(o, metresPerPulse) - motion.metresAt(40))).toBeLessThan(metresPerPulse + 0.001);
          }
        }
      }
    }
  });

  it('records that are lost, or late and then all at once, cost and invent nothing', () => {
    const motion = cruise(30);
    const lost = roll(
      records(motion, 60, {
        hz: 100,
        metresPerPulse: 0.02,
        silent: [
          [30, 30.1],
          [40, 41],
        ],
      }),
      0.02,
    );
    const late = roll(
      merged(records(motion, 60, { hz: 100, metresPerPulse: 0.02, jitter: (t) => (t > 40 && t < 40.4 ? 40.4 - t : 0) })),
      0.02,
    );
    const slow = roll(
      merged(records(cruise(6), 60, { hz: 100, metresPerPulse: 0.02, jitter: (t) => (t > 40 && t < 40.1 ? 40.1 - t : 0) })),
      0.02,
    );
    for (const o of [lost, late, slow]) expect(o.fills.count + o.losses.length).toBe(0);
    expect(lost.w).toBe(lost.wheel.total);
    expect(late.w).toBe(late.wheel.total);
    expect(slow.w).toBe(slow.wheel.total);
  });
});

it.each([-1.5, -0.3, -0.1, 0.05, 0.1, 0.3, 1.5])(
  'session instants that are set right by %d s while the box counts on are no pulses missed',
  (by) => {
    const motion = cruise(30);
    for (const [hz, metresPerPulse] of [
      [20, 0.25],
      [100, 0.02],
    ] as const) {
      const set = records(motion, 60, { hz, metresPerPulse, jitter: (t) => (t < 40 ? by : 0) });
      const o = roll(set, metresPerPulse);
      expect(o.fills.count + o.losses.length).toBe(0);
      expect(o.w).toBe(o.wheel.total);
      expect(Math.abs(o.w * metresPerPulse - motion.metresAt(60))).toBeLessThanOrEqual(metresPerPulse);
    }
  },
);

it('the same records give the same bits, stopped and taken up again anywhere', () => {
  const list = records(cruise(30), 44, { hz: 20, metresPerPulse: 0.25, misses: [[40, 40.6]] });
  const whole = roll(list, 0.25);
  expect(whole.fills.count).toBe(1);
  for (let cut = list.length - 90; cut < list.length; cut++) {
    const kept = copyPlain(roll(list.slice(0, cut), 0.25));
    expect(roll(list.slice(cut), 0.25, { channel: 0 }, kept)).toEqual(whole);
  }
});
