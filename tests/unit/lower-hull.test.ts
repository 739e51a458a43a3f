import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { createRandom } from '#shared/drive/random.ts';
import { addToHull, type HullLine, hullLine, makeLowerHull } from '#shared/lower-hull.ts';

const lineOf = (points: readonly (readonly [number, number])[], steepest = 1): HullLine | null => {
  const hull = makeLowerHull();
  for (const [x, y] of points) addToHull(hull, x, y);
  return hullLine(hull, steepest);
};
const heights = fc.array(fc.double({ min: 0, max: 50, noNaN: true }), { minLength: 3, maxLength: 60 });

describe('the lower envelope with slope', () => {
  it('is the edge under the mean of x: worked by hand', () => {
    // vertices (0,0), (2,1), (4,6); mean of x is 2.4, so the edge from (2,1) to (4,6)
    const line = lineOf([
      [0, 0],
      [1, 3],
      [2, 1],
      [4, 6],
      [5, 20],
    ]);
    expect(line).toMatchObject({ x: 2.4, slope: 1 });
    // of slope 2.5, held to 1: the highest such line under all vertices goes through (2,1)
    expect(line?.y).toBeCloseTo(1.4, 12);
    expect(lineOf([])).toBeNull();
    expect(lineOf([[3, 7]])).toEqual({ x: 3, y: 7, slope: 0, excess: 0 });
  });

  it('lies under every point, and no line of the sums of distances is nearer', () => {
    fc.assert(
      fc.property(heights, fc.double({ min: -40, max: 40, noNaN: true }), (ys, slope) => {
        const points = ys.map((y, x) => [x, y] as const);
        const line = lineOf(points, 1000) as HullLine;
        const at = (x: number): number => line.y + line.slope * (x - line.x);
        for (const [x, y] of points) expect(at(x)).toBeLessThanOrEqual(y + 1e-9);
        // any other line under all points, as high as its slope lets it be
        const other = Math.min(...points.map(([x, y]) => y + slope * (line.x - x)));
        expect(other).toBeLessThanOrEqual(line.y + 1e-9);
      }),
    );
  });

  it('does not move for spikes: points raised by any amount, if none of them was on the line', () => {
    fc.assert(
      fc.property(heights, fc.array(fc.double({ min: 0, max: 500, noNaN: true }), { minLength: 60, maxLength: 60 }), (ys, spikes) => {
        const points = ys.map((y, x) => [x, y] as const);
        const before = lineOf(points, 1000) as HullLine;
        const on = (x: number, y: number): boolean => y - (before.y + before.slope * (x - before.x)) < 1e-6;
        const spiked = points.map(([x, y]) => [x, on(x, y) ? y : y + (spikes[x] as number)] as const);
        const after = lineOf(spiked, 1000) as HullLine;
        expect(after.y).toBeCloseTo(before.y, 6);
        expect(after.slope).toBeCloseTo(before.slope, 6);
      }),
    );
  });

  it('keeps a hull, not the points', () => {
    const random = createRandom(1, 'hull');
    const hull = makeLowerHull();
    for (let i = 0; i < 100_000; i++) addToHull(hull, i, random.range(0, 16));
    expect(hull.n).toBe(100_000);
    expect(hull.x.length).toBeLessThan(60);
  });

  it('leaves out a point that does not come later', () => {
    const line = lineOf([
      [0, 5],
      [1, 5],
      [1, -100],
      [0.5, -100],
      [2, 5],
    ]);
    expect(line).toMatchObject({ y: 5, slope: 0 });
  });
});
