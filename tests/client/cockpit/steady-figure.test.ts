import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { createSteadyFigure } from '#src/cockpit/view/steady-figure.ts';
import { stepsAsText } from '#src/cockpit/view/words.ts';

describe('steady figure', () => {
  it('keeps the shown step until the value is a further 0.3 of a step away', () => {
    const figure = createSteadyFigure();
    expect(figure.show(1.004, 100, false)).toBe(100);
    expect(figure.show(1.0079, 100, false)).toBe(100);
    expect(figure.show(1.0081, 100, false)).toBe(101);
    expect(figure.show(1.0031, 100, false)).toBe(101);
    expect(figure.show(1.0019, 100, false)).toBe(100);
  });

  it('shows the nearest at once after a tap, and when the decimals change', () => {
    const figure = createSteadyFigure();
    figure.show(1.004, 100, false);
    expect(figure.show(1.0056, 100, true)).toBe(101);
    expect(figure.show(1.0056, 10, false)).toBe(10);
  });

  it('is never more than 0.8 of a step from the truth', () => {
    fc.assert(
      fc.property(fc.array(fc.double({ min: -100, max: 100, noNaN: true })), (values) => {
        const figure = createSteadyFigure();
        for (const value of values) expect(Math.abs(figure.show(value, 100, false) - value * 100)).toBeLessThanOrEqual(0.8 + 1e-9);
      }),
    );
  });

  it('prints steps as tenths or hundredths without a sign', () => {
    expect([stepsAsText(1204, 2), stepsAsText(-3, 2), stepsAsText(34, 1), stepsAsText(0, 1)]).toEqual(['12.04', '0.03', '3.4', '0.0']);
  });
});
