import type { NewObservation } from '#shared/journal/observation.ts';
import { makeDriveCourse } from './drive-course.ts';
import { type CarState, createDriver, type Shown } from './drive-driver.ts';
import { createDriveGnss, type DriveGnss, FIX_INTERVAL_US } from './drive-gnss.ts';
import { createDriveHistory } from './drive-history.ts';
import { createDriveNavigator, type DriveNavigator, usualHabits } from './drive-navigator.ts';
import type { DriveOptions } from './drive-options.ts';
import { makeDriveRoad } from './drive-road.ts';
import { createDriveWheel } from './drive-wheel.ts';
import { createPulseBox } from './pulse-box.ts';
import { createRandom } from './random.ts';

/** The simulated world, tick by tick: car and driver, and what box, receiver and navigator make of it. */
export interface DriveWorld {
  /** Session microseconds up to which the world has run. */
  readonly at: number;
  readonly movedAt: number | null;
  readonly passed: readonly Passing[];
  /** Tells the driver the session instant of the release; of no use once the car moves. */
  release(at: number): void;
  /** Runs for `TICK_US` more. The observations may lie before or after that stretch: a tap anticipates, a fix is late. */
  tick(shown: Shown): readonly NewObservation[];
  truth(at: number): { readonly distance: number; readonly speed: number };
}

export interface Passing {
  readonly checkpoint: string;
  readonly at: number;
}

export const TICK_US = 20_000;
const TICK_S = TICK_US / 1e6;

/** A line across the road: a place that is passed, or the spot at which the navigator touches for it. */
interface Line {
  readonly at: number;
  readonly checkpoint: string;
  readonly touched: boolean;
}

export function createDriveWorld(options: DriveOptions): DriveWorld {
  const { pack, beginAt = 0, resume } = options;
  const { driver, wheel, box, gnss, navigator, lines } = makeParts(options);
  const history = createDriveHistory(beginAt, TICK_US);
  const passed: Passing[] = [];
  let car: CarState = { x: resume?.distance ?? -pack.attempt.stagedBehindM, v: resume?.speed ?? 0, t: 0 };
  let at = beginAt;
  let releaseAt = options.releaseAt ?? null;
  let movedAt: number | null = resume !== undefined && resume.speed > 0 ? beginAt : null;
  history.add(car.x, car.v);

  const move = (shown: Shown): CarState => {
    const mayGo = movedAt !== null || (releaseAt !== null && at >= releaseAt + driver.reaction * 1e6);
    const a = mayGo ? driver.acceleration(car, shown, TICK_S) : 0;
    // What is left of the speed goes within this tick, with no more braking than the car has.
    const stands = a <= 0 && car.v <= pack.plan.deceleration * TICK_S;
    const v = stands ? 0 : Math.max(0, car.v + a * TICK_S);
    const dx = stands ? 0 : ((car.v + v) / 2) * TICK_S;
    return { x: car.x + dx, v, t: releaseAt === null ? 0 : (at + TICK_US - releaseAt) / 1e6 };
  };

  return {
    tick(shown) {
      const [before, from] = [car, at];
      car = move(shown);
      at += TICK_US;
      const dx = car.x - before.x;
      if (dx > 0) movedAt ??= from;
      history.add(car.x, car.v);
      const out = box.turn(wheel.pulses(dx, car.v, TICK_S), from, at);
      for (let line = lines[0]; line !== undefined && line.at <= car.x; line = lines[0]) {
        lines.shift();
        const passing = { checkpoint: line.checkpoint, at: from + (TICK_US * (line.at - before.x)) / dx };
        if (line.touched) out.push(navigator.tap(passing.checkpoint, passing.at));
        else passed.push(passing);
      }
      return [...out, ...fixes(gnss, car, at, beginAt)];
    },
    release(instant) {
      if (movedAt === null) releaseAt = instant;
    },
    truth: history.truth,
    passed,
    get at() {
      return at;
    },
    get movedAt() {
      return movedAt;
    },
  };
}

function fixes(gnss: DriveGnss, car: CarState, at: number, beginAt: number): readonly NewObservation[] {
  const fix = (at - beginAt) % FIX_INTERVAL_US === 0 ? gnss.fix(at, car.x, car.v) : null;
  return fix === null ? [] : [fix];
}

function makeParts({ pack, seed, beginAt = 0, resume, faults = {}, utcMsAtZero = null, navigator: wanted }: DriveOptions) {
  const course = makeDriveCourse(pack, createRandom(seed, 'survey'));
  const habits = { ...usualHabits(pack, seed), ...(wanted === null ? { missed: 1 } : wanted) };
  const navigator: DriveNavigator = createDriveNavigator(course.places, habits, seed);
  const places = course.places.filter((p) => p.checkpoint.duty !== 'start');
  const lines: Line[] = [
    ...places.map((p) => ({ at: p.at, checkpoint: p.checkpoint.id, touched: false })),
    ...navigator.targets.map((target) => ({ ...target, touched: true })),
  ]
    .filter((line) => line.at > (resume?.distance ?? Number.NEGATIVE_INFINITY))
    .sort((a, b) => a.at - b.at);
  return {
    driver: createDriver(pack, course, seed),
    wheel: createDriveWheel(pack, seed, { driven: faults.driven ?? false, dropouts: faults.dropouts ?? false }),
    box: createPulseBox(pack.wheel.channel, seed, beginAt, resume),
    gnss: createDriveGnss(makeDriveRoad(pack, seed), seed, { utcMsAtZero, outages: faults.gnssOutages ?? false }),
    navigator,
    lines,
  };
}
