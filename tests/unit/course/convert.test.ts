import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { printedFineness, printedMetres, printedSpeed, readDecimal, readPrintedMetres } from '#shared/course/convert.ts';

describe('printed distances', () => {
  it('are exact: the international mile is 1609.344 m (1959 agreement, NIST SP 811)', () => {
    expect(printedMetres({ text: '1', unit: 'mi' })).toBe(1609.344);
    expect(printedMetres({ text: '1000.0', unit: 'mi' })).toBe(1_609_344);
    expect(printedMetres({ text: '12.345', unit: 'km' })).toBe(12_345);
    expect(printedMetres({ text: '0.07', unit: 'km' })).toBe(70);
    expect(printedMetres({ text: '90.123', unit: 'mi' })).toBeCloseTo(145_038.909312, 6);
  });

  it('any whole number of metres printed in km comes back exactly', () => {
    fc.assert(
      fc.property(fc.nat({ max: 999_999 }), (m) => {
        const text = `${Math.floor(m / 1000)}.${String(m % 1000).padStart(3, '0')}`;
        expect(printedMetres({ text, unit: 'km' })).toBe(m);
      }),
    );
  });

  it('the last decimal tells the fineness', () => {
    expect(printedFineness({ text: '12.34', unit: 'km' })).toBe(10);
    expect(printedFineness({ text: '12', unit: 'km' })).toBe(1000);
    expect(printedFineness({ text: '7.50', unit: 'mi' })).toBeCloseTo(16.09344, 9);
  });

  it('speeds: 1 mph = 0.44704 m/s exactly (NIST SP 811)', () => {
    expect(printedSpeed({ text: '1', unit: 'mph' })).toBeCloseTo(0.44704, 15);
    expect(printedSpeed({ text: '180', unit: 'km/h' })).toBe(50);
  });

  it('refuses what is no plain decimal', () => {
    for (const text of ['', ' 1', '1,5', '-1', '+1', '1e3', '.5', '5.', '0x10', 'twelve', '１２', '1234567890.1234567']) {
      expect(readDecimal(text)).toBeNull();
      expect(readPrintedMetres({ text, unit: 'km' })).toBeNull();
    }
    expect(() => printedMetres({ text: '1,5', unit: 'km' })).toThrow(RangeError);
    expect(readPrintedMetres({ text: '1', unit: 'league' as 'km' })).toBeNull();
  });
});
