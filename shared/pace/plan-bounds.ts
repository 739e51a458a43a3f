import type { PlanRequest } from '#shared/pace/plan.ts';
import { type LimitedStretch, planPieces } from '#shared/pace/plan-pieces.ts';
import { type CarLimits, type Evaluation, evaluate, makeEvaluation, type Piece, pieceAt, pieceMotion } from '#shared/pace/plan-solver.ts';
import { targetTimeAt } from '#shared/pace/schedule.ts';
import { type Metres, metres, type Seconds, seconds } from '#shared/units.ts';

/** What can still be reached: the fastest way to the finish from any state, and when zero is out of reach. */

/**
 * The fastest way home, prepared once for a course. Speed at each cut where nothing but limits and braking binds, and the time
 * from there to the end. From any state the car needs only to be followed until it joins that line.
 */
export interface FastestHome {
  readonly pieces: readonly Piece[];
  readonly car: CarLimits;
  /** Squared speeds at the cuts. */
  readonly squares: Float64Array;
  readonly times: Float64Array;
  /** For the profile of a held speed: filled by every search. */
  readonly held: Evaluation;
}

export function makeFastestHome(pieces: readonly Piece[], car: CarLimits): FastestHome {
  const n = pieces.length;
  const flat = pieces.map((piece) => ({ ...piece, weight: 1, floor: 0 }));
  const home: FastestHome = {
    pieces: flat,
    car,
    squares: new Float64Array(n + 1),
    times: new Float64Array(n + 1),
    held: makeEvaluation(n),
  };
  const topOf = (i: number): number => flat[i]?.top ?? Number.POSITIVE_INFINITY;
  for (let i = n; i >= 0; i--) {
    const top = Math.min(topOf(i), topOf(i - 1));
    const braking = i === n ? Number.POSITIVE_INFINITY : (home.squares[i + 1] as number) + 2 * car.deceleration * lengthOf(flat, i);
    home.squares[i] = n === 0 ? 0 : Math.min(top * top, braking);
    home.times[i] = i === n ? 0 : timeHome(home, i, (flat[i] as Piece).from, Math.sqrt(home.squares[i] as number));
  }
  return home;
}

const lengthOf = (pieces: readonly Piece[], i: number): number => (pieces[i] as Piece).to - (pieces[i] as Piece).from;

/** The least seconds to the end from x in piece `first` at speed v, under every limit. A few pieces' work, then the line is joined. */
export function timeHome({ pieces, car, squares, times }: FastestHome, first: number, x: number, v: number): number {
  const { acceleration: a, deceleration: d } = car;
  let total = 0;
  let square = v * v;
  let begin = x;
  for (let i = first; i < pieces.length; i++) {
    const { to, top } = pieces[i] as Piece;
    const length = to - begin;
    const most = squares[i + 1] as number;
    const next = Math.max(square - 2 * d * length, Math.min(most, square + 2 * a * length));
    total += pieceMotion(length, Math.sqrt(square), Math.sqrt(next), top, car).time;
    if (next === most) return total + (times[i + 1] as number);
    square = next;
    begin = to;
  }
  return total;
}

/** A place, and the seconds until it is reached while the present speed is held. */
export interface NoReturn {
  readonly x: number;
  readonly in: number;
}

/**
 * How far speed v may be held (within every limit) from x before `left` seconds are too few for the rest. Null when they already
 * are; the finish when that never comes. The margin only falls along the way, so halving finds it.
 */
export function findNoReturn(home: FastestHome, x: number, v: number, left: number): NoReturn | null {
  const { pieces, car, held } = home;
  const first = pieceAt(pieces, x);
  if (timeHome(home, first, x, v) > left) return null;
  const { nodes, limits } = evaluate(pieces, car, { first, x, v }, v, held);
  let begin = x;
  let gone = 0;
  for (let i = first; i < pieces.length; i++) {
    const piece = pieces[i] as Piece;
    const [v0, v1] = [nodes[i] as number, nodes[i + 1] as number];
    const { time } = pieceMotion(piece.to - begin, v0, v1, limits[i] as number, car);
    if (gone + time + timeHome(home, i + 1, piece.to, v1) > left) {
      const within = halve(home, i, begin, v0, v1, limits[i] as number, left - gone);
      return { x: within.x, in: gone + within.in };
    }
    gone += time;
    begin = piece.to;
  }
  return { x: begin, in: gone };
}

/** 40 halvings bring the longest course below a millimetre. */
const HALVINGS = 40;

function halve(home: FastestHome, i: number, begin: number, v0: number, v1: number, limit: number, left: number): NoReturn {
  const { car } = home;
  const { peak, rampIn, cruise } = pieceMotion((home.pieces[i] as Piece).to - begin, v0, v1, limit, car);
  const rate = v0 > peak ? -car.deceleration : car.acceleration;
  const speedAt = (way: number): number => {
    if (way < rampIn) return Math.sqrt(v0 * v0 + 2 * rate * way);
    return way < rampIn + cruise ? peak : Math.sqrt(Math.max(0, peak * peak - 2 * car.deceleration * (way - rampIn - cruise)));
  };
  const timeAt = (way: number, v: number): number => {
    if (way < rampIn) return way > 0 ? (2 * way) / (v0 + v) : 0;
    const ramp = Math.abs(peak - v0) / Math.abs(rate);
    const steady = Math.min(cruise, way - rampIn);
    return ramp + (steady > 0 ? steady / peak : 0) + (peak - v) / car.deceleration;
  };
  let [low, high] = [0, (home.pieces[i] as Piece).to - begin];
  for (let k = 0; k < HALVINGS; k++) {
    const way = (low + high) / 2;
    const v = speedAt(way);
    if (timeAt(way, v) + timeHome(home, i, begin + way, v) > left) high = way;
    else low = way;
  }
  return { x: begin + low, in: timeAt(low, speedAt(low)) };
}

const homeFrom = (request: PlanRequest): FastestHome => makeFastestHome(planPieces({ ...request, mode: 'finish', via: [] }), request);

/** The least time from the request's state to the finish, under every limit, seconds. */
export function fastestTime(request: PlanRequest): Seconds {
  return seconds(timeHome(homeFrom(request), 0, request.from.x, request.from.v));
}

/**
 * Point of no return: how far the present speed may be held (within every limit) before a finish on zero is out of reach.
 * Null when it already is; the finish when it never comes.
 */
export function pointOfNoReturn(request: PlanRequest): Metres | null {
  const { schedule, from } = request;
  if (from.x >= schedule.finish) return schedule.finish;
  const found = findNoReturn(homeFrom(request), from.x, from.v, schedule.targetTime - from.t);
  return found === null ? null : metres(found.x);
}

/** Time errors at x (speed v) from which a finish on zero is still possible. `earliest` is null where no floor binds. */
export function errorBounds(request: Omit<PlanRequest, 'from'>, x: number, v: number): { latest: Seconds; earliest: Seconds | null } {
  const { schedule } = request;
  const from = { ...request, from: { x, v, t: 0 } };
  const left = schedule.targetTime - targetTimeAt(schedule, x);
  const pieces = planPieces({ ...from, mode: 'finish', via: [] });
  const latest = seconds(left - fastestTime(from));
  const floor = request.floor ?? 0;
  if (pieces.length === 0 || !(floor > 0) || pieces.some((piece) => piece.floor === 0)) return { latest, earliest: null };
  const slowest = evaluate(pieces, request, { first: 0, x, v }, floor, makeEvaluation(pieces.length)).time;
  return { latest, earliest: seconds(left - slowest) };
}

/** Seconds that must be in hand where a zone begins, at its limit: what the rest of the course cannot repay. 0 where it can. */
export function neededInHand(request: Omit<PlanRequest, 'from'>, zone: LimitedStretch): Seconds {
  return seconds(Math.max(0, -errorBounds(request, zone.from, Math.min(zone.limit, request.top ?? zone.limit)).latest));
}
