import type { CourseModel } from '#shared/pace/course-model.ts';
import { makePlan, type Plan } from '#shared/pace/plan.ts';
import type { RunState } from '#shared/pace/run-state.ts';

/** What a run remembers of its planning: plain data, part of the state, written by the advice once a second. */
export interface PlanMemory {
  /** Where the plan in force begins; null while it is the one from the grid. */
  origin: PlanOrigin | null;
  /** The unknown of the last live plan: where the next begins to search. */
  s: number | null;
  /** Where the present stretch of ten seconds began, and the mean speed over the one before, m/s. */
  pace: { at: number; x: number; v: number };
  /** Official distance and instant after which zero is out of reach, while that is near; else null. */
  noReturn: { x: number; at: number } | null;
}

export interface PlanOrigin {
  readonly at: number;
  readonly x: number;
  readonly v: number;
  readonly t: number;
  /** Of the course it was made for. */
  readonly version: number;
}

export const makePlanMemory = (): PlanMemory => ({ origin: null, s: null, pace: { at: 0, x: 0, v: 0 }, noReturn: null });

/** Built from origin and course, and never stored. */
const plans = new WeakMap<PlanOrigin, Plan>();

/**
 * The plan that the band and the planned figures compare with: from the grid, or from where it was last made anew. A course
 * changed on the grid begins with its own.
 */
export function planInForce(state: RunState, model: CourseModel): Plan {
  const { origin } = state.shown.plan;
  if (origin === null || origin.version !== model.version) return model.plan;
  let plan = plans.get(origin);
  if (plan === undefined) {
    plan = makePlan({ ...model.request, from: origin }, model.live.pieces);
    plans.set(origin, plan);
  }
  return plan;
}
