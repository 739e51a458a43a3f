import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { fittingSize, linesOf, shortName } from '#src/cockpit/view/names.ts';

describe('short name of a place', () => {
  it('is the place without the edge or side after the comma', () => {
    expect(shortName('Quarry bridge, north parapet')).toBe('Quarry bridge');
    expect(shortName('Old brickworks chimney, far edge of the parapet')).toBe('Old brickworks chimney');
    expect(shortName('Finish')).toBe('Finish');
  });

  it('is never empty for a name that is not', () => {
    expect(shortName(', odd')).toBe(', odd');
  });
});

describe('fitting names', () => {
  it('breaks lines at words, as the browser does', () => {
    expect(linesOf('Quarry bridge, north parapet', 15)).toBe(2);
    expect(linesOf('Old brickworks chimney, far edge of the parapet', 25)).toBe(2);
    expect(linesOf('one', 3)).toBe(1);
    expect(linesOf('abcdefgh', 3)).toBe(3);
  });

  it('never needs more lines in a wider column', () => {
    fc.assert(
      fc.property(
        fc.array(fc.stringMatching(/^[a-z]{1,12}$/), { minLength: 1, maxLength: 8 }),
        fc.integer({ min: 12, max: 40 }),
        (words, columns) => {
          expect(linesOf(words.join(' '), columns + 5)).toBeLessThanOrEqual(linesOf(words.join(' '), columns));
        },
      ),
    );
  });

  it('takes the largest size that fits, and the smallest when none does', () => {
    const sizes = [46, 38, 30, 25];
    expect(fittingSize('Finish', 352, 2, sizes)).toBe(46);
    expect(fittingSize('Quarry bridge, north parapet', 352, 2, sizes)).toBe(38);
    expect(fittingSize('x'.repeat(200), 352, 2, sizes)).toBe(25);
  });
});
