/** WGS84 defining constants. Source: NIMA TR8350.2, table 3.1. */
const EQUATORIAL_RADIUS = 6378137;
const FLATTENING = 1 / 298.257223563;
const E2 = FLATTENING * (2 - FLATTENING);
const RADIANS = Math.PI / 180;

/**
 * Length of a short line on the WGS84 ellipsoid, metres, between two positions in degrees.
 *
 * Gauss's mid-latitude formula, leading term: the meridian and the prime-vertical radius of curvature at the middle latitude
 * turn the differences of latitude and longitude into lengths (formula and name from memory; the checks compare it with
 * GeodSolve). Its relative error grows with the square of length over earth radius: below 1e-8 up to 1 km and latitude 66°.
 */
export function shortLine(lat1: number, lon1: number, lat2: number, lon2: number): number {
  const { north, east } = metresPerDegree((lat1 + lat2) / 2);
  return Math.hypot(north * (lat2 - lat1), east * turnOf(lon2 - lon1));
}

/** Metres of one degree of latitude and of longitude on the WGS84 ellipsoid, at a latitude in degrees. */
export function metresPerDegree(lat: number): { readonly north: number; readonly east: number } {
  const sin = Math.sin(lat * RADIANS);
  const w2 = 1 - E2 * sin * sin;
  const primeVertical = EQUATORIAL_RADIUS / Math.sqrt(w2);
  return { north: ((primeVertical * (1 - E2)) / w2) * RADIANS, east: primeVertical * Math.cos(lat * RADIANS) * RADIANS };
}

/** Degrees of longitude by the shorter way round. */
export const turnOf = (degrees: number): number => (degrees > 180 ? degrees - 360 : degrees < -180 ? degrees + 360 : degrees);
