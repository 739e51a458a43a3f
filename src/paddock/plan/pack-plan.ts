import { printedMetres } from '#shared/course/convert.ts';
import type { Checkpoint, Zone } from '#shared/course/course-book.ts';
import type { Pack } from '#shared/course/pack.ts';
import { buildCourseModel, makeChanges } from '#shared/pace/course-model.ts';
import type { Plan } from '#shared/pace/plan.ts';
import { type Schedule, targetTimeAt } from '#shared/pace/schedule.ts';

/** The plan of a pack as a person reads it: by checkpoint, and as a profile to draw. SI; time errors positive = late. */
export interface PackPlan {
  readonly schedule: Schedule;
  readonly plan: Plan;
  readonly zones: readonly Zone[];
  readonly places: readonly PlanPlace[];
  /** Highest speed the plan allows itself (cap less its margin); null without a cap. */
  readonly top: number | null;
  readonly highest: number;
}

export interface PlanPlace {
  readonly checkpoint: Checkpoint;
  readonly at: number;
  readonly targetS: number;
  readonly plannedErrorS: number;
  readonly speed: number;
}

const PROFILE_POINTS = 600;

/** The engine's own course model, before anything is changed on the grid: what the cockpit will follow. */
export function planOfPack(pack: Pack): PackPlan {
  const { schedule, plan, top } = buildCourseModel(pack, makeChanges(pack));
  const highest = profile(schedule, (x) => plan.speedAt(x)).reduce((most, [, speed]) => Math.max(most, speed), 0);
  return { schedule, plan, zones: [...pack.courseBook.zones, ...pack.crewZones], top, highest, places: placesOf(pack, schedule, plan) };
}

function placesOf(pack: Pack, schedule: Schedule, plan: Plan): PlanPlace[] {
  return [...pack.courseBook.checkpoints, ...pack.ownCheckpoints]
    .map((checkpoint) => ({ checkpoint, at: printedMetres(checkpoint.at) as number }))
    .sort((a, b) => a.at - b.at)
    .filter(({ at }) => at <= schedule.finish)
    .map(({ checkpoint, at }) => ({
      checkpoint,
      at,
      targetS: targetTimeAt(schedule, at),
      plannedErrorS: plan.plannedErrorAt(at),
      speed: plan.speedAt(at),
    }));
}

/** A quantity along the course at evenly spaced places, start and finish included: pairs of metres and value. */
export function profile(schedule: Schedule, valueAt: (x: number) => number, points = PROFILE_POINTS): [number, number][] {
  const step = (schedule.finish - schedule.start) / points;
  return Array.from({ length: points + 1 }, (_, i) => {
    const x = i === points ? schedule.finish : schedule.start + i * step;
    return [x, valueAt(x)];
  });
}
