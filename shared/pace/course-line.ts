import type { SurveyedPoint } from '#shared/course/course-book.ts';
import { metresPerDegree, turnOf } from '#shared/pace/geodesic.ts';

/**
 * The surveyed line of a course as a local metric polyline: each segment is flat, with the ellipsoid's own metres per degree
 * at its middle latitude, so that it is true to centimetres wherever on the course it lies. The straight line between two
 * points stands for the official distance between them, in proportion.
 */
export interface CourseLine {
  readonly points: readonly SurveyedPoint[];
  /** By segment: direction (unit, east and north), metres of the straight line, metres per degree at its middle. */
  readonly segments: readonly Segment[];
}

interface Segment {
  readonly east: number;
  readonly north: number;
  readonly length: number;
  readonly perLat: number;
  readonly perLon: number;
}

/** Where a position lies on the line: official distance, and metres to the right of it. */
export interface Projection {
  readonly d: number;
  readonly cross: number;
}

export interface Placed {
  readonly lat: number;
  readonly lon: number;
  /** Degrees true and m/s; null where unknown. The direction is only held against the line of a car surely moving. */
  readonly course: number | null;
  readonly speed: number | null;
  /** One sigma of the position along one axis, metres. */
  readonly sigma: number;
}

/** Geometry never changes within a pack; never stored in a state. */
const built = new WeakMap<readonly SurveyedPoint[], CourseLine>();

/** The line of a book's geometry, built once; null where there is none to speak of. */
export function courseLineOf(geometry: readonly SurveyedPoint[] | undefined): CourseLine | null {
  if (geometry === undefined || geometry.length < 2) return null;
  const known = built.get(geometry);
  if (known !== undefined) return known;
  const line: CourseLine = { points: geometry, segments: geometry.slice(1).map((b, i) => segment(geometry[i] as SurveyedPoint, b)) };
  built.set(geometry, line);
  return line;
}

function segment(a: SurveyedPoint, b: SurveyedPoint): Segment {
  const { north, east } = metresPerDegree((a.lat + b.lat) / 2);
  const [x, y] = [east * turnOf(b.lon - a.lon), north * (b.lat - a.lat)];
  const length = Math.hypot(x, y);
  return { east: length > 0 ? x / length : 0, north: length > 0 ? y / length : 0, length, perLat: north, perLon: east };
}

/** Further from the line than this, or than three times what the receiver promises, is another road. */
const OFF_COURSE_M = 25;
const ACCURACIES = 3;
/** 95 % radius of two equal axes is 2.448 sigma. Source: chi-square with two degrees of freedom. */
export const RADIUS_95 = 2.448;
/** Above this speed the course of a fix is a direction, m/s; it may differ from the road's by this much, cosine of 60°. */
const DIRECTED = 5;
const SAME_WAY = 0.5;
/** Where two places on the line are as near, the one nearer the expected distance counts: one sigma of that, metres. */
const EXPECTED_M = 100;
const ACROSS_M = 5;

/**
 * Official distance of a position, looked for within `window` metres of the expected one, so that the way back along the same
 * road is not mistaken for the way out. Null where no part of the line in reach is near enough and goes the same way.
 */
export function project(line: CourseLine, fix: Placed, expected: number, window: number): Projection | null {
  const { points, segments } = line;
  const heading = fix.course !== null && fix.speed !== null && fix.speed > DIRECTED ? (fix.course * Math.PI) / 180 : null;
  const [sin, cos] = heading === null ? [0, 0] : [Math.sin(heading), Math.cos(heading)];
  const farthest = Math.max(OFF_COURSE_M, ACCURACIES * RADIUS_95 * fix.sigma);
  let [best, least] = [-1, Number.POSITIVE_INFINITY];
  for (let i = firstSegment(points, expected - window); i < segments.length; i++) {
    const s = segments[i] as Segment;
    const a = points[i] as SurveyedPoint;
    if (a.d > expected + window) break;
    if (heading !== null && s.east * sin + s.north * cos < SAME_WAY) continue;
    const [x, y] = [s.perLon * turnOf(fix.lon - a.lon), s.perLat * (fix.lat - a.lat)];
    const along = x * s.east + y * s.north;
    const t = Math.min(Math.max(along, 0), s.length);
    const off = Math.hypot(x - t * s.east, y - t * s.north);
    if (off > farthest) continue;
    const cost = (off / ACROSS_M) ** 2 + ((distanceOn(line, i, t) - expected) / EXPECTED_M) ** 2;
    if (cost < least) [best, least] = [i, cost];
  }
  return best < 0 ? null : refined(line, best, fix);
}

/** The last segment that begins at or before a distance; the first where none does. */
function firstSegment(points: readonly SurveyedPoint[], d: number): number {
  let [low, high] = [0, points.length - 1];
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if ((points[middle] as SurveyedPoint).d <= d) low = middle;
    else high = middle;
  }
  return low;
}

function distanceOn({ points, segments }: CourseLine, i: number, along: number): number {
  const [a, b] = [points[i] as SurveyedPoint, points[i + 1] as SurveyedPoint];
  const { length } = segments[i] as Segment;
  return length > 0 ? a.d + ((b.d - a.d) * along) / length : a.d;
}

/** The same with the metres per degree halfway to the position itself; null before the first point and beyond the last. */
function refined(line: CourseLine, i: number, fix: Placed): Projection | null {
  const s = line.segments[i] as Segment;
  const a = line.points[i] as SurveyedPoint;
  const { north, east } = metresPerDegree((a.lat + fix.lat) / 2);
  const [x, y] = [east * turnOf(fix.lon - a.lon), north * (fix.lat - a.lat)];
  const along = x * s.east + y * s.north;
  if ((i === 0 && along < 0) || (i === line.segments.length - 1 && along > s.length)) return null;
  return { d: distanceOn(line, i, Math.min(Math.max(along, 0), s.length)), cross: x * s.north - y * s.east };
}
