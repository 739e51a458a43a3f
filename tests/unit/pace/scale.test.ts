import { describe, expect, it } from 'vitest';
import { clockExchange } from '#shared/pace/clock.ts';
import { gainScale, placeSigma, ratioScale, shortestLeg } from '#shared/pace/scale.ts';
import { steadySteps } from '#shared/pace/shown-figure.ts';

/** Expected figures: the worked values of the project's pace mathematics, computed there by other code. */
describe('worked values', () => {
  it('1: the ratio chain in float64', () => {
    const first = ratioScale(480, 21_340, 21_291);
    expect(first).toBeCloseTo(481.1047, 4);
    expect(ratioScale(first, 24_870, 24_932)).toBeCloseTo(479.9083, 4);
  });

  it('2: the gain', () => {
    expect(gainScale(480, 15_000, 15_000, 1.6e-5, 29).gain).toBeCloseTo(0.98414, 5);
    expect(gainScale(480, 15_000, 15_000, 3.6e-7, 29).gain).toBeCloseTo(0.58273, 5);
    const update = gainScale(480, 15_000, 14_900, 3.6e-7, 29);
    expect(update.mmPerPulse).toBeCloseTo(480 * (15_000 / 14_900) ** 0.58273, 3);
    expect(update.variance).toBeCloseTo(3.6e-7 * (1 - 0.58273), 11);
  });

  it('14: one exchange of clocks', () => {
    expect(clockExchange(0, 130, 131, 41)).toEqual({ offset: 110, delay: 40 });
  });

  it('shortest leg worth a full ratio: the table of km by speed, touch scatter and scale uncertainty', () => {
    const table: [speed: number, scaleSigma: number, legs: [number, number, number]][] = [
      [17, 0.003, [1.4, 1.7, 2.6]],
      [17, 0.00135, [3.2, 3.9, 5.8]],
      [17, 0.0006, [7.2, 8.7, 13.1]],
      [50, 0.003, [2.1, 3.6, 6.8]],
      [50, 0.00135, [4.7, 8.0, 15.1]],
      [50, 0.0006, [10.7, 18, 34]],
    ];
    for (const [speed, scaleSigma, legs] of table) {
      [0.05, 0.1, 0.2].forEach((scatter, i) => {
        const km = shortestLeg(placeSigma(scatter, speed, 2), scaleSigma) / 1000;
        expect(Math.abs(km - (legs[i] as number))).toBeLessThan(legs[i] === 34 ? 0.5 : 0.06);
      });
    }
  });
});

describe('a steady figure', () => {
  it('rounds hundredths half away from zero, from whole microseconds', () => {
    const n = (us: number): number => steadySteps(null, us / 1e6, 0.01);
    expect([4_999, 5_000, -5_000, 994_999, -1].map(n)).toEqual([0, 1, -1, 99, 0]);
    expect(Object.is(n(-1), -0)).toBe(false);
    expect(n(1_005_000)).toBe(101);
  });

  it('keeps the shown step until the value has clearly left it', () => {
    expect(steadySteps(10, 0.1079, 0.01)).toBe(10);
    expect(steadySteps(10, 0.1081, 0.01)).toBe(11);
    expect(steadySteps(-3, -0.37, 0.1)).toBe(-3);
    expect(steadySteps(-3, -0.39, 0.1)).toBe(-4);
  });

  it('is odd-symmetric and monotone without hysteresis', () => {
    let before = Number.NEGATIVE_INFINITY;
    for (let us = -30_000; us <= 30_000; us += 137) {
      const n = steadySteps(null, us / 1e6, 0.01, 0);
      expect(n + steadySteps(null, -us / 1e6, 0.01, 0)).toBe(0);
      expect(n).toBeGreaterThanOrEqual(before);
      before = n;
    }
  });
});
