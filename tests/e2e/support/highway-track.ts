import geographiclib from 'geographiclib-geodesic';
import type { FixRow, HighwayRecording } from '#tests/e2e/support/highway-recording.ts';

/** Where the car truly was: the RTK track, its length by WGS84 geodesic, and the recording computer's clock against UTC. */
export interface HighwayTrack {
  readonly points: readonly TrackPoint[];
  /** Geodesic distance from the first point, m, at a receiver's time, s. */
  distanceAt(utcS: number): number;
  /** First receiver's time at which the distance is reached, s. */
  timeAt(distance: number): number;
  /** Recording computer's time at a receiver's time, s. */
  hostAt(utcS: number): number;
}

export interface TrackPoint {
  readonly utcS: number;
  readonly lat: number;
  readonly lon: number;
  readonly distance: number;
}

const { WGS84 } = geographiclib.Geodesic;

/**
 * A fix reaches the computer some time after the instant it describes. Fitted once on these recordings: with 0.08 s off the
 * least delay, wheel and position agree best over half-second steps.
 */
const FIX_DELAY_S = 0.08;
/** Window of the least delay on either side: the computer's clock drifts by up to 300 ppm and steps. */
const WINDOW_S = 15;

export function highwayTrack({ fixes }: HighwayRecording): HighwayTrack {
  let distance = 0;
  const points = fixes.map(({ utcS, lat, lon }, i): TrackPoint => {
    const before = fixes[i - 1];
    if (before !== undefined) distance += WGS84.Inverse(before.lat, before.lon, lat, lon).s12 ?? 0;
    return { utcS, lat, lon, distance };
  });
  const delays = leastDelays(fixes);
  return {
    points,
    distanceAt: (utcS) =>
      interpolate(
        points,
        utcS,
        (p) => p.utcS,
        (p) => p.distance,
      ),
    timeAt: (metres) =>
      interpolate(
        points,
        metres,
        (p) => p.distance,
        (p) => p.utcS,
      ),
    hostAt: (utcS) =>
      utcS +
      interpolate(
        delays,
        utcS,
        (d) => d.utcS,
        (d) => d.delay,
      ) -
      FIX_DELAY_S,
  };
}

function leastDelays(fixes: readonly FixRow[]): { utcS: number; delay: number }[] {
  let from = 0;
  let to = 0;
  return fixes.map(({ utcS }) => {
    while ((fixes[from]?.utcS ?? utcS) < utcS - WINDOW_S) from += 1;
    while (to < fixes.length && (fixes[to]?.utcS ?? 0) < utcS + WINDOW_S) to += 1;
    return { utcS, delay: Math.min(...fixes.slice(from, to).map((f) => f.hostS - f.utcS)) };
  });
}

/** Linear between the two rows around `x`; rows in order of `key`. */
function interpolate<T>(rows: readonly T[], x: number, key: (row: T) => number, value: (row: T) => number): number {
  let [low, high] = [0, rows.length - 1];
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (key(rows[middle] as T) < x) low = middle;
    else high = middle;
  }
  const [a, b] = [rows[low] as T, rows[high] as T];
  const share = key(b) === key(a) ? 0 : (x - key(a)) / (key(b) - key(a));
  return value(a) + share * (value(b) - value(a));
}

/**
 * Receiver's time at which another drive's track passes the line across the road at a point heading `azimuth` (degrees);
 * null if it never comes within `nearM` of it.
 */
export function passingTime(track: HighwayTrack, gate: { lat: number; lon: number; azimuth: number }, nearM = 40): number | null {
  const along = (p: TrackPoint): { ahead: number; off: number } => {
    const { s12 = 0, azi1 = 0 } = WGS84.Inverse(gate.lat, gate.lon, p.lat, p.lon);
    return { ahead: s12 * Math.cos(((azi1 - gate.azimuth) * Math.PI) / 180), off: s12 };
  };
  // A thousandth of a degree is 111 m of latitude: far more than `nearM`, and quicker than a geodesic.
  const isFar = (p: TrackPoint): boolean => Math.abs(p.lat - gate.lat) > 0.001 || Math.abs(p.lon - gate.lon) > 0.002;
  for (let i = 1; i < track.points.length; i += 1) {
    const [before, after] = [track.points[i - 1] as TrackPoint, track.points[i] as TrackPoint];
    if (isFar(after)) continue;
    const b = along(after);
    if (b.off > nearM || b.ahead < 0) continue;
    const a = along(before);
    if (a.ahead >= 0) continue;
    return before.utcS + ((after.utcS - before.utcS) * -a.ahead) / (b.ahead - a.ahead);
  }
  return null;
}

/** Point and heading of the track at a distance, over 20 m of it. */
export function gateAt(track: HighwayTrack, distance: number): { lat: number; lon: number; azimuth: number } {
  const at = (d: number): { lat: number; lon: number } => ({
    lat: interpolate(
      track.points,
      d,
      (p) => p.distance,
      (p) => p.lat,
    ),
    lon: interpolate(
      track.points,
      d,
      (p) => p.distance,
      (p) => p.lon,
    ),
  });
  const [from, to] = [at(distance - 10), at(distance + 10)];
  return { ...at(distance), azimuth: WGS84.Inverse(from.lat, from.lon, to.lat, to.lon).azi1 ?? 0 };
}
