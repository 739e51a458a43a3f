/**
 * The pace planner's arithmetic: one unknown `s`, such that a car with constant acceleration and braking, held under every
 * limit, takes exactly the time it is given. Plain numbers in SI; own derivation from the equations of uniform acceleration.
 *
 * Speeds at the cuts come from a forward pass (what acceleration allows) and a backward pass (what braking allows). T(s) is
 * convex and does not increase, so Newton's method from the left converges monotonically; a bracket guards it elsewhere.
 */

export interface Piece {
  readonly from: number;
  readonly to: number;
  /** Highest speed here by zone and cap, m/s. */
  readonly top: number;
  /** The unknown's weight: 1 = cruise speed; a section's target speed = ratio to every average. */
  readonly weight: number;
  /** Lowest speed here, m/s; a limit below it wins. 0 for none. */
  readonly floor: number;
}

/** m/s², both positive. */
export interface CarLimits {
  readonly acceleration: number;
  readonly deceleration: number;
}

/**
 * Speed at every cut, the pieces' limits, the time in seconds and its derivative by s. One is made for a course and filled again
 * by every evaluation: a plan is made every second of a run, and of every run that is replayed.
 */
export interface Evaluation {
  readonly nodes: Float64Array;
  readonly limits: Float64Array;
  /** Derivatives by s of the squared speeds at the cuts. */
  readonly slopes: Float64Array;
  time: number;
  slope: number;
}

export const makeEvaluation = (pieces: number): Evaluation => ({
  nodes: new Float64Array(pieces + 1),
  limits: new Float64Array(pieces),
  slopes: new Float64Array(pieces + 1),
  time: 0,
  slope: 0,
});

/** Where on the pieces a plan begins: in which piece, at which place, how fast. */
export interface Standing {
  readonly first: number;
  readonly x: number;
  readonly v: number;
}

export const atBeginning = (pieces: readonly Piece[], v: number): Standing => ({ first: 0, x: (pieces[0] as Piece).from, v });

/** Index of the piece that holds x; the number of pieces where x lies at or past their end. */
export function pieceAt(pieces: readonly Piece[], x: number): number {
  let i = 0;
  while (i < pieces.length && (pieces[i] as Piece).to <= x) i++;
  return i;
}

/** Time from where the car stands to the end of the pieces with unknown s. Fills `out` from there on and returns it. O(pieces). */
export function evaluate(pieces: readonly Piece[], car: CarLimits, from: Standing, s: number, out: Evaluation): Evaluation {
  findNodes(pieces, car, from, s, out);
  const { nodes, limits, slopes } = out;
  const { acceleration: a, deceleration: d } = car;
  let time = 0;
  let slope = 0;
  let begin = from.x;
  let v0 = Math.sqrt(nodes[from.first] as number);
  nodes[from.first] = v0;
  for (let i = from.first; i < pieces.length; i++) {
    const piece = pieces[i] as Piece;
    const length = piece.to - begin;
    const limit = limits[i] as number;
    const v1 = Math.sqrt(nodes[i + 1] as number);
    nodes[i + 1] = v1;
    // the same cases as `pieceMotion`, without an object for each
    const over = v0 > limit;
    const square = over ? 0 : (2 * a * d * length + d * v0 * v0 + a * v1 * v1) / (a + d);
    const atLimit = over || limit * limit < square;
    const peak = Math.max(atLimit ? limit : Math.sqrt(Math.max(0, square)), over ? 0 : v0, v1);
    const rate = over ? -d : a;
    const rampIn = Math.min(length, (peak * peak - v0 * v0) / (2 * rate));
    const cruise = atLimit ? Math.max(0, length - rampIn - (peak * peak - v1 * v1) / (2 * d)) : 0;
    time += (peak - v0) / rate + (peak - v1) / d + (cruise > 0 ? cruise / peak : 0);
    if (cruise > 0) {
      const asked = s * piece.weight;
      if (asked < piece.top && asked > piece.floor) slope -= cruise / (peak * s);
    }
    // speeds at the cuts move with s too, where the slower of two averages holds them
    if (slopes[i] !== 0 && v0 > 0) slope -= (((slopes[i] as number) / (2 * v0)) * (1 - v0 / peak)) / rate;
    if (slopes[i + 1] !== 0 && v1 > 0) slope -= (((slopes[i + 1] as number) / (2 * v1)) * (1 - v1 / peak)) / d;
    begin = piece.to;
    v0 = v1;
  }
  out.time = time;
  out.slope = slope;
  return out;
}

/** Limits, and the squared speeds at the cuts with their derivatives by s: squares need no root, and change evenly with the way. */
function findNodes(pieces: readonly Piece[], car: CarLimits, from: Standing, s: number, { nodes, limits, slopes }: Evaluation): void {
  const { acceleration: a, deceleration: d } = car;
  const { first, x, v } = from;
  const n = pieces.length;
  for (let i = first; i < n; i++) {
    const piece = pieces[i] as Piece;
    limits[i] = Math.min(piece.top, Math.max(piece.floor, s * piece.weight));
  }
  nodes[first] = v * v;
  slopes[first] = 0;
  // the least that braking all the way can reach: above a limit it cannot be helped
  let least = v * v;
  let begin = x;
  for (let i = first; i < n; i++) {
    const length = (pieces[i] as Piece).to - begin;
    begin = (pieces[i] as Piece).to;
    least = Math.max(0, least - 2 * d * length);
    const next = i + 1 < n && (limits[i + 1] as number) < (limits[i] as number) ? i + 1 : i;
    const limit = limits[next] as number;
    const wanted = limit * limit;
    const reachable = (nodes[i] as number) + 2 * a * length;
    if (reachable < Math.max(wanted, least)) {
      nodes[i + 1] = reachable;
      slopes[i + 1] = slopes[i] as number;
    } else {
      nodes[i + 1] = Math.max(wanted, least);
      const { top, weight, floor } = pieces[next] as Piece;
      const free = wanted > least && limit < top && limit > floor;
      slopes[i + 1] = free ? 2 * limit * weight : 0;
    }
  }
  for (let i = n - 1; i > first; i--) {
    const most = (nodes[i + 1] as number) + 2 * d * ((pieces[i] as Piece).to - (pieces[i] as Piece).from);
    if ((nodes[i] as number) <= most) continue;
    nodes[i] = most;
    slopes[i] = slopes[i + 1] as number;
  }
}

export interface Motion {
  readonly time: number;
  readonly peak: number;
  /** Lengths of the first ramp and the steady middle, metres; what is left is the last ramp. */
  readonly rampIn: number;
  readonly cruise: number;
}

/** One piece: ramp from v0 to the peak, steady, ramp down to v1. The peak is the limit, or less where the piece is too short. */
export function pieceMotion(length: number, v0: number, v1: number, limit: number, car: CarLimits): Motion {
  const { acceleration: a, deceleration: d } = car;
  if (v0 > limit) {
    const peak = Math.max(limit, v1);
    const rampIn = Math.min(length, (v0 * v0 - peak * peak) / (2 * d));
    const rampOut = (peak * peak - v1 * v1) / (2 * d);
    const cruise = Math.max(0, length - rampIn - rampOut);
    return { time: (v0 - v1) / d + (cruise > 0 ? cruise / peak : 0), peak, rampIn, cruise };
  }
  const highest = Math.sqrt(Math.max(0, (2 * a * d * length + d * v0 * v0 + a * v1 * v1) / (a + d)));
  const atLimit = limit < highest;
  const peak = Math.max(atLimit ? limit : highest, v0, v1);
  const rampIn = (peak * peak - v0 * v0) / (2 * a);
  const rampOut = (peak * peak - v1 * v1) / (2 * d);
  const cruise = atLimit ? Math.max(0, length - rampIn - rampOut) : 0;
  return { time: (peak - v0) / a + (peak - v1) / d + (cruise > 0 ? cruise / peak : 0), peak, rampIn, cruise };
}

/** short: flat out under every limit it takes `by` seconds too long. long: at the lowest speed it takes `by` seconds too few. */
export interface Solution {
  readonly kind: 'solved' | 'short' | 'long';
  readonly s: number;
  readonly by: number;
  readonly iterations: number;
}

const CLOSE_ENOUGH = 1e-7;
/** A plan that misses by more than this says so, s. */
const GOOD_ENOUGH = 1e-3;
const MOST_ITERATIONS = 60;

/**
 * Finds s such that the pieces take `time` seconds from where the car stands; `out` then holds that evaluation. `near` is where to
 * begin: the s of a second ago is an evaluation or two away.
 */
export function solve(
  pieces: readonly Piece[],
  car: CarLimits,
  from: Standing,
  time: number,
  out: Evaluation,
  near: number | null = null,
): Solution {
  let highest = 0;
  let lowest = Number.POSITIVE_INFINITY;
  let average = 0;
  let begin = from.x;
  for (let i = from.first; i < pieces.length; i++) {
    const { to, top, weight, floor } = pieces[i] as Piece;
    highest = Math.max(highest, top / weight);
    lowest = Math.min(lowest, floor / weight);
    average += (to - begin) / weight;
    begin = to;
  }
  let [low, high] = [lowest, highest];
  // at a standstill it takes for ever: without a floor the lower end needs no look
  let [lowSeen, highSeen] = [lowest <= 0, false];
  let s = Math.min(highest, Math.max(lowest, near ?? (time > 0 ? average / time : highest)));
  let iterations = 0;
  for (; iterations < MOST_ITERATIONS; iterations++) {
    const off = evaluate(pieces, car, from, s, out).time - time;
    if (Math.abs(off) < CLOSE_ENOUGH) break;
    if (off > 0) {
      if (s >= highest) return { kind: 'short', s, by: off, iterations };
      low = s;
      lowSeen = true;
    } else {
      if (s <= lowest) return { kind: 'long', s, by: -off, iterations };
      high = s;
      highSeen = true;
    }
    const newton = out.slope < 0 ? s - off / out.slope : off * Number.POSITIVE_INFINITY;
    if (newton > low && newton < high) s = newton;
    else if (newton >= high) s = highSeen ? (low + high) / 2 : high;
    else s = lowSeen ? (low + high) / 2 : low;
  }
  // a target that only standing still would meet is never met to the end
  const off = iterations < MOST_ITERATIONS ? 0 : evaluate(pieces, car, from, s, out).time - time;
  if (Math.abs(off) > GOOD_ENOUGH) return { kind: off > 0 ? 'short' : 'long', s, by: Math.abs(off), iterations };
  return { kind: 'solved', s, by: 0, iterations };
}
