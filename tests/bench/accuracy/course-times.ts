import type { Checkpoint } from '#shared/course/course-book.ts';
import type { Pack } from '#shared/course/pack.ts';
import { buildCourseModel, type CourseModel, makeChanges } from '#shared/pace/course-model.ts';
import { targetSpeedAt, targetTimeAt } from '#shared/pace/schedule.ts';
import type { ShownError } from './follower.ts';

/** Schedule and plan of a pack, for what follows a drive without the engine. */
export interface CourseTimes {
  readonly model: CourseModel;
  /** Time error and plan at an official distance, `t` seconds after the release. */
  errorAt(distance: number, t: number): Omit<ShownError, 'sigma'>;
  /** Official distance of a checkpoint that is touched, and its duty. */
  placeOf(checkpoint: string | null): { readonly d: number; readonly duty: Checkpoint['duty'] } | null;
}

export function courseTimes(pack: Pack): CourseTimes {
  const model = buildCourseModel(pack, makeChanges(pack));
  return {
    model,
    errorAt: (distance, t) => ({
      // beyond the finish the schedule ends: it goes on at the last target speed
      timeError:
        t - targetTimeAt(model.schedule, distance) - Math.max(0, distance - model.finish) / targetSpeedAt(model.schedule, model.finish),
      planned: distance >= model.finish ? 0 : model.plan.plannedErrorAt(distance),
    }),
    placeOf(id) {
      const place = model.places.find((p) => p.checkpoint.id === id);
      return place === undefined ? null : { d: place.d, duty: place.checkpoint.duty };
    },
  };
}
