/**
 * First movement, extrapolated back to rest: x = ½a(t−t₀)², so √x is a straight line in t that ends at t₀. Where within a pulse
 * the car stood is not known: each place is tried, and counts by how well the line then fits. A record that showed no movement
 * bounds t₀ from below: until then the car had gone less than what was left of the pulse.
 */
export interface FirstMovement {
  /** Instant, microseconds; fractions allowed. */
  readonly at: number;
  /** Metres between the last count at rest and the car's true place at rest, 0 up to one pulse. */
  readonly within: number;
}

export interface FirstMetres {
  /** Instants and metres since rest of the first knots. */
  readonly t: readonly number[];
  readonly s: readonly number[];
  /** Last record that showed no movement; may lie far back. */
  readonly stillAt: number;
  /** One pulse, metres; 0 for GNSS. */
  readonly pulseMetres: number;
  /** Between two records, microseconds. */
  readonly interval: number;
}

/** Steadiest pull that can be told from a roll, m/s². */
const LEAST_ACCELERATION = 0.3;
/** The longest a car can have crept before the first knot. */
const LONGEST_BEFORE_S = 2.5;
const PLACES = 9;
const PLACES_APART_M = 0.04;
/** A line this far off, by misfit a point, is none: wheels spun. Then the first half tells more. */
const STRAIGHT = 1.5;
const FEWEST = 5;
/** Instants err by this, s; metres by this, whatever measures them. */
const INSTANT_S = 0.002;
const PLACE_M = 0.01;
/** A steady speed from the first metre on (wheels that spin, a count that began late) must fit so much better than a pull. */
const ROLLS = 0.5;
/** How far a line that leads before what the records allow counts against a place, s. */
const BOUND_S = 0.05;

interface Point {
  /** Seconds since the first knot, metres since the last count at rest, and one over their variance. */
  readonly t: number;
  readonly s: number;
  readonly weight: number;
  /** Metres as counted. */
  readonly counted: number;
}

interface Line {
  readonly t0: number;
  readonly misfit: number;
}

export function firstMovement({ t, s, stillAt, pulseMetres, interval }: FirstMetres): FirstMovement {
  const t1 = t[0] as number;
  const still = (stillAt - t1) / 1e6;
  let points = pointsOf(t, s, pulseMetres, interval / 1e6);
  let tried = tryPlaces(points, still, pulseMetres);
  const steady = rollFrom(points);
  if (steady !== null && steady.misfit < ROLLS * tried.misfit) return { at: t1 + Math.max(steady.t0, -LONGEST_BEFORE_S) * 1e6, within: 0 };
  while (tried.misfit > STRAIGHT * points.length && points.length >= 2 * FEWEST) {
    points = points.slice(0, points.length >> 1);
    tried = tryPlaces(points, still, pulseMetres);
  }
  return { at: t1 + tried.t0 * 1e6, within: tried.within };
}

/** Mean over the places within the pulse, each by how well the line fits from there; the first knot where none does. */
function tryPlaces(points: readonly Point[], still: number, pulseMetres: number): Line & { within: number } {
  const count = pulseMetres > 0 ? Math.max(PLACES, Math.ceil(pulseMetres / PLACES_APART_M)) : 1;
  const lines: (Line & { within: number })[] = [];
  for (let k = 0; k < count; k++) {
    const within = ((k + 0.5) / count) * pulseMetres;
    const line = lineFrom(points, within, still, pulseMetres - within);
    if (line !== null) lines.push({ t0: line.t0, misfit: line.misfit, within });
  }
  if (lines.length === 0) return { t0: 0, within: 0, misfit: 0 };
  const misfit = Math.min(...lines.map((line) => line.misfit));
  let [sum, t0, within] = [0, 0, 0];
  for (const line of lines) {
    const weight = Math.exp((misfit - line.misfit) / 2);
    sum += weight;
    t0 += weight * line.t0;
    within += weight * line.within;
  }
  return { t0: t0 / sum, within: within / sum, misfit };
}

/** Least squares of the metres themselves over t: the instant of no metres at a steady speed; null where there is none. */
function rollFrom(points: readonly Point[]): Line | null {
  if (points.length < 2) return null;
  let [n, st, ss] = [0, 0, 0];
  for (const p of points) {
    n += p.weight;
    st += p.weight * p.t;
    ss += p.weight * p.counted;
  }
  const [mt, ms] = [st / n, ss / n];
  let [tt, ts] = [0, 0];
  for (const p of points) {
    tt += p.weight * (p.t - mt) ** 2;
    ts += p.weight * (p.t - mt) * (p.counted - ms);
  }
  const speed = ts / tt;
  if (!(speed > 0)) return null;
  let misfit = 0;
  for (const p of points) misfit += p.weight * (p.counted - ms - speed * (p.t - mt)) ** 2;
  const t0 = mt - ms / speed;
  return t0 <= 0 ? { t0, misfit } : null;
}

/** A count is seen up to one record after it was made: the car is further than it says by half of that way, or half a pulse. */
function pointsOf(t: readonly number[], s: readonly number[], pulseMetres: number, interval: number): Point[] {
  return t.map((at, i) => {
    const [a, b] = [Math.max(0, i - 1), Math.min(t.length - 1, i + 1)];
    const seconds = ((t[b] as number) - (t[a] as number)) / 1e6;
    const speed = seconds > 0 ? Math.max(0, (s[b] as number) - (s[a] as number)) / seconds : 0;
    const unseen = Math.min(pulseMetres, speed * interval);
    const variance = (unseen * unseen) / 12 + (INSTANT_S * speed) ** 2 + PLACE_M ** 2;
    return { t: (at - (t[0] as number)) / 1e6, s: (s[i] as number) + unseen / 2, weight: 1 / variance, counted: s[i] as number };
  });
}

/** Least squares of √(s − within) over t; null where that is no pull from rest. `left`: metres to the next count at rest. */
function lineFrom(points: readonly Point[], within: number, still: number, left: number): Line | null {
  let [n, st, sy] = [0, 0, 0];
  for (const p of points) {
    const x = p.s - within;
    if (x <= 0) continue;
    // the variance of √x is that of x over 4x
    const w = 4 * x * p.weight;
    n += w;
    st += w * p.t;
    sy += w * Math.sqrt(x);
  }
  if (!(n > 0)) return null;
  const [mt, my] = [st / n, sy / n];
  let [tt, ty] = [0, 0];
  for (const p of points) {
    const x = p.s - within;
    if (x <= 0) continue;
    const w = 4 * x * p.weight;
    tt += w * (p.t - mt) ** 2;
    ty += w * (p.t - mt) * (Math.sqrt(x) - my);
  }
  const slope = ty / tt;
  const a = 2 * slope * slope;
  if (!(slope > 0 && a >= LEAST_ACCELERATION)) return null;
  const free = mt - my / slope;
  const t0 = Math.min(0, Math.max(free, still - Math.sqrt((2 * left) / a), -LONGEST_BEFORE_S));
  let misfit = ((t0 - free) / BOUND_S) ** 2;
  for (const p of points) {
    const x = p.s - within;
    if (x > 0) misfit += 4 * x * p.weight * (Math.sqrt(x) - my - slope * (p.t - mt)) ** 2;
  }
  return { t0, misfit };
}
