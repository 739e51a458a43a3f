import { describe, expect, it } from 'vitest';
import { printedMetres, printedSpeed } from '#shared/course/convert.ts';
import { METRES_PER_SECOND_PER_KMH, METRES_PER_SECOND_PER_KNOT } from '#shared/sensor/nmea-fields.ts';
import { decodeNmea } from '#shared/sensor/nmea-sentence.ts';
import { METRES_PER_KM, METRES_PER_MILE, metresPerSecondPer } from '#shared/units.ts';

/** Definitions of units, from memory of the texts named. */

describe('units', () => {
  // International yard and pound agreement, 1959: one yard is 0.9144 m exactly; a foot a third of it, a mile 1760 yards or 5280 feet.
  it('the international mile, yard and foot', () => {
    const yard = 0.9144;
    expect(METRES_PER_MILE).toBe(1609.344);
    expect(METRES_PER_MILE).toBeCloseTo(1760 * yard, 12);
    expect(METRES_PER_MILE).toBeCloseTo(5280 * (yard / 3), 12);
    expect(printedMetres({ text: '1', unit: 'mi' })).toBe(1609.344);
    expect(printedMetres({ text: '100', unit: 'mi' })).toBe(160_934.4);
    // the US survey mile, 6336/3937 km, is another: 3.2 mm longer, and not meant
    expect(6_336_000 / 3937 - METRES_PER_MILE).toBeCloseTo(0.003_218_7, 6);
  });

  // BIPM, SI brochure, 8th edition, table 8; ISO 80000-3: one nautical mile is 1852 m exactly, a knot one of them an hour.
  it('the knot', () => {
    expect(METRES_PER_SECOND_PER_KNOT * 3600).toBeCloseTo(1852, 9);
    // 36 knots are 36 nautical miles in 3600 s: 18.52 m/s; the km/h beside them agree
    expect(decodeNmea('GPVTG,54.7,T,,M,36.0,N,,K')).toMatchObject({ speed: expect.closeTo(18.52, 12) });
    expect(decodeNmea('GPVTG,54.7,T,,M,,N,66.672,K')).toMatchObject({ speed: expect.closeTo(18.52, 12) });
  });

  // SI brochure, 9th edition: prefixes, and the hour of 3600 s among the units accepted with the SI.
  it('km/h and mph', () => {
    expect(METRES_PER_KM).toBe(1000);
    expect(metresPerSecondPer('km/h') * 3600).toBeCloseTo(1000, 12);
    expect(METRES_PER_SECOND_PER_KMH).toBeCloseTo(1000 / 3600, 15);
    expect(metresPerSecondPer('mph')).toBeCloseTo(0.447_04, 15);
    expect(printedSpeed({ text: '180', unit: 'km/h' })).toBe(50);
    expect(printedSpeed({ text: '100', unit: 'mph' })).toBeCloseTo(44.704, 12);
  });
});
