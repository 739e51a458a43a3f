import type { LimitSetV1, LineMovedV1, ReleaseSetV1, StagedSetV1, TargetSetV1 } from '#shared/journal/observation.ts';
import { buildCourseModel, type Changes } from '#shared/pace/course-model.ts';
import type { RunState } from '#shared/pace/run-state.ts';

/** What is typed in on the grid (or by the roadside): a new release, target time, limit, line, place on the grid. */
export type GridChange = ReleaseSetV1 | TargetSetV1 | StagedSetV1 | LimitSetV1 | LineMovedV1;

function changed(before: Changes, o: GridChange): Changes {
  const next = { ...before, version: before.version + 1 };
  switch (o.type) {
    case 'release-set.v1':
      return { ...next, releaseMs: o.releaseMs };
    case 'target-set.v1':
      return { ...next, targetTimeMs: o.targetTimeMs };
    case 'staged-set.v1':
      return { ...next, stagedBehindM: o.behindM };
    case 'limit-set.v1': {
      const limit = { id: o.zone, from: o.from, to: o.to, limit: o.limit };
      return { ...next, limits: [...before.limits.filter((z) => z.id !== o.zone), limit] };
    }
    case 'line-moved.v1':
      return { ...next, lines: { ...before.lines, [o.checkpoint]: o.to } };
  }
}

/** Applies a change; false, and nothing changed, where it would make no course (a finish before the start, no readable figure). */
export function changeCourse(state: RunState, o: GridChange): boolean {
  const next = changed(state.changes, o);
  try {
    buildCourseModel(state.pack, next);
  } catch (error) {
    if (error instanceof RangeError) return false;
    throw error;
  }
  state.changes = next;
  return true;
}
