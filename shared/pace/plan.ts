import { type LimitedStretch, planPieces, type Waypoint } from '#shared/pace/plan-pieces.ts';
import { type PlannedStretch, Profile } from '#shared/pace/plan-profile.ts';
import { makeEvaluation, type Piece, pieceAt, solve } from '#shared/pace/plan-solver.ts';
import { type Schedule, targetTimeAt } from '#shared/pace/schedule.ts';
import { type MetresPerSecond, metresPerSecond, type Seconds, seconds } from '#shared/units.ts';

/** The pace plan: the profile that finishes on zero, from any present state. SI; planned time error positive = late. */

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
  /** Time errors wanted on the way (a reserve in hand, zones left on zero); as near as the car can. */
  readonly via?: readonly Waypoint[];
}

export interface Plan {
  readonly outcome: 'on zero' | 'cannot be made up' | 'cannot be given back';
  /** Seconds by which it fails: how late (made up) or early (given back) the finish would be. 0 on zero. */
  readonly by: Seconds;
  /** The unknown: cruise speed in m/s (mode finish), or ratio to the averages or to the parts between waypoints. */
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

export const OUTCOMES = { solved: 'on zero', short: 'cannot be made up', long: 'cannot be given back' } as const;

/**
 * Solves from the present state to a finish on zero. Total: an impossible wish gives the nearest possible profile and `by`.
 * `pieces` may be given where they were cut before, from the present state or from any place before it.
 */
export function makePlan(request: PlanRequest, pieces: readonly Piece[] = planPieces(request)): Plan {
  const { schedule, from } = request;
  const first = pieceAt(pieces, from.x);
  if (first === pieces.length) return finishedPlan(request);
  const standing = { first, x: from.x, v: from.v };
  const evaluation = makeEvaluation(pieces.length);
  const { kind, by, s, iterations } = solve(pieces, request, standing, schedule.targetTime - from.t, evaluation);
  const profile = new Profile(pieces, request, standing, from.t, evaluation);
  return {
    outcome: OUTCOMES[kind],
    by: seconds(by),
    s,
    iterations,
    cannotBrake: profile.cannotBrake,
    timeAt: (x) => seconds(profile.timeAt(x)),
    plannedErrorAt: (x) => seconds(profile.timeAt(x) - targetTimeAt(schedule, x)),
    speedAt: (x) => metresPerSecond(profile.speedAt(x)),
    holdAt: (x) => profile.stretchAt(x).hold,
    stretchAt: (x) => profile.stretchAt(x),
  };
}

/** At or past the finish nothing is left to plan. */
function finishedPlan({ schedule, from }: PlanRequest): Plan {
  const v = metresPerSecond(from.v);
  return {
    outcome: 'on zero',
    by: seconds(0),
    s: v,
    iterations: 0,
    cannotBrake: false,
    timeAt: () => seconds(from.t),
    plannedErrorAt: (x) => seconds(from.t - targetTimeAt(schedule, x)),
    speedAt: () => v,
    holdAt: () => v,
    stretchAt: () => ({ to: schedule.finish, top: v, floor: 0, hold: v, brakingFrom: null }),
  };
}
