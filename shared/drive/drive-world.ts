import type { NewObservation } from '#shared/journal/observation.ts';
import { makeDriveCourse } from './drive-course.ts';
import { type CarState, createDriver, type Driver, type Shown } from './drive-driver.ts';
import { createDriveGnss } from './drive-gnss.ts';
import { createDriveHistory } from './drive-history.ts';
import { createDriveNavigator, type DriveNavigator, usualHabits } from './drive-navigator.ts';
import type { DriveOptions } from './drive-options.ts';
import { type DriveParameters, REAL_RATES, USUAL_PARAMETERS } from './drive-parameters.ts';
import { makeDriveRoad } from './drive-road.ts';
import { createSensors, type Sensors } from './drive-sensors.ts';
import { createDriveWheel } from './drive-wheel.ts';
import { boxRandom, createPulseBox } from './pulse-box.ts';
import { createRandom } from './random.ts';

/** The simulated world, tick by tick: car and driver, and what box, receiver and navigator make of it. */
export interface DriveWorld {
  /** Session microseconds up to which the world has run. */
  readonly at: number;
  readonly car: CarState;
  /** Metres that the car has really covered: along its own line, not the surveyed one. */
  readonly driven: number;
  readonly movedAt: number | null;
  readonly passed: readonly Passing[];
  /** Checkpoints whose touch is mistaken. */
  readonly mistaken: ReadonlySet<string>;
  /** Tells the driver the session instant of the release; of no use once the car moves. */
  release(at: number): void;
  /** Runs for one tick more. The observations may lie before or after that stretch: a tap anticipates, a fix is late. */
  tick(shown: Shown): readonly NewObservation[];
  truth(at: number): { readonly distance: number; readonly speed: number };
}

export interface Passing {
  readonly checkpoint: string;
  readonly at: number;
}

/** A line across the road: a place that is passed, or the spot at which the navigator touches for it. */
interface Line {
  readonly at: number;
  readonly checkpoint: string;
  readonly touched: boolean;
}

/** Much happens for this long after the first movement. */
const LAUNCH_US = 5e6;

export function createDriveWorld(options: DriveOptions): DriveWorld {
  const { pack, beginAt = 0, resume, rates = REAL_RATES } = options;
  const { driver, sensors, navigator, lines } = makeParts(options);
  const history = createDriveHistory();
  const passed: Passing[] = [];
  let car: CarState = { x: resume?.distance ?? -pack.attempt.stagedBehindM, v: resume?.speed ?? 0, t: 0 };
  let at = beginAt;
  let driven = 0;
  let releaseAt = options.releaseAt ?? null;
  let movedAt: number | null = resume !== undefined && resume.speed > 0 ? beginAt : null;
  history.add(at, car.x, car.v);

  const isFine = (): boolean => {
    if (movedAt === null) return releaseAt !== null && at + rates.tick > releaseAt;
    return at - movedAt < LAUNCH_US || driver.isBraking(car, rates.tick / 1e6) || sensors.isFine(car.x, car.v);
  };

  /** Ticks end at whole multiples of their length, so that coarse ones meet again after fine ones. */
  const tickLength = (): number => {
    const length = rates.fineTick < rates.tick && isFine() ? rates.fineTick : rates.tick;
    return length - ((at - beginAt) % length);
  };

  const move = (shown: Shown, us: number): CarState => {
    const dt = us / 1e6;
    const mayGo = movedAt !== null || (releaseAt !== null && at >= releaseAt + driver.reaction * 1e6);
    const a = mayGo ? driver.acceleration(car, shown, dt) : 0;
    // What is left of the speed goes within this tick, with no more braking than the car has.
    const stands = a <= 0 && car.v <= pack.plan.deceleration * dt;
    const v = stands ? 0 : Math.max(0, car.v + a * dt);
    const dx = stands ? 0 : ((car.v + v) / 2) * dt;
    return { x: car.x + dx, v, t: releaseAt === null ? 0 : (at + us - releaseAt) / 1e6 };
  };

  return {
    tick(shown) {
      const us = tickLength();
      const [before, from] = [car, at];
      car = move(shown, us);
      at += us;
      const dx = car.x - before.x;
      if (dx > 0) movedAt ??= from;
      history.add(at, car.x, car.v);
      const out = sensors.sense({ car, dx, from, at });
      driven += dx * Math.exp(-sensors.line);
      for (let line = lines[0]; line !== undefined && line.at <= car.x; line = lines[0]) {
        lines.shift();
        const passing = { checkpoint: line.checkpoint, at: from + (us * (line.at - before.x)) / dx };
        if (line.touched) out.push(navigator.tap(passing.checkpoint, passing.at));
        else passed.push(passing);
      }
      return out;
    },
    release(instant) {
      if (movedAt === null) releaseAt = instant;
    },
    truth: history.truth,
    passed,
    mistaken: navigator.mistaken,
    get at() {
      return at;
    },
    get car() {
      return car;
    },
    get driven() {
      return driven;
    },
    get movedAt() {
      return movedAt;
    },
  };
}

interface Parts {
  readonly driver: Driver;
  readonly sensors: Sensors;
  readonly navigator: DriveNavigator;
  readonly lines: Line[];
}

function makeParts(options: DriveOptions): Parts {
  const { pack, seed, resume, parameters = USUAL_PARAMETERS, navigator: wanted } = options;
  const course = makeDriveCourse(pack, createRandom(seed, 'survey'), parameters.surveySigma);
  const habits = { ...usualHabits(pack, seed), ...(wanted === null ? { missed: 1 } : wanted) };
  const navigator = createDriveNavigator(course.places, habits, seed, pack.car.behindNose?.seatM ?? 0);
  const places = course.places.filter((p) => p.checkpoint.duty !== 'start');
  const lines: Line[] = [
    ...places.map((p) => ({ at: p.at, checkpoint: p.checkpoint.id, touched: false })),
    ...navigator.targets.map((target) => ({ ...target, touched: true })),
  ]
    .filter((line) => line.at > (resume?.distance ?? Number.NEGATIVE_INFINITY))
    .sort((a, b) => a.at - b.at);
  return { driver: createDriver(pack, course, seed), sensors: makeSensors(options, parameters, course.finish), navigator, lines };
}

function makeSensors(options: DriveOptions, parameters: DriveParameters, courseEnd: number): Sensors {
  const { pack, seed, beginAt = 0, resume, faults = {}, utcMsAtZero = null, rates = REAL_RATES, road } = options;
  const wheel = createDriveWheel({ pack, seed, faults, parameters, courseEnd });
  const { channel, secondChannel } = pack.wheel;
  const gnss = { utcMsAtZero, outages: faults.gnssOutages ?? false, parameters: parameters.gnss, stepS: rates.fix / 1e6 };
  return createSensors({
    beginAt,
    rates,
    aerialM: pack.car.behindNose?.aerialM ?? 0,
    wheel,
    box: createPulseBox(channel, boxRandom(seed), beginAt, resume),
    second:
      secondChannel === undefined
        ? null
        : {
            wheel: createDriveWheel({ pack, seed, faults, parameters, courseEnd, beside: wheel }),
            box: createPulseBox(secondChannel, boxRandom(seed), beginAt, resume),
          },
    gnss: faults.noGnss === true ? null : createDriveGnss(road ?? makeDriveRoad(pack, seed), seed, gnss),
  });
}
