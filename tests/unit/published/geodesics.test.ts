import { existsSync, readFileSync } from 'node:fs';
import { Geodesic } from 'geographiclib-geodesic';
import { describe, expect, it } from 'vitest';
import { shortLine } from '#shared/pace/geodesic.ts';
import { recorded } from '#tests/e2e/support/recorded-data.ts';

/** Lengths on WGS84 against published and computed geodesics. Skipped where the vectors are absent. */

const numbersIn = (text: string, separator: string): number[][] =>
  text
    .split('\n')
    .filter((row) => /^-?[\d.]/.test(row))
    .map((row) => row.split(separator).map(Number));

const TEST_SET = recorded('vectors/GeodTest-100.dat');
const note = (path: string): string => (existsSync(path) ? '' : ` (skipped: ${path.split('/').at(-1)} is absent)`);

interface Geodesics {
  readonly lat1: number;
  readonly lon1: number;
  readonly azi1: number;
  readonly lat2: number;
  readonly lon2: number;
  readonly azi2: number;
  readonly s12: number;
}
const testSet = (): Geodesics[] =>
  numbersIn(readFileSync(TEST_SET, 'utf8'), ' ').map(
    ([lat1, lon1, azi1, lat2, lon2, azi2, s12]) => ({ lat1, lon1, azi1, lat2, lon2, azi2, s12 }) as Geodesics,
  );

/** C. F. F. Karney's GeodTest: test set for geodesics on the WGS84 ellipsoid, https://doi.org/10.5281/zenodo.32156 (address from memory); 100 lines of it. */
describe.skipIf(!existsSync(TEST_SET))(`GeodTest${note(TEST_SET)}`, () => {
  it('the library for longer lines solves all 100, direct and inverse', () => {
    const lines = testSet();
    expect(lines).toHaveLength(100);
    for (const { lat1, lon1, azi1, lat2, lon2, azi2, s12 } of lines) {
      expect(Math.abs((Geodesic.WGS84.Inverse(lat1, lon1, lat2, lon2).s12 as number) - s12)).toBeLessThan(1e-7);
      const direct = Geodesic.WGS84.Direct(lat1, lon1, azi1, s12);
      // degrees: 1e-12 of a degree is a ten-thousandth of a millimetre; near a pole azimuth and longitude mean little
      expect(Math.abs((direct.lat2 as number) - lat2)).toBeLessThan(1e-11);
      const east = Math.cos((lat2 * Math.PI) / 180);
      expect(Math.abs((direct.lon2 as number) - lon2) * east).toBeLessThan(1e-10);
      expect(Math.abs((direct.azi2 as number) - azi2) * east).toBeLessThan(1e-10);
    }
  });

  it('the engine’s short line: the first 20, 200 and 1000 m of each, laid out at both of its ends', () => {
    let compared = 0;
    for (const { lat1, lon1, azi1, lat2, lon2, azi2 } of testSet()) {
      for (const [lat, lon, azimuth] of [
        [lat1, lon1, azi1],
        [lat2, lon2, azi2],
      ] as const) {
        for (const length of [20, 200, 1000]) {
          const end = Geodesic.WGS84.Direct(lat, lon, azimuth, length);
          // the formula is made for roads: up to 75° of latitude
          if (Math.abs(lat) > 75) continue;
          compared++;
          expect(Math.abs(shortLine(lat, lon, end.lat2 as number, end.lon2 as number) / length - 1)).toBeLessThan(3e-8);
        }
      }
    }
    expect(compared).toBeGreaterThan(400);
  });
});

/** Computed with GeodSolve 2.1.2 of GeographicLib (MIT): 450 lines of 1 mm to 337 m. */
const SHORT = recorded('vectors/geod_short_lines.csv');
describe.skipIf(!existsSync(SHORT))(`GeodSolve on short lines${note(SHORT)}`, () => {
  it('all 450 within a twentieth of a millimetre', () => {
    const rows = numbersIn(readFileSync(SHORT, 'utf8'), ',') as [number, number, number, number, number, number, number][];
    expect(rows).toHaveLength(450);
    const worst = Math.max(...rows.map(([lat1, lon1, lat2, lon2, , , s12]) => Math.abs(shortLine(lat1, lon1, lat2, lon2) - s12)));
    expect(worst).toBeLessThan(5e-5);
  });
});

/** Computed with GeodSolve 2.1.2: the sum of 54 000 short lines of one recorded drive, and of every twentieth position. */
const LENGTHS = recorded('vectors/track_length_reference.csv');
const TRACK = recorded('gnss/I99_StateCollege73_to_Altoona33_20210123.csv');
describe.skipIf(!existsSync(LENGTHS) || !existsSync(TRACK))(`GeodSolve on a recorded track${note(LENGTHS)}${note(TRACK)}`, () => {
  it('69 551 m within a millimetre, at 20 Hz and at one', () => {
    const track = numbersIn(readFileSync(TRACK, 'utf8'), ',') as [number, number, number][];
    const references = readFileSync(LENGTHS, 'utf8')
      .split('\n')
      .filter((row) => row.startsWith('gnss_track'))
      .map((row) => row.split(',').slice(1).map(Number) as [number, number]);
    expect(references).toHaveLength(2);
    for (const [every, length] of references) {
      const kept = track.filter((_, i) => i % every === 0);
      const sum = kept.slice(1).reduce((d, [, lat, lon], i) => {
        const [, lat0, lon0] = kept[i] as [number, number, number];
        return d + shortLine(lat0, lon0, lat, lon);
      }, 0);
      expect(Math.abs(sum - length)).toBeLessThan(0.001);
    }
  });
});
