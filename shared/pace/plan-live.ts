import { OUTCOMES, type Plan, type PlanRequest } from '#shared/pace/plan.ts';
import { type FastestHome, makeFastestHome } from '#shared/pace/plan-bounds.ts';
import { type PlannedStretch, stretchOf } from '#shared/pace/plan-profile.ts';
import { type CarLimits, type Evaluation, makeEvaluation, type Piece, pieceAt, solve } from '#shared/pace/plan-solver.ts';

/** The plan made anew every second: only what that second needs of it, on arrays made once for the course. */
export interface LivePlanner {
  readonly pieces: readonly Piece[];
  readonly car: CarLimits;
  readonly targetTime: number;
  readonly home: FastestHome;
  readonly evaluation: Evaluation;
}

export interface LivePlan {
  readonly outcome: Plan['outcome'];
  readonly by: number;
  readonly s: number;
  /** The stretch that holds the car, and the one behind it; null for the last. */
  readonly here: PlannedStretch;
  readonly next: PlannedStretch | null;
}

/** @param pieces The course, cut from the place on the grid or before. */
export function makeLivePlanner(request: Omit<PlanRequest, 'from'>, pieces: readonly Piece[]): LivePlanner {
  const { schedule, acceleration, deceleration } = request;
  const car = { acceleration, deceleration };
  const home = makeFastestHome(pieces, car);
  return { pieces, car, targetTime: schedule.targetTime, home, evaluation: makeEvaluation(pieces.length) };
}

/**
 * Solves from x at speed v, t seconds after the time started, to a finish on zero.
 * @param near The s of the plan before: part of the run's state, so that a run taken up again gives the same figures.
 * @returns null at or past the finish.
 */
export function planLive(planner: LivePlanner, x: number, v: number, t: number, near: number | null): LivePlan | null {
  const { pieces, car, evaluation } = planner;
  const first = pieceAt(pieces, x);
  if (first === pieces.length) return null;
  const { kind, by, s } = solve(pieces, car, { first, x, v }, planner.targetTime - t, evaluation, near);
  const next = first + 1 < pieces.length ? stretchIn(planner, first + 1, (pieces[first + 1] as Piece).from) : null;
  return { outcome: OUTCOMES[kind], by, s, here: stretchIn(planner, first, x), next };
}

function stretchIn({ pieces, car, evaluation }: LivePlanner, i: number, begin: number): PlannedStretch {
  const { nodes, limits } = evaluation;
  return stretchOf(pieces[i] as Piece, begin, nodes[i] as number, nodes[i + 1] as number, limits[i] as number, car);
}
