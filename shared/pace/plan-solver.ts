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
}

export interface CarLimits {
  /** m/s², both positive. */
  readonly acceleration: number;
  readonly deceleration: number;
  /** Speed advice never falls under, m/s; a limit below it wins. 0 for none. */
  readonly floor: number;
}

/** Speed at every cut, the pieces' limits, the time in seconds and its derivative by s. */
export interface Evaluation {
  readonly nodes: Float64Array;
  readonly limits: Float64Array;
  time: number;
  slope: number;
}

export const makeEvaluation = (pieces: number): Evaluation => ({
  nodes: new Float64Array(pieces + 1),
  limits: new Float64Array(pieces),
  time: 0,
  slope: 0,
});

const limitOf = (piece: Piece, floor: number, s: number): number => Math.min(piece.top, Math.max(floor, s * piece.weight));
const isFree = (piece: Piece, floor: number, s: number): boolean => s * piece.weight < piece.top && s * piece.weight > floor;

/** Time for all pieces from speed v0 with unknown s. Fills and returns `out`. O(pieces). */
export function evaluate(pieces: readonly Piece[], car: CarLimits, v0: number, s: number, out: Evaluation): Evaluation {
  const { nodes, limits } = out;
  const slopes = nodeSpeeds(pieces, car, v0, s, out);
  let time = 0;
  let slope = 0;
  for (let i = 0; i < pieces.length; i++) {
    const piece = pieces[i] as Piece;
    const part = pieceMotion(piece.to - piece.from, nodes[i] as number, nodes[i + 1] as number, limits[i] as number, car);
    const { acceleration: a, deceleration: d } = car;
    time += part.time;
    if (part.atLimit && isFree(piece, car.floor, s)) slope -= part.cruise / (part.peak * s);
    // speeds at the cuts move with s too, where the slower of two averages holds them
    const rampIn = (nodes[i] as number) > part.peak ? d : -a;
    slope += ((slopes[i] as number) / rampIn) * (1 - (nodes[i] as number) / part.peak);
    slope += (-(slopes[i + 1] as number) / d) * (1 - (nodes[i + 1] as number) / part.peak);
  }
  out.time = time;
  out.slope = slope;
  return out;
}

/** Fills node speeds and limits; returns their derivatives by s. */
function nodeSpeeds(pieces: readonly Piece[], car: CarLimits, v0: number, s: number, { nodes, limits }: Evaluation): Float64Array {
  const { acceleration: a, deceleration: d, floor } = car;
  const n = pieces.length;
  const slopes = new Float64Array(n + 1);
  for (let i = 0; i < n; i++) limits[i] = limitOf(pieces[i] as Piece, floor, s);
  nodes[0] = v0;
  // the least speed that braking all the way can reach: above a limit it cannot be helped
  let least = v0;
  for (let i = 0; i < n; i++) {
    const piece = pieces[i] as Piece;
    const length = piece.to - piece.from;
    const before = nodes[i] as number;
    least = Math.sqrt(Math.max(0, least * least - 2 * d * length));
    const next = i + 1 < n ? i + 1 : i;
    const binding = (limits[next] as number) < (limits[i] as number) ? next : i;
    const wanted = limits[binding] as number;
    const reachable = Math.sqrt(before * before + 2 * a * length);
    if (reachable < Math.max(wanted, least)) {
      nodes[i + 1] = reachable;
      slopes[i + 1] = reachable > 0 ? ((slopes[i] as number) * before) / reachable : 0;
    } else {
      nodes[i + 1] = Math.max(wanted, least);
      slopes[i + 1] = wanted > least && isFree(pieces[binding] as Piece, floor, s) ? (pieces[binding] as Piece).weight : 0;
    }
  }
  for (let i = n - 1; i > 0; i--) {
    const piece = pieces[i] as Piece;
    const after = nodes[i + 1] as number;
    const most = Math.sqrt(after * after + 2 * d * (piece.to - piece.from));
    if ((nodes[i] as number) <= most) continue;
    nodes[i] = most;
    slopes[i] = most > 0 ? ((slopes[i + 1] as number) * after) / most : 0;
  }
  return slopes;
}

export interface Motion {
  readonly time: number;
  readonly peak: number;
  /** Lengths of the first ramp, the steady middle and the last ramp, metres. */
  readonly rampIn: number;
  readonly cruise: number;
  readonly atLimit: boolean;
}

/** One piece: ramp from v0 to the peak, steady, ramp down to v1. The peak is the limit, or less where the piece is too short. */
export function pieceMotion(length: number, v0: number, v1: number, limit: number, car: CarLimits): Motion {
  const { acceleration: a, deceleration: d } = car;
  if (v0 > limit) {
    const peak = Math.max(limit, v1);
    const rampIn = Math.min(length, (v0 * v0 - peak * peak) / (2 * d));
    const rampOut = (peak * peak - v1 * v1) / (2 * d);
    const cruise = Math.max(0, length - rampIn - rampOut);
    return { time: (v0 - v1) / d + cruise / peak, peak, rampIn, cruise, atLimit: true };
  }
  const highest = Math.sqrt(Math.max(0, (2 * a * d * length + d * v0 * v0 + a * v1 * v1) / (a + d)));
  const atLimit = limit < highest;
  const peak = Math.max(atLimit ? limit : highest, v0, v1);
  const rampIn = (peak * peak - v0 * v0) / (2 * a);
  const rampOut = (peak * peak - v1 * v1) / (2 * d);
  const cruise = atLimit ? Math.max(0, length - rampIn - rampOut) : 0;
  return { time: (peak - v0) / a + (peak - v1) / d + (cruise > 0 ? cruise / peak : 0), peak, rampIn, cruise, atLimit };
}

export type Solution =
  | { readonly kind: 'solved'; readonly s: number; readonly evaluation: Evaluation; readonly iterations: number }
  /** Even flat out under every limit it takes `by` seconds too long. */
  | { readonly kind: 'short'; readonly s: number; readonly by: number; readonly evaluation: Evaluation }
  /** Even at the lowest speed it takes `by` seconds less than the time given. */
  | { readonly kind: 'long'; readonly s: number; readonly by: number; readonly evaluation: Evaluation };

const CLOSE_ENOUGH = 1e-7;
const MOST_ITERATIONS = 60;

/** Finds s such that the pieces take `time` seconds from speed v0. */
export function solve(pieces: readonly Piece[], car: CarLimits, v0: number, time: number): Solution {
  const evaluation = makeEvaluation(pieces.length);
  let highest = 0;
  let average = 0;
  let heaviest = 0;
  for (const piece of pieces) {
    highest = Math.max(highest, piece.top / piece.weight);
    heaviest = Math.max(heaviest, piece.weight);
    average += (piece.to - piece.from) / piece.weight;
  }
  const fastest = evaluate(pieces, car, v0, highest, evaluation).time;
  if (fastest > time + CLOSE_ENOUGH) return { kind: 'short', s: highest, by: fastest - time, evaluation };
  let low = car.floor > 0 ? car.floor / heaviest : 0;
  if (low > 0) {
    const slowest = evaluate(pieces, car, v0, low, evaluation).time;
    if (slowest < time - CLOSE_ENOUGH) return { kind: 'long', s: low, by: time - slowest, evaluation };
  }
  let high = highest;
  let s = Math.min(highest, Math.max(low, average / time));
  let iterations = 0;
  for (; iterations < MOST_ITERATIONS; iterations++) {
    const off = evaluate(pieces, car, v0, s, evaluation).time - time;
    if (Math.abs(off) < CLOSE_ENOUGH) break;
    if (off > 0) low = s;
    else high = s;
    const newton = evaluation.slope < 0 ? s - off / evaluation.slope : Number.NaN;
    s = newton > low && newton < high ? newton : newton >= high && off > 0 ? high : (low + high) / 2;
  }
  return { kind: 'solved', s, evaluation, iterations };
}
