import { courseLineOf } from '#shared/pace/course-line.ts';
import type { Surveyed } from '#shared/pace/projected-fixes.ts';
import { modelOf, nominalMetres, type RunState } from '#shared/pace/run-state.ts';
import { type Counts, rawAt } from '#shared/pace/track.ts';

/** What a position needs to become a distance on the course; null where the book carries no surveyed line. */
export function surveyedOf(state: RunState): Surveyed | null {
  const line = courseLineOf(state.pack.courseBook.geometry);
  if (line === null) return null;
  return { line, aerialM: state.pack.car.behindNose?.aerialM ?? 0, expected: expectedOf(state) };
}

/**
 * Where on the line to look: from the last place found on it (else from the start) by nominal metres. Taps have no say: a tap that
 * is taken back must leave no trace in what was measured.
 */
function expectedOf(state: RunState): number {
  const { derived, odometer, changes } = state;
  const { recent } = odometer.secondLook.projected;
  const found = recent[recent.length - 1];
  const [first] = derived.anchors;
  const since = (raw: Counts | null): number => (raw === null ? 0 : (odometer.w - raw.w) * nominalMetres(state) + (odometer.g - raw.g));
  if (found !== undefined) return found.d + since(rawAt(odometer.track, found.at));
  return modelOf(state).start - Math.max(0, changes.stagedBehindM) + (first === undefined ? 0 : since(first));
}
