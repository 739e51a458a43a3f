import { type CarLimits, type Evaluation, evaluate, makeEvaluation, type Piece, pieceMotion, solve } from '#shared/pace/plan-solver.ts';
import { type Schedule, targetTimeAt } from '#shared/pace/schedule.ts';
import { type Metres, type MetresPerSecond, metres, metresPerSecond, type Seconds, seconds } from '#shared/units.ts';

/** The pace plan: the profile that finishes on zero, from any present state. SI; planned time error positive = late. */

/** A stretch with a highest speed, already in SI. */
export interface LimitedStretch {
  readonly from: number;
  readonly to: number;
  readonly limit: number;
}

export interface PlanRequest {
  readonly schedule: Schedule;
  readonly zones: readonly LimitedStretch[];
  /** Highest speed to plan with (cap less its margin), m/s; null for none. */
  readonly top: number | null;
  /** Lowest speed of the class, m/s; null for none. */
  readonly floor: number | null;
  readonly acceleration: number;
  readonly deceleration: number;
  /** Present state: official distance (negative while staged behind the line), speed, seconds since the time started. */
  readonly from: { readonly x: number; readonly v: number; readonly t: number };
  /** finish: one even cruise, the lowest peak. sections: the same ratio to every average, so that each place is near zero. */
  readonly mode: 'finish' | 'sections';
}

/** Without a class cap the solver still needs an end of the scale; no road car passes it. */
const TOP_WITHOUT_CAP = 120;

export interface Plan {
  readonly outcome: 'on zero' | 'cannot be made up' | 'cannot be given back';
  /** Seconds by which it fails: how late (made up) or early (given back) the finish would be. 0 on zero. */
  readonly by: Seconds;
  /** The unknown: cruise speed in m/s (mode finish), or ratio to the averages (mode sections). */
  readonly s: number;
  readonly iterations: number;
  /** True where the car is too fast for a limit ahead and no braking helps. */
  readonly cannotBrake: boolean;
  /** Planned seconds since the time started, at official distance x. */
  timeAt(x: number): Seconds;
  /** Planned time error at x: positive = late, negative = in hand. */
  plannedErrorAt(x: number): Seconds;
  /** Planned speed at x. */
  speedAt(x: number): MetresPerSecond;
  /** The steady speed to hold at x once ramps are done. */
  holdAt(x: number): MetresPerSecond;
  /** The stretch under one limit that holds x. */
  stretchAt(x: number): PlannedStretch;
}

/** A stretch under one limit: a zone, or the road between zones; a section's edge cuts too where averages are followed. */
export interface PlannedStretch {
  readonly to: Metres;
  /** Highest speed here by zone and cap, m/s. */
  readonly top: MetresPerSecond;
  /** The steady speed to hold here once ramps are done. */
  readonly hold: MetresPerSecond;
  /** Where braking for what follows begins; null where nothing slower follows. */
  readonly brakingFrom: Metres | null;
}

/** Cuts [x0, finish] at zone and section edges. Overlapping zones: the lowest limit holds. */
export function planPieces(request: PlanRequest): readonly Piece[] {
  const { schedule, zones, from, mode } = request;
  const top = request.top ?? TOP_WITHOUT_CAP;
  const end: number = schedule.finish;
  const cuts = new Set<number>([from.x, end]);
  const add = (x: number): void => {
    if (x > from.x && x < end) cuts.add(x);
  };
  for (const zone of zones) {
    add(zone.from);
    add(zone.to);
  }
  if (mode === 'sections') for (const section of schedule.sections) add(section.from);
  const edges = [...cuts].sort((a, b) => a - b);
  const pieces: Piece[] = [];
  for (let i = 1; i < edges.length; i++) {
    const [begin, stop] = [edges[i - 1] as number, edges[i] as number];
    const middle = (begin + stop) / 2;
    let limit = top;
    for (const zone of zones) if (middle > zone.from && middle < zone.to) limit = Math.min(limit, zone.limit);
    pieces.push({ from: begin, to: stop, top: limit, weight: mode === 'finish' ? 1 : weightAt(schedule, middle) });
  }
  return pieces;
}

function weightAt(schedule: Schedule, x: number): number {
  let weight = (schedule.sections[0] as Schedule['sections'][number]).speed as number;
  for (const section of schedule.sections) if (x > section.from) weight = section.speed;
  return weight;
}

const carOf = (request: PlanRequest): CarLimits => ({
  acceleration: request.acceleration,
  deceleration: request.deceleration,
  floor: Math.min(request.floor ?? 0, request.top ?? TOP_WITHOUT_CAP),
});

/** What is left of pieces from x on: passed ones dropped, the first cut. Same as cutting the course anew, and much cheaper. */
export function piecesFrom(pieces: readonly Piece[], x: number): readonly Piece[] {
  const first = pieces.findIndex((piece) => piece.to > x);
  if (first < 0) return [];
  const piece = pieces[first] as Piece;
  return piece.from >= x ? pieces.slice(first) : [{ ...piece, from: x }, ...pieces.slice(first + 1)];
}

/**
 * Solves from the present state to a finish on zero. Total: an impossible wish gives the nearest possible profile and `by`.
 * `pieces` may be given where they were cut before.
 */
export function makePlan(request: PlanRequest, pieces: readonly Piece[] = planPieces(request)): Plan {
  const { schedule, from } = request;
  const car = carOf(request);
  if (pieces.length === 0) return finishedPlan(request);
  const solution = solve(pieces, car, from.v, schedule.targetTime - from.t);
  const profile = profileOf(pieces, car, from, solution.evaluation);
  return {
    outcome: OUTCOMES[solution.kind],
    by: seconds(solution.kind === 'solved' ? 0 : solution.by),
    s: solution.s,
    iterations: solution.kind === 'solved' ? solution.iterations : 0,
    cannotBrake: profile.cannotBrake,
    timeAt(x) {
      return seconds(profile.timeAt(x));
    },
    plannedErrorAt(x) {
      return seconds(profile.timeAt(x) - targetTimeAt(schedule, x));
    },
    speedAt(x) {
      return metresPerSecond(profile.speedAt(x));
    },
    holdAt(x) {
      return profile.stretchAt(x).hold;
    },
    stretchAt(x) {
      return profile.stretchAt(x);
    },
  };
}

const OUTCOMES = { solved: 'on zero', short: 'cannot be made up', long: 'cannot be given back' } as const;

/** At or past the finish nothing is left to plan. */
function finishedPlan({ schedule, from }: PlanRequest): Plan {
  const error = (x: number): Seconds => seconds(from.t - targetTimeAt(schedule, x));
  return {
    outcome: 'on zero',
    by: seconds(0),
    s: from.v,
    iterations: 0,
    cannotBrake: false,
    timeAt: () => seconds(from.t),
    plannedErrorAt: error,
    speedAt: () => metresPerSecond(from.v),
    holdAt: () => metresPerSecond(from.v),
    stretchAt: () => ({ to: schedule.finish, top: metresPerSecond(from.v), hold: metresPerSecond(from.v), brakingFrom: null }),
  };
}

interface Phase {
  readonly x: number;
  readonly t: number;
  readonly v: number;
  /** m/s²: positive speeding up, negative braking. */
  readonly a: number;
  readonly stretch: PlannedStretch;
}

interface Profile {
  readonly cannotBrake: boolean;
  timeAt(x: number): number;
  speedAt(x: number): number;
  stretchAt(x: number): PlannedStretch;
}

/** The phases of one piece, in order: ramp, steady, ramp down. Lengths of zero are left out. */
function phasesOf(piece: Piece, v0: number, v1: number, limit: number, car: CarLimits, begins: number): { phases: Phase[]; ends: number } {
  const motion = pieceMotion(piece.to - piece.from, v0, v1, limit, car);
  const cruiseX = piece.from + motion.rampIn;
  const brakeX = cruiseX + motion.cruise;
  const stretch: PlannedStretch = {
    to: metres(piece.to),
    top: metresPerSecond(piece.top),
    hold: metresPerSecond(limit),
    brakingFrom: motion.peak > v1 + 1e-9 ? metres(brakeX) : null,
  };
  const ramp = v0 > motion.peak ? -car.deceleration : car.acceleration;
  const cruiseT = begins + Math.abs(motion.peak - v0) / Math.abs(ramp);
  const brakeT = cruiseT + (motion.cruise > 0 ? motion.cruise / motion.peak : 0);
  const phases: Phase[] = [];
  if (motion.rampIn > 0) phases.push({ x: piece.from, t: begins, v: v0, a: ramp, stretch });
  if (motion.cruise > 0) phases.push({ x: cruiseX, t: cruiseT, v: motion.peak, a: 0, stretch });
  if (piece.to - brakeX > 0) phases.push({ x: brakeX, t: brakeT, v: motion.peak, a: -car.deceleration, stretch });
  return { phases, ends: brakeT + (motion.peak - v1) / car.deceleration };
}

function profileOf(pieces: readonly Piece[], car: CarLimits, from: PlanRequest['from'], { nodes, limits }: Evaluation): Profile {
  const phases: Phase[] = [];
  let cannotBrake = false;
  let t = from.t;
  for (let i = 0; i < pieces.length; i++) {
    const piece = pieces[i] as Piece;
    if ((nodes[i] as number) > piece.top + 1e-9) cannotBrake = true;
    const part = phasesOf(piece, nodes[i] as number, nodes[i + 1] as number, limits[i] as number, car, t);
    phases.push(...part.phases);
    t = part.ends;
  }
  const last = phases[phases.length - 1] as Phase;
  const finish: Phase = { x: last.stretch.to, t, v: nodes[pieces.length] as number, a: 0, stretch: last.stretch };
  return new SolvedProfile(cannotBrake, phases, finish);
}

/** A class, not closures: a plan is made every second of a run, and of every run that is replayed. */
class SolvedProfile implements Profile {
  constructor(
    readonly cannotBrake: boolean,
    private readonly phases: readonly Phase[],
    private readonly finish: Phase,
  ) {}

  private phaseAt(x: number): Phase {
    return x >= this.finish.x ? this.finish : findPhase(this.phases, x);
  }

  speedAt(x: number): number {
    return speedIn(this.phaseAt(x), x);
  }

  timeAt(x: number): number {
    const phase = this.phaseAt(x);
    const way = Math.max(0, x - phase.x);
    if (way === 0 || phase === this.finish) return phase.t;
    // 2·way/(v0+v1) holds for steady and uniformly changing speed alike, and does not cancel near a = 0
    return phase.t + (2 * way) / (phase.v + speedIn(phase, x));
  }

  stretchAt(x: number): PlannedStretch {
    return this.phaseAt(x).stretch;
  }
}

const speedIn = (phase: Phase, x: number): number => Math.sqrt(Math.max(0, phase.v * phase.v + 2 * phase.a * Math.max(0, x - phase.x)));

function findPhase(phases: readonly Phase[], x: number): Phase {
  let [low, high] = [0, phases.length - 1];
  while (low < high) {
    const middle = (low + high + 1) >> 1;
    if ((phases[middle] as Phase).x <= x) low = middle;
    else high = middle - 1;
  }
  return phases[low] as Phase;
}

/** The least time from the request's state to the finish, under every limit, seconds. */
export function fastestTime(request: PlanRequest): Seconds {
  const pieces = planPieces({ ...request, mode: 'finish' });
  if (pieces.length === 0) return seconds(0);
  return seconds(evaluate(pieces, carOf(request), request.from.v, request.top ?? TOP_WITHOUT_CAP, makeEvaluation(pieces.length)).time);
}

/**
 * Point of no return: how far the present speed may be held (within every limit) before a finish on zero is out of reach.
 * Null when it already is; the finish when it never comes.
 */
export function pointOfNoReturn(request: PlanRequest): Metres | null {
  const { schedule, from } = request;
  const held = planPieces({ ...request, mode: 'finish' });
  if (held.length === 0) return metres(schedule.finish);
  const car = { ...carOf(request), floor: 0 };
  const evaluation = evaluate(held, car, from.v, from.v, makeEvaluation(held.length));
  const profile = profileOf(held, car, from, evaluation);
  const late = (x: number): number => {
    const state = { x, v: profile.speedAt(x), t: profile.timeAt(x) };
    return state.t + fastestTime({ ...request, from: state }) - schedule.targetTime;
  };
  if (late(from.x) > 0) return null;
  if (late(schedule.finish) <= 0) return schedule.finish;
  let [low, high] = [from.x, schedule.finish as number];
  // 60 halvings of 150 km reach the last bit of a float64
  for (let i = 0; i < 60 && high - low > 1e-6; i++) {
    const middle = (low + high) / 2;
    if (late(middle) > 0) high = middle;
    else low = middle;
  }
  return metres(low);
}
