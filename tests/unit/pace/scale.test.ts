import { describe, expect, it } from 'vitest';
import { clockExchange } from '#shared/pace/clock.ts';
import { correctScale } from '#shared/pace/derive-scale.ts';
import { coldShare, distanceVariance } from '#shared/pace/distance.ts';
import type { Anchor } from '#shared/pace/run-state.ts';
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

describe('what is not known of the distance after a correction', () => {
  const HOURS_AGO = -20e9;
  const simple = { h: 0, u: 0, cold: 0, speed: 0, official: 1, belief: null } as const;
  const start: Anchor = {
    ...simple,
    ...{ at: 0, d: 0, w: 0, g: 0, mmPerPulse: 500, scaleVariance: 9e-6, variance: 25, covariance: 0, coldShare: null },
    scaleFrom: { at: 0, d: 0, w: 0, g: 0 },
  };
  /** Placed and corrected at 10 km by a touch with 5 m sigma. */
  const corrected = (movedAt: number): Anchor => {
    const here = { at: 200e6, d: 10_000, w: 20_000, g: 0 };
    const leg = {
      rule: 'ratio',
      duty: 'scale',
      anchor: start,
      raw: here,
      at: here.at,
      d: here.d,
      sigma: 5,
      movedAt,
      lost: 0,
      changed: 0,
    } as const;
    const { kept, ...scale } = correctScale(leg);
    expect(kept).toBeNull();
    return { ...simple, ...here, ...scale, variance: 25, scaleFrom: here };
  };
  const varianceAfter = (metres: number, movedAt: number): number =>
    distanceVariance(corrected(movedAt), { w: 20_000 + metres * 2, g: 0, h: 0, u: 0 }, 200e6 + metres * 20_000, movedAt, []);
  /** Slips 6e-4 m²/m, and a scale that wanders by 1.2e-11 a metre: over the leg that measured it (a third), and since. */
  const road = (leg: number, metres: number): number => 6e-4 * metres + 1.2e-11 * ((leg / 3) * metres ** 2 + metres ** 3 / 3);

  it('warm tyres: σ²[(1+ρ)² + ρ²], as the touch that placed the car also set its scale', () => {
    for (const rho of [0.5, 1, 2]) {
      const want = 25 * ((1 + rho) ** 2 + rho ** 2) + road(10_000, rho * 10_000);
      expect(varianceAfter(rho * 10_000, HOURS_AGO)).toBeCloseTo(want, 6);
    }
  });

  it('tyres still warming: the share by which they are warmer than on the leg that set the scale, of 0.35 %', () => {
    const mean = (from: number, to: number): number => {
      let sum = 0;
      for (let i = 0; i < 10_000; i++) sum += Math.exp(-(from + ((i + 0.5) / 10_000) * (to - from)) / 400);
      return sum / 10_000;
    };
    expect(coldShare(0, 200e6, 400e6)).toBeCloseTo(mean(200, 400), 8);
    expect(coldShare(0, 100e6, 100e6)).toBeCloseTo(Math.exp(-0.25), 12);
    const warmed = 0.0035 * (mean(0, 200) - mean(200, 400)) * 10_000;
    expect(varianceAfter(10_000, 0) - varianceAfter(10_000, HOURS_AGO)).toBeCloseTo(warmed ** 2, 4);
  });
});
