import { courseLineOf } from '#shared/pace/course-line.ts';
import { distanceOf } from '#shared/pace/distance.ts';
import type { Surveyed } from '#shared/pace/projected-fixes.ts';
import { modelOf, type RunState } from '#shared/pace/run-state.ts';
import { knotAt } from '#shared/pace/track.ts';

/** What a position needs to become a distance on the course; null where the book carries no surveyed line. */
export function surveyedOf(state: RunState): Surveyed | null {
  const { pack, derived, odometer, changes } = state;
  const line = courseLineOf(pack.courseBook.geometry);
  if (line === null) return null;
  const anchor = derived.anchors[derived.anchors.length - 1];
  const { trace } = odometer.track;
  const start = modelOf(state).start - Math.max(0, changes.stagedBehindM);
  const expected = anchor === undefined ? start : distanceOf(anchor, knotAt(trace, trace.at.length - 1));
  return { line, aerialM: pack.car.behindNose?.aerialM ?? 0, expected };
}
