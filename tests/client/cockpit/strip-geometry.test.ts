import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { createTrace, labelsWithRoom, stripMiddle, stripX, stripY } from '#src/cockpit/view/strip-geometry.ts';

const size = { width: 860, height: 208 };

describe('course strip', () => {
  it('lies level at zero, hangs late under the line and stands early over it', () => {
    expect(stripY(size, 0)).toBe(stripMiddle(size));
    expect(stripY(size, 3)).toBeGreaterThan(stripMiddle(size));
    expect(stripY(size, -3)).toBe(2 * stripMiddle(size) - stripY(size, 3));
  });

  it('keeps every point within the strip', () => {
    fc.assert(
      fc.property(fc.double({ min: -1e5, max: 2e5, noNaN: true }), fc.double({ min: -900, max: 900, noNaN: true }), (d, e) => {
        expect(stripX(size, 1e5, d)).toBeGreaterThanOrEqual(0);
        expect(stripX(size, 1e5, d)).toBeLessThanOrEqual(size.width);
        expect(stripY(size, e)).toBeGreaterThanOrEqual(0);
        expect(stripY(size, e)).toBeLessThanOrEqual(size.height);
      }),
    );
  });

  it('leaves out a label that would run into the one before', () => {
    const labels = [
      { x: 100, text: '60' },
      { x: 110, text: '80' },
      { x: 150, text: '40' },
      { x: 855, text: '30' },
    ];
    expect(labelsWithRoom(labels, 860).map((label) => label.text)).toEqual(['60', '40']);
  });
});

describe('own trace', () => {
  it('keeps one point a step, however long the run', () => {
    const trace = createTrace(1000, 10, []);
    for (let d = 0; d <= 1000; d += 1) trace.add({ d, errorS: d / 1000 });
    expect(trace.points()).toHaveLength(11);
  });

  it('forgets what lay ahead when a touch moves the distance back', () => {
    const trace = createTrace(
      1000,
      10,
      [0, 100, 200, 300].map((d) => ({ d, errorS: 1 })),
    );
    expect(trace.add({ d: 190, errorS: 2 })).toBe(true);
    expect(trace.points().map((point) => point.d)).toEqual([0, 190]);
  });
});
