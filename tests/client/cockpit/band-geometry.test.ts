import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { openness, poolShare, slabShare } from '#src/cockpit/view/band-geometry.ts';

const errors = fc.double({ min: 0, max: 600, noNaN: true });
const opening = fc.double({ min: 0, max: 1, noNaN: true });

describe('slab height', () => {
  it('follows the inverse hyperbolic sine, ln(x + sqrt(x² + 1)), of error over knee', () => {
    const asinh = (x: number): number => Math.log(x + Math.sqrt(x * x + 1));
    for (const s of [0.1, 0.5, 1, 3.42, 10]) expect(slabShare(s, 0)).toBeCloseTo(asinh(s / 0.5) / asinh(40), 12);
    for (const s of [0.03, 0.1, 1]) expect(slabShare(s, 1)).toBeCloseTo(asinh(s / 0.08) / asinh(40), 12);
  });

  it('never shrinks as the error grows, and stays within its field', () => {
    fc.assert(
      fc.property(errors, errors, opening, (a, b, open) => {
        const [low, high] = a < b ? [a, b] : [b, a];
        expect(slabShare(low, open)).toBeLessThanOrEqual(slabShare(high, open));
        expect(slabShare(high, open)).toBeLessThanOrEqual(1);
      }),
    );
  });

  it('shows a tenth and ten seconds on one scale, on a field of 134 px', () => {
    expect(slabShare(0.2, 0) * 134).toBeGreaterThan(10);
    expect(slabShare(10, 0)).toBeLessThan(0.9);
    expect(slabShare(10, 0) - slabShare(5, 0)).toBeGreaterThan(0.1);
  });

  it('opens near the finish, so that hundredths read', () => {
    fc.assert(
      fc.property(fc.double({ min: 0.01, max: 3, noNaN: true }), opening, opening, (s, a, b) => {
        const [less, more] = a < b ? [a, b] : [b, a];
        expect(slabShare(s, more)).toBeGreaterThanOrEqual(slabShare(s, less) - 1e-12);
      }),
    );
    expect(slabShare(0.03, 1) * 134).toBeGreaterThan(10);
  });

  it('is closed two minutes before the finish, open from half a minute on, and stays open when the target is past', () => {
    expect([300, 120, 75, 30, 0, -20].map(openness)).toEqual([0, 0, 0.5, 1, 1, 1]);
  });

  it('sinks the pool when late and raises it when early, by the same height', () => {
    expect(poolShare(2, 0)).toBeGreaterThan(0);
    expect(poolShare(-2, 0)).toBe(-poolShare(2, 0));
  });
});
