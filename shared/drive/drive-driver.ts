import type { Pack } from '#shared/course/pack.ts';
import type { DriveCourse } from './drive-course.ts';
import { createRandom, createWander } from './random.ts';

/** The driver and the car's limits: from what is shown and what lies ahead to an acceleration. Metres, seconds. */
export interface Driver {
  /** Seconds from the release to the first movement. */
  readonly reaction: number;
  /** Acceleration for the next `dt`, within -deceleration..acceleration of the pack. */
  acceleration(car: CarState, shown: Shown, dt: number): number;
  /** Brakes for something ahead within the next `dt` seconds, or may have to. */
  isBraking(car: CarState, dt: number): boolean;
}

export interface CarState {
  /** Official distance of the nose, negative behind the start line. */
  readonly x: number;
  readonly v: number;
  /** Since the release. */
  readonly t: number;
}

export interface Shown {
  /** What the driver is told to hold; null: goes by the plan and by `late`. */
  readonly holdSpeed: number | null;
  readonly stopped: boolean;
  /** Time error against the plan as shown, seconds late; left out: the driver feels the true one. */
  readonly late?: number;
}

/** Speed wanders by 0.4 m/s around what the driver means to hold, over some seconds. */
const SPEED_SIGMA = 0.4;
const SPEED_SPAN_S = 5;
const NOISE_S = 0.2;
/** How quickly the right foot takes up a difference of speed. */
const FOOT_S = 0.8;
const REACTION_S = { mean: 0.4, sigma: 0.08, least: 0.15 };
/** A driver who is told no speed makes up a time error over a minute, over 8 s near the finish. */
const CORRECT_S = 60;
const CORRECT_LATE_S = 8;
const LATE_PART_M = 5000;
/** Begins to brake for a limit where this share of full braking is needed; gentler after the finish. */
const BRAKE_SHARE = 0.85;
const SLOW_DOWN_SHARE = 0.45;
/** Nobody brakes for what is further ahead, metres. */
const BRAKING_WITHIN = 5000;
/** Stands this far before the stop board, metres. */
const STOP_SHORT = 3;
/** Stays this far under a limit. */
const UNDER_LIMIT = 0.4;

export function createDriver(pack: Pack, course: DriveCourse, seed: number): Driver {
  const random = createRandom(seed, 'driver');
  const reaction = Math.max(REACTION_S.least, REACTION_S.mean + random.gauss(REACTION_S.sigma));
  const wander = createWander(random, SPEED_SIGMA, SPEED_SPAN_S);
  let noise = { value: 0, due: 0 };
  const { acceleration: most, deceleration: least } = pack.plan;
  return {
    reaction,
    acceleration(car, shown, dt) {
      const span = Math.max(NOISE_S, dt);
      if (noise.due > 0) noise.due -= dt;
      else noise = { value: wander(span), due: dt < span ? span : 0 };
      const wanted = Math.max(0, wantedSpeed(car, shown, course) + (car.v > 5 ? noise.value : 0));
      const steady = (Math.min(wanted, highestSpeed(car, course)) - car.v) / FOOT_S;
      const braking = Math.max(brakingNeeded(car, course, least), shown.stopped ? least * BRAKE_SHARE : 0);
      return Math.max(-least, Math.min(most, steady, braking > 0 ? -braking : most));
    },
    isBraking: (car, dt) => brakingNeeded(car, course, least, car.v * dt) > 0,
  };
}

function wantedSpeed(car: CarState, shown: Shown, course: DriveCourse): number {
  if (shown.stopped || car.x > course.stop - STOP_SHORT) return 0;
  if (car.x >= course.finish) return course.slowDownLimit;
  if (shown.holdSpeed !== null) return shown.holdSpeed;
  const late = shown.late ?? car.t - course.plan.timeAt(car.x);
  const over = course.finish - car.x < LATE_PART_M ? CORRECT_LATE_S : CORRECT_S;
  return course.plan.holdAt(car.x) * (1 + Math.max(-0.1, Math.min(0.1, late / over)));
}

function highestSpeed(car: CarState, course: DriveCourse): number {
  let highest = course.cap ?? Number.POSITIVE_INFINITY;
  for (const zone of course.zones) if (car.x >= zone.from && car.x < zone.to) highest = Math.min(highest, zone.limit - UNDER_LIMIT);
  return highest;
}

/** Deceleration needed now (or `ahead` metres further on) for the limits and the stop ahead; 0 while it is too early to brake. */
function brakingNeeded(car: CarState, course: DriveCourse, full: number, ahead = 0): number {
  let most = brakingFor(car, ahead, 0, course.stop, full * SLOW_DOWN_SHARE);
  for (const zone of course.zones) {
    most = Math.max(most, brakingFor(car, ahead, zone.limit - UNDER_LIMIT, zone.from, full * BRAKE_SHARE));
  }
  return most;
}

function brakingFor(car: CarState, ahead: number, speed: number, at: number, least: number): number {
  if (car.v <= speed || car.x >= at || car.x < at - BRAKING_WITHIN) return 0;
  const needed = (car.v * car.v - speed * speed) / (2 * Math.max(0.05, at - car.x - ahead));
  return needed >= least ? needed : 0;
}
