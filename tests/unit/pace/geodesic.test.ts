import { Geodesic } from 'geographiclib-geodesic';
import { describe, expect, it } from 'vitest';
import { shortLine } from '#shared/pace/geodesic.ts';

describe('short line on WGS84', () => {
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
