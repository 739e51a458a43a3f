import geographiclib from 'geographiclib-geodesic';

/** Where the car truly was: official metres at session seconds, with the position where there is one. */
export interface PathPoint {
  readonly t: number;
  readonly metres: number;
  readonly lat: number | null;
  readonly lon: number | null;
}

export interface Path {
  readonly points: readonly PathPoint[];
  metresAt(t: number): number;
  /** First instant at which the distance is reached. */
  timeAt(metres: number): number;
}

const { WGS84 } = geographiclib.Geodesic;

export function makePath(points: readonly PathPoint[]): Path {
  return {
    points,
    metresAt: (t) =>
      between(
        points,
        t,
        (p) => p.t,
        (p) => p.metres,
      ),
    timeAt: (metres) =>
      between(
        points,
        metres,
        (p) => p.metres,
        (p) => p.t,
      ),
  };
}

/** Metres by WGS84 geodesic from the first position. */
export function geodesicPath(track: readonly { readonly t: number; readonly lat: number; readonly lon: number }[]): Path {
  let metres = 0;
  return makePath(
    track.map((here, i) => {
      const before = track[i - 1];
      if (before !== undefined) metres += WGS84.Inverse(before.lat, before.lon, here.lat, here.lon).s12 ?? 0;
      return { ...here, metres };
    }),
  );
}

/** The same path with its zero at another instant's place. */
export function fromPlaceAt(path: Path, t: number): Path {
  const zero = path.metresAt(t);
  return makePath(path.points.map((p) => ({ ...p, metres: p.metres - zero })));
}

/** Linear between the two rows around `x`; rows in order of `key`. */
export function between<T>(rows: readonly T[], x: number, key: (row: T) => number, value: (row: T) => number): number {
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
