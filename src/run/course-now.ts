import type { RunState } from '#shared/pace/run.ts';
import { modelOf } from '#shared/pace/run-state.ts';
import type { CourseNow } from './run-session-contract.ts';

const PLAN_POINTS = 240;

/** The course as the engine has it now, for drawing. Built again only when something was typed in. */
export function createCourseNow(state: () => RunState): () => CourseNow {
  let built: { readonly of: RunState; readonly version: number; readonly course: CourseNow } | null = null;
  return () => {
    const now = state();
    if (built === null || built.of !== now || built.version !== now.changes.version) {
      built = { of: now, version: now.changes.version, course: courseOf(now) };
    }
    return built.course;
  };
}

function courseOf(state: RunState): CourseNow {
  const model = modelOf(state);
  const { releaseMs, targetTimeMs, stagedBehindM } = state.changes;
  const start = state.pack.courseBook.checkpoints.find(({ duty }) => duty === 'start');
  const lengthM = model.finish - model.start;
  const places = model.places.map(({ checkpoint, d }) => ({ checkpoint, atM: d }));
  return {
    lengthM,
    releaseMs,
    targetTimeMs,
    stagedBehindM,
    places: start === undefined ? places : [{ checkpoint: start, atM: model.start }, ...places],
    zones: model.zones.map(({ id, name, from, to, limit }) => ({ id, name, fromM: from, toM: to, limit })),
    plan: Array.from({ length: PLAN_POINTS + 1 }, (_, i) => {
      const d = model.start + (lengthM * i) / PLAN_POINTS;
      return { d, errorS: model.plan.plannedErrorAt(d) };
    }),
  };
}
