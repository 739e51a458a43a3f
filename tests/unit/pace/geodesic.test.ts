import { existsSync, readFileSync } from 'node:fs';
import { Geodesic } from 'geographiclib-geodesic';
import { describe, expect, it } from 'vitest';
import { shortLine } from '#shared/pace/geodesic.ts';

const VECTORS = new URL('../../../../shared/data/vectors/geod_short_lines.csv', import.meta.url);

describe('short line on WGS84', () => {
  it.skipIf(!existsSync(VECTORS))('agrees with GeodSolve on 450 recorded short lines (skipped where the vectors are absent)', () => {
    const rows = readFileSync(VECTORS, 'utf8')
      .split('\n')
      .filter((line) => /^-?\d/.test(line))
      .map((line) => line.split(',').map(Number) as [number, number, number, number, number, number, number]);
    expect(rows).toHaveLength(450);
    const worst = Math.max(...rows.map(([lat1, lon1, lat2, lon2, , , s12]) => Math.abs(shortLine(lat1, lon1, lat2, lon2) - s12)));
    // the printed degrees (8 decimals) and the formula together: well under a tenth of a millimetre
    expect(worst).toBeLessThan(5e-5);
  });

  it('agrees with GeographicLib at every latitude, azimuth and the date line', () => {
    let worst = 0;
    for (const lat of [-78, -45, -12, 0, 7, 33, 52, 66, 80]) {
      for (const lon of [-180, -73.5, 0, 179.9999]) {
        for (let azimuth = 0; azimuth < 360; azimuth += 15) {
          for (const length of [0.5, 20, 400, 1000]) {
            const { lat2, lon2 } = Geodesic.WGS84.Direct(lat, lon, azimuth, length);
            worst = Math.max(worst, Math.abs(shortLine(lat, lon, lat2 as number, lon2 as number) - length) / length);
          }
        }
      }
    }
    expect(worst).toBeLessThan(5e-8);
  });
});
