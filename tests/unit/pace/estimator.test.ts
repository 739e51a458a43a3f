import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { type Estimate, firstBelief, USUAL } from '#shared/pace/belief.ts';
import { carry, compareAt, takeTap, tapMisfit } from '#shared/pace/estimator.ts';
import type { SourceNode } from '#shared/pace/source-node.ts';
import type { Raw } from '#shared/pace/track.ts';
import { pack } from './packs.ts';

const N = 8;
const raw = (w: number, h = 0, u = 0, g = 0): Raw => ({ w, g, h, u });
const at = (p: readonly number[], i: number, j: number): number => p[i * N + j] as number;
const tap = { d: 0, surveySigma: 0, v: 50, scatter: 0.1, input: 'glass' } as const;
const SURE = { variance: 0, over: null };

/** An estimate with half-metre pulses and nothing unsure but what is given: variances and covariances by place. */
function estimate(known: Record<string, number>, d = 0): Estimate {
  const covariance = new Array<number>(N * N).fill(0);
  for (const [place, value] of Object.entries(known)) {
    const [i, j] = place.split(',').map(Number) as [number, number];
    covariance[i * N + j] = value;
    covariance[j * N + i] = value;
  }
  const belief = { covariance, placed: 0, lead: { glass: 0, wired: 0 }, temper: USUAL };
  const still = { cold: 0, speed: 0, official: 1, scaleVariance: 0, variance: 0, covariance: 0, coldShare: null };
  return { at: 0, d, ...raw(0), mmPerPulse: 500, ...still, belief, scaleFrom: { at: 0, d: 0, w: 0, g: 0 } };
}

/** What the road adds: slips and line 6e-4 m² a metre, and a warm tyre's scale that wanders by 6e-12 a metre. */
const road = (metres: number): { d: number; ds: number; s: number } => ({
  d: 6e-4 * metres + (6e-12 * metres ** 3) / 3,
  ds: (6e-12 * metres ** 2) / 2,
  s: 6e-12 * metres,
});

describe('carrying on: P ← F·P·Fᵀ + Q, worked by hand', () => {
  test('10 km from diag(0.09, 3.6e-5): D 3600.09 + road, D·λ 0.36 + road, λ 3.6e-5 + road', () => {
    const { covariance: p } = carry(estimate({ '0,0': 0.09, '1,1': 3.6e-5 }), raw(20_000), 200e6, 0).belief;
    const q = road(10_000);
    expect(at(p, 0, 0)).toBeCloseTo(0.09 + 3.6e-5 * 1e8 + q.d, 6);
    expect(at(p, 0, 1)).toBeCloseTo(0.36 + q.ds, 10);
    expect(at(p, 1, 1)).toBeCloseTo(3.6e-5 + q.s, 14);
  });

  test('cold tyres shorten: metres = counts less the deficit times the counts weighted by coldness', () => {
    const cold: Estimate = { ...estimate({}), cold: 0.0035 };
    expect(carry(cold, raw(20_000, 12_000), 200e6, 0).d).toBeCloseTo(0.5 * (20_000 - 0.0035 * 12_000), 9);
  });
});

describe('a tap, worked by hand', () => {
  const before = estimate({ '0,0': 64, '0,1': 0.003, '1,1': 1.6e-7 }, 10_000);
  // scatter such that the tap itself has 29 m²: 0.1 m² are for reading between two pulses
  const twelve = { ...tap, d: 10_012, scatter: Math.sqrt(28.9) / 50 };

  test('P = 64, D·λ 0.003, λ 1.6e-7, R = 29, misfit 12: moves 8.258 m and 3.871e-4; leaves 19.957, 9.355e-4 and less of λ', () => {
    const after = takeTap(before, twelve, false, SURE);
    expect(after.d - before.d).toBeCloseTo(8.258, 3);
    expect(Math.log(after.mmPerPulse / 500)).toBeCloseTo(3.871e-4, 7);
    expect(at(after.belief.covariance, 0, 0)).toBeCloseTo(19.957, 3);
    expect(at(after.belief.covariance, 0, 1)).toBeCloseTo(9.355e-4, 7);
    // 1.6e-7 − 0.003²/93
    expect(at(after.belief.covariance, 1, 1)).toBeCloseTo(1.6e-7 - 9e-6 / 93, 12);
  });

  test('one that fits exactly leaves everything where it was, surer', () => {
    const after = takeTap(before, { ...twelve, d: 10_000 }, false, SURE);
    expect([after.d, after.mmPerPulse, after.belief.lead]).toEqual([before.d, before.mmPerPulse, before.belief.lead]);
    expect(at(after.belief.covariance, 0, 0)).toBeLessThan(64);
    expect(at(after.belief.covariance, 1, 1)).toBeLessThan(1.6e-7);
  });

  test('a hand and a survey without error snap the distance to the place (but for reading between two pulses)', () => {
    const after = takeTap(before, { ...twelve, scatter: 0 }, false, SURE);
    expect(after.d).toBeCloseTo(10_012, 1);
    expect(at(after.belief.covariance, 0, 0)).toBeLessThan(0.1);
  });

  test('a scale known exactly is not rescaled', () => {
    expect(takeTap(estimate({ '0,0': 64 }, 10_000), twelve, false, SURE).mmPerPulse).toBe(500);
  });

  test('place only: the distance moves, the scale does not', () => {
    const after = takeTap(before, twelve, true, SURE);
    expect(after.mmPerPulse).toBe(500);
    expect(after.d).toBeCloseTo(10_008.258, 3);
    expect(at(after.belief.covariance, 1, 1)).toBe(1.6e-7);
  });

  test('a lead that is not known is a tap that is not known: its share grows with the speed', () => {
    const unsure = estimate({ '0,0': 64, '6,6': 0.04 }, 10_000);
    expect(tapMisfit(unsure, twelve).variance).toBeCloseTo(64 + 0.04 * 2500 + 29, 9);
    expect(takeTap(unsure, twelve, false, SURE).belief.lead.glass).toBeLessThan(0);
  });
});

describe('GNSS beside the wheel', () => {
  const node = (more: Partial<SourceNode & Raw>): SourceNode & Raw => ({
    ...{ at: 0, ...raw(0), gnssMetres: 0, compared: 1, position: null },
    ...more,
  });

  test('metres that agree change nothing but the certainty; more of them make the scale longer and move the distance with it', () => {
    const begun = estimate({ '1,1': 9e-6 });
    const [since, same] = [node({}), node({ at: 20e6, w: 2_000, gnssMetres: 1_000 })];
    expect(compareAt(begun, since, same, 0, 0).mmPerPulse).toBeCloseTo(500, 12);
    const longer = compareAt(begun, since, { ...same, gnssMetres: 1_003 }, 0, 0);
    expect(longer.mmPerPulse).toBeGreaterThan(500.5);
    expect(longer.d).toBeGreaterThan(1_001);
    expect(at(longer.belief.covariance, 1, 1)).toBeLessThan(9e-6);
  });

  test('a wheel that slipped by twenty metres teaches the scale nothing, and the distance follows GNSS', () => {
    const after = compareAt(estimate({ '1,1': 1e-6 }), node({}), node({ at: 20e6, w: 2_040, gnssMetres: 1_000 }), 0, 0);
    expect(after.mmPerPulse).toBe(500);
    expect(after.d).toBeCloseTo(1_000, 6);
  });

  test('positions place the car by what the receiver says of itself, and one 200 m off is left alone', () => {
    const begun = estimate({ '0,0': 100 }, 5_000);
    const placed = compareAt(begun, null, node({ position: { d: 5_010, sigma: 3 } }), 0, 0);
    expect(placed.d).toBeGreaterThan(5_008);
    expect(placed.d).toBeLessThan(5_010);
    expect(compareAt(begun, null, node({ position: { d: 5_200, sigma: 3 } }), 0, 0).d).toBe(begun.d);
  });
});

test('whatever comes, covariances stay symmetric with variances of at least zero', () => {
  const leg = fc.record({
    metres: fc.integer({ min: 50, max: 30_000 }),
    cold: fc.double({ min: 0, max: 1, noNaN: true }),
    off: fc.integer({ min: -300, max: 300 }),
    v: fc.integer({ min: 2, max: 70 }),
    way: fc.constantFrom('tap', 'speed', 'position', 'doubt', 'place' as const),
  });
  const belief = firstBelief(pack, 0.09);
  fc.assert(
    fc.property(fc.array(leg, { maxLength: 30 }), (legs) => {
      let e: Estimate = { ...estimate({}), belief, cold: 0.0035, speed: 0.00125 };
      let since: SourceNode & Raw = { at: 0, ...raw(0), gnssMetres: 0, compared: null, position: null };
      for (const { metres, cold, off, v, way } of legs) {
        const before = e;
        const there = raw(e.w + metres * 2, e.h + metres * 2 * cold, e.u + (metres * 2 * v * v) / 2500);
        const instant = e.at + (metres / v) * 1e6;
        e = carry(e, there, instant, 0);
        const node = { ...since, at: instant, ...there, gnssMetres: since.gnssMetres + metres + off / 30, compared: 0.5 };
        if (way === 'speed') e = compareAt(before, since, node, since.at, 0);
        else if (way === 'position') e = compareAt(before, null, { ...node, position: { d: e.d + off / 10, sigma: 4 } }, 0, 0);
        else {
          const doubt = way === 'doubt' ? { variance: off * off, over: metres } : SURE;
          e = takeTap(e, { ...tap, d: e.d + off, surveySigma: 2, v }, way === 'place', doubt);
        }
        since = node;
        const p = e.belief.covariance;
        for (let i = 0; i < N; i++) {
          expect(at(p, i, i)).toBeGreaterThanOrEqual(-1e-9 * at(belief.covariance, i, i) - 1e-12);
          for (let j = 0; j < i; j++) expect(at(p, i, j)).toBe(at(p, j, i));
        }
      }
    }),
    { numRuns: 200 },
  );
});
