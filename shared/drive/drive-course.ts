import { printedMetres, printedSpeed } from '#shared/course/convert.ts';
import type { Checkpoint } from '#shared/course/course-book.ts';
import type { Pack } from '#shared/course/pack.ts';
import { makePlan, type Plan } from '#shared/pace/plan.ts';
import { makeSchedule } from '#shared/pace/schedule.ts';
import type { Random } from './random.ts';

/** The course as it lies on the ground: the printed one, with the survey's errors. Metres, m/s. */
export interface DriveCourse {
  readonly places: readonly DrivePlace[];
  readonly zones: readonly { readonly from: number; readonly to: number; readonly limit: number }[];
  readonly finish: number;
  /** Where the car has to stand after the finish. */
  readonly stop: number;
  readonly slowDownLimit: number;
  readonly cap: number | null;
  /** Planned from rest behind the start line, at the release. */
  readonly plan: Plan;
}

export interface DrivePlace {
  readonly checkpoint: Checkpoint;
  readonly printed: number;
  /** Official distance at which it really lies. */
  readonly at: number;
}

/** Where the book does not say: room to stop after the finish, and the speed of the slow-down stretch. */
const RUN_OUT = 800;
const SLOW_DOWN = 80 / 3.6;

/** @param surveySigma one standard deviation of where a printed place really lies, metres */
export function makeDriveCourse(pack: Pack, random: Random, surveySigma: number): DriveCourse {
  const { courseBook, raceClass, crewZones, ownCheckpoints } = pack;
  const places = [...courseBook.checkpoints, ...ownCheckpoints]
    .map((checkpoint): DrivePlace => {
      const printed = printedMetres(checkpoint.at);
      return { checkpoint, printed, at: checkpoint.duty === 'start' ? printed : printed + random.gauss(surveySigma) };
    })
    .sort((a, b) => a.at - b.at);
  const schedule = makeSchedule(courseBook, raceClass);
  const finish = places.find((p) => p.checkpoint.duty === 'finish')?.at ?? schedule.finish;
  const cap = raceClass.cap === null ? null : printedSpeed(raceClass.cap);
  const zones = [...courseBook.zones, ...crewZones].map((zone) => ({
    from: printedMetres(zone.from) as number,
    to: printedMetres(zone.to) as number,
    limit: printedSpeed(zone.limit) as number,
  }));
  const plan = makePlan({
    schedule,
    zones,
    top: cap === null ? null : cap * (1 - pack.plan.capMargin),
    floor: raceClass.floor === null ? null : printedSpeed(raceClass.floor),
    acceleration: pack.plan.acceleration,
    deceleration: pack.plan.deceleration,
    from: { x: -pack.attempt.stagedBehindM, v: 0, t: 0 },
    mode: schedule.sections.length > 1 ? 'sections' : 'finish',
  });
  return {
    places,
    zones,
    finish,
    stop: places.find((p) => p.checkpoint.duty === 'stop board')?.at ?? finish + RUN_OUT,
    slowDownLimit: courseBook.slowDownLimit === null ? SLOW_DOWN : printedSpeed(courseBook.slowDownLimit),
    cap,
    plan,
  };
}
