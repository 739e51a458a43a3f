import { isNearFinish } from '#shared/pace/band.ts';
import { findNoReturn, timeHome } from '#shared/pace/plan-bounds.ts';
import type { LivePlanner } from '#shared/pace/plan-live.ts';
import type { PlanMemory } from '#shared/pace/plan-memory.ts';
import { TOP_WITHOUT_CAP } from '#shared/pace/plan-pieces.ts';
import { type Piece, pieceAt } from '#shared/pace/plan-solver.ts';
import type { RunState } from '#shared/pace/run-state.ts';
import { shownStep } from '#shared/pace/shown-speed.ts';
import type { Situation } from '#shared/pace/situation.ts';

/** Every ten seconds under way: does the plan in force still ask for what the hold speed asks, and is zero about to slip away? */

/** Pace is judged over this long: no driver keeps to a step of the shown speed from one second to the next. */
const PACE_US = 10_000_000;
/** A plan stays in force at least this long. */
const IN_FORCE_US = 60_000_000;
/** The crew is told of a place this near, seconds. */
const NEAR_S = 60;
/** Holding on must cost more than this at the finish to be worth a word, seconds. */
const WORTH_S = 0.5;
/** Two paces and the present speed within this of each other: neither speeding up nor slowing down, m/s. */
const STEADY = 1.5;

/** Part of the fold. */
export function reviewPlan(state: RunState, s: Situation): void {
  const { plan } = state.shown;
  const { pace } = plan;
  if (plan.noReturn !== null && s.at >= plan.noReturn.at) plan.noReturn = null;
  const since = s.at - pace.at;
  if (since < PACE_US) return;
  const v = ((s.distance - pace.x) * 1e6) / since;
  // a longer one had a stop in it
  if (since < 2 * PACE_US) takePace(state, s, v);
  const steady = s.speed !== null && Math.abs(v - pace.v) < STEADY && Math.abs(v - s.speed) < STEADY;
  plan.noReturn = steady ? noReturnNear(s, v) : null;
  pace.at = s.at;
  pace.x = s.distance;
  pace.v = v;
}

/**
 * The car has kept the shown speed, and still the band is not level: time lost or won in a ramp, or a distance put right. The
 * hold speed spreads that over the rest of the course, so the plan is made anew from here, or the band would ask for more.
 */
function takePace({ shown, pack }: RunState, s: Situation, v: number): void {
  const { plan, hold } = shown;
  if (shown.bandLevel || hold === null || s.elapsed === null || s.speed === null || isNearFinish(s)) return;
  if (plan.origin !== null && s.at - plan.origin.at < IN_FORCE_US) return;
  if (Math.abs(v - hold.speed) > shownStep(pack.settings.speedUnit)) return;
  plan.origin = { at: s.at, x: s.distance, v: Math.max(0, s.speed), t: s.elapsed, version: s.model.version };
}

function noReturnNear({ model, at, distance, elapsed }: Situation, speed: number): PlanMemory['noReturn'] {
  if (elapsed === null) return null;
  const { home, targetTime }: LivePlanner = model.live;
  const first = pieceAt(home.pieces, distance);
  const top = model.top ?? TOP_WITHOUT_CAP;
  // in a zone nobody means to hold its speed for the rest of the course
  if (first === home.pieces.length || (home.pieces[first] as Piece).top < top) return null;
  const left = targetTime - elapsed;
  const margin = left - timeHome(home, first, distance, speed);
  // a second at this speed eats no more of the margin than this
  if (margin < 0 || margin > NEAR_S * (1 - speed / top)) return null;
  const found = findNoReturn(home, distance, speed, left);
  if (found === null || found.in > NEAR_S || home.held.time - left < WORTH_S) return null;
  return { x: found.x, at: at + Math.round(found.in * 1e6) };
}
