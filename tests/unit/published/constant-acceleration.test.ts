import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { pieceMotion } from '#shared/pace/plan-solver.ts';
import { begin, readout, step } from '#shared/pace/run.ts';
import { micros } from '#shared/units.ts';
import { clockCheck, journal, pulses, RELEASE_US } from '#tests/unit/pace/drives.ts';
import { pack } from '#tests/unit/pace/packs.ts';

/** Motion with constant acceleration: v = at, x = at²/2, v² = v0² + 2ax (Galilei 1638; any textbook). */

const within = (low: number, high: number) => fc.double({ min: low, max: high, noNaN: true });

describe('constant acceleration', () => {
  it('a stretch begun and ended at given speeds: a whole peak, by v² = v0² + 2ax on either side', () => {
    // 100 m from 10 to 12 m/s at 2.5 and 4 m/s², worked by hand: p² = (2·2.5·4·100 + 4·100 + 2.5·144)/6.5 = 424.615
    const motion = pieceMotion(100, 10, 12, 1000, { acceleration: 2.5, deceleration: 4 });
    expect(motion.peak).toBeCloseTo(Math.sqrt(2760 / 6.5), 9);
    expect(motion.time).toBeCloseTo((motion.peak - 10) / 2.5 + (motion.peak - 12) / 4, 9);
  });

  it('any stretch: the three parts fill its length, and its time is the sum of theirs', () => {
    fc.assert(
      fc.property(
        within(200, 20_000),
        within(0, 40),
        within(0, 40),
        within(5, 90),
        within(0.5, 6),
        within(0.5, 9),
        (length, v0, v1, limit, a, d) => {
          const low = Math.max(v0, v1);
          // speeds that can be reached within the stretch, below its limit
          fc.pre(low <= limit && Math.abs(v1 * v1 - v0 * v0) / (2 * Math.min(a, d)) <= length);
          const { peak, time } = pieceMotion(length, v0, v1, limit, { acceleration: a, deceleration: d });
          const [up, down] = [(peak * peak - v0 * v0) / (2 * a), (peak * peak - v1 * v1) / (2 * d)];
          const cruise = length - up - down;
          expect(cruise).toBeGreaterThanOrEqual(-1e-6);
          expect(peak === limit || Math.abs(cruise) < 1e-6).toBe(true);
          expect(time).toBeCloseTo((peak - v0) / a + (peak - v1) / d + cruise / peak, 6);
        },
      ),
    );
  });

  it('the engine reads x = at²/2 and v = at from pulses, and extrapolates the start back to rest', () => {
    fc.assert(
      fc.property(within(1.5, 4), within(0, 1.5), (a, late) => {
        const motion = { metresAt: (t: number) => (a * Math.max(0, t - late) ** 2) / 2 };
        const state = begin(pack);
        for (const o of journal([clockCheck(pack)], pulses(motion, { until: 8, hz: 100, metresPerPulse: 0.25 }))) step(state, o);
        const shown = readout(state, micros(RELEASE_US + 8_000_000));
        // a pulse is a quarter of a metre; speed is the mean of the last instants, each of which adds a pulse more or less
        expect(Math.abs(shown.distance - (a * (8 - late) ** 2) / 2)).toBeLessThan(0.3);
        expect(Math.abs((shown.speed ?? 0) - a * (8 - late))).toBeLessThan(1.5);
        expect(Math.abs(((state.derived.firstMovedAt ?? 0) - RELEASE_US) / 1e6 - late)).toBeLessThan(0.1);
      }),
      { numRuns: 40 },
    );
  });
});
