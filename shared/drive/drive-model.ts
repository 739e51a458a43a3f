import type { Pack } from '#shared/course/pack.ts';
import type { NewObservation } from '#shared/journal/observation.ts';
import { makeDriveCourse } from './drive-course.ts';
import { type CarState, createDriver, type Shown } from './drive-driver.ts';
import { createDriveGnss, FIX_INTERVAL_US } from './drive-gnss.ts';
import { createDriveHistory } from './drive-history.ts';
import { createDriveNavigator, type NavigatorHabits, usualHabits } from './drive-navigator.ts';
import { makeDriveRoad } from './drive-road.ts';
import { createDriveWheel } from './drive-wheel.ts';
import { createPulseBox, type PulseBoxStart } from './pulse-box.ts';
import { createRandom } from './random.ts';

/**
 * A believable drive of any pack: car, driver, wheel, pulse box, receiver and navigator, the same for the same seed.
 *
 * The world runs `AHEAD_US` ahead of what it gives out. What the display shows therefore reaches the car a second later,
 * which is about what a driver takes to read and follow it, and a navigator who anticipates can touch before the place.
 */
export interface DriveOptions {
  readonly pack: Pack;
  readonly seed: number;
  /** Session instant at which the world begins, microseconds; the car stands behind the line. 0 where left out. */
  readonly beginAt?: number;
  /** Session instant of the release, where known from the start; a display may tell it later. */
  readonly releaseAt?: number | null;
  /** Official time at session instant 0, unix ms; null: fixes carry no time. */
  readonly utcMsAtZero?: number | null;
  /** Left out: the usual habits. Null: nobody taps. */
  readonly navigator?: Partial<NavigatorHabits> | null;
  readonly faults?: { readonly driven?: boolean; readonly dropouts?: boolean; readonly gnssOutages?: boolean };
  /** Goes on from the middle of a run (a page that was reloaded): the car at `beginAt`, and the box's counters. */
  readonly resume?: { readonly distance: number; readonly speed: number } & PulseBoxStart;
}

/** What the cockpit shows. */
export interface DriveDisplay {
  /** Session instant at which it was read. */
  readonly at: number;
  /** Speed to hold, m/s; null while none is shown: the driver then follows the plan. */
  readonly holdSpeed: number | null;
  /** Seconds to the release, negative once it has passed; null while unknown. */
  readonly toRelease: number | null;
  /** Red flag: the car is brought to a stand, and goes on when it is lifted. */
  readonly stopped?: boolean;
}

export interface Drive {
  /** Everything that arrives up to `toUs`, in order of its instant. Never runs back; call it as often as wanted. */
  advance(toUs: number, display: DriveDisplay | null): NewObservation[];
  /** True official distance (m) and speed (m/s) at an instant already given out. */
  truth(at: number): { readonly distance: number; readonly speed: number };
  /** True instants at which the places (survey errors included) were passed, the finish among them, up to now. */
  passings(): readonly { readonly checkpoint: string; readonly at: number }[];
  /** Session instant of the first movement; null before. */
  readonly movedAt: number | null;
}

const TICK_US = 20_000;
const TICK_S = TICK_US / 1e6;
const AHEAD_US = 1_000_000;

export function createDrive(options: DriveOptions): Drive {
  const { pack, seed, beginAt = 0, resume } = options;
  const course = makeDriveCourse(pack, createRandom(seed, 'survey'));
  const driver = createDriver(pack, course, seed);
  const wheel = createDriveWheel(pack, seed, { driven: options.faults?.driven ?? false, dropouts: options.faults?.dropouts ?? false });
  const box = createPulseBox(pack.wheel.channel, seed, beginAt, resume);
  const gnss = createDriveGnss(makeDriveRoad(pack, seed), seed, {
    utcMsAtZero: options.utcMsAtZero ?? null,
    outages: options.faults?.gnssOutages ?? false,
  });
  const habits = options.navigator === null ? { missed: 1 } : options.navigator;
  const navigator = createDriveNavigator(course.places, { ...usualHabits(pack, seed), ...habits }, seed);
  const history = createDriveHistory(beginAt, TICK_US);
  const lines = [
    ...course.places.filter((p) => p.checkpoint.duty !== 'start').map((p) => ({ at: p.at, checkpoint: p.checkpoint.id, touched: false })),
    ...navigator.targets.map((target) => ({ ...target, touched: true })),
  ]
    .filter((line) => line.at > (resume?.distance ?? Number.NEGATIVE_INFINITY))
    .sort((a, b) => a.at - b.at);

  let car: CarState = { x: resume?.distance ?? -pack.attempt.stagedBehindM, v: resume?.speed ?? 0, t: 0 };
  let worldAt = beginAt;
  let releaseAt = options.releaseAt ?? null;
  let movedAt: number | null = resume !== undefined && resume.speed > 0 ? beginAt : null;
  let waiting: NewObservation[] = [];
  const passed: { checkpoint: string; at: number }[] = [];
  history.add(car.x, car.v);

  const maySet = (): boolean => movedAt !== null || (releaseAt !== null && worldAt >= releaseAt + driver.reaction * 1e6);

  const passLines = (before: CarState, from: number): void => {
    for (let line = lines[0]; line !== undefined && line.at <= car.x; line = lines[0]) {
      lines.shift();
      const at = from + (TICK_US * (line.at - before.x)) / (car.x - before.x);
      if (line.touched) waiting.push(navigator.tap(line.checkpoint, at));
      else passed.push({ checkpoint: line.checkpoint, at });
    }
  };

  const tick = (shown: Shown): void => {
    const [before, from] = [car, worldAt];
    const a = maySet() ? driver.acceleration(before, shown, TICK_S) : 0;
    const v = maySet() ? Math.max(0, before.v + a * TICK_S) : 0;
    // What is left of the speed goes within this tick, with no more braking than the car has.
    const stands = a <= 0 && before.v <= pack.plan.deceleration * TICK_S;
    const dx = stands ? 0 : ((before.v + v) / 2) * TICK_S;
    worldAt += TICK_US;
    car = { x: before.x + dx, v: stands ? 0 : v, t: releaseAt === null ? 0 : (worldAt - releaseAt) / 1e6 };
    if (dx > 0) movedAt ??= from;
    history.add(car.x, car.v);
    waiting.push(...box.turn(wheel.pulses(dx, car.v, TICK_S), from, worldAt));
    if (dx > 0) passLines(before, from);
    const fix = (worldAt - beginAt) % FIX_INTERVAL_US === 0 ? gnss.fix(worldAt, car.x, car.v) : null;
    if (fix !== null) waiting.push(fix);
  };

  return {
    advance(toUs, display) {
      if (display?.toRelease != null && movedAt === null) releaseAt = display.at + display.toRelease * 1e6;
      const shown = { holdSpeed: display?.holdSpeed ?? null, stopped: display?.stopped ?? false };
      while (worldAt + TICK_US <= toUs + AHEAD_US) tick(shown);
      const due = waiting.filter((o) => o.at <= toUs).sort((a, b) => a.at - b.at);
      waiting = waiting.filter((o) => o.at > toUs);
      return due;
    },
    truth: history.truth,
    passings: () => passed,
    get movedAt() {
      return movedAt;
    },
  };
}
