import type { Pack } from '#shared/course/pack.ts';
import { buildCourseModel, makeChanges } from '#shared/pace/course-model.ts';
import { targetTimeAt } from '#shared/pace/schedule.ts';
import type { ShownError } from './follower.ts';

/** What a drive showed against what was true. Milliseconds, positive = shown too late. */
export interface Outcome {
  /** Displayed less true time error when the car truly passed the finish line, and its stated uncertainty. */
  readonly finishMs: number;
  readonly sigmaMs: number;
  /** True time error there: how the drive ended. */
  readonly resultMs: number;
  /** Sums of squares of the displayed less the true time error over the course, and over its last tenth. */
  readonly course: SumOfSquares;
  readonly lastTenth: SumOfSquares;
}

export interface SumOfSquares {
  readonly sum: number;
  readonly n: number;
}

export interface Truth {
  /** The car is at official distance `x` and is shown that. */
  look(at: number, x: number, shown: ShownError | null): void;
  finish(at: number, shown: ShownError | null): Outcome;
}

export function makeTruth(pack: Pack, releaseAt: number): Truth {
  const { schedule, finish } = buildCourseModel(pack, makeChanges(pack));
  const [course, lastTenth] = [
    { sum: 0, n: 0 },
    { sum: 0, n: 0 },
  ];
  return {
    look(at, x, shown) {
      if (shown === null || x < 0) return;
      const off = (shown.timeError - ((at - releaseAt) / 1e6 - targetTimeAt(schedule, x))) * 1000;
      course.sum += off * off;
      course.n++;
      if (x < 0.9 * finish) return;
      lastTenth.sum += off * off;
      lastTenth.n++;
    },
    finish(at, shown) {
      if (shown === null) throw new Error('nothing was shown at the finish');
      const result = (at - releaseAt) / 1e6 - schedule.targetTime;
      return { finishMs: (shown.timeError - result) * 1000, sigmaMs: shown.sigma * 1000, resultMs: result * 1000, course, lastTenth };
    },
  };
}
