import type { SurveyedPoint } from '#shared/course/course-book.ts';
import type { Pack } from '#shared/course/pack.ts';
import type { DriveRates } from '#shared/drive/drive-parameters.ts';
import { type DriveRoad, inventRoad, surveyRoad } from '#shared/drive/drive-road.ts';
import { createDriveWorld, type DriveWorld } from '#shared/drive/drive-world.ts';
import { createRandom, createWander } from '#shared/drive/random.ts';
import type { NewObservation } from '#shared/journal/observation.ts';
import { followByEngine } from './engine-follower.ts';
import type { Follower } from './follower.ts';
import { followByLimit } from './limit.ts';
import { type Method, packFor, usesGnss } from './methods.ts';
import { followByPlainRatio } from './plain-ratio.ts';
import type { Setting } from './settings.ts';
import { makeTruth, type Outcome } from './truth.ts';

/** One simulated drive, start to finish line: the driver follows what this method shows. The same seed gives every method the same world. */

const RELEASE_US = 5_000_000;
const RELEASE_MS = 1_800_000_000_000;
/** The driver looks, and the display is judged, this often. */
const LOOK_US = 2_000_000;
/** The clock is not what is judged here: it is checked all the way, so that its drift adds nothing to what is stated. */
const CHECK_US = 300_000_000;
/** No drive takes twice its target time. */
const LONGEST = 2;

/** Coarse where nothing happens: pulses carry their own exact instants, so that only their number falls. */
export const FAST_RATES: DriveRates = { tick: 500_000, fineTick: 50_000, pulse: 500_000, fix: 1_000_000 };

/** Every drive of a setting is on the same road. */
const ROAD_SEED = 7;
let road: DriveRoad | null = null;
const theRoad = (): DriveRoad => {
  road ??= inventRoad(ROAD_SEED);
  return road;
};

export function driveOnce(setting: Setting, method: Method, seed: number, rates: DriveRates = FAST_RATES): Outcome {
  const pack = preparePack(setting, method, seed);
  const world = makeWorld(setting, method, seed, pack, rates);
  const follower = makeFollower(setting, method, pack, world);
  const feed = makeFeed(follower, world);
  const truth = makeTruth(pack, RELEASE_US);
  const shown: { holdSpeed: number | null; stopped: boolean; late?: number } = { holdSpeed: null, stopped: false };
  let heldFrom: number | null = null;
  feed([clockAt(1, 'exchange')]);
  while (world.at < RELEASE_US + LONGEST * pack.raceClass.targetTimeMs * 1000) {
    feed(world.tick(shown));
    const passed = world.passed[world.passed.length - 1];
    if (passed?.checkpoint === 'finish') return truth.finish(passed.at, follower.shown(passed.at));
    if (world.at % LOOK_US !== 0) continue;
    if (world.at % CHECK_US === 0) feed([clockAt(world.at, 'pps')]);
    const error = follower.shown(world.at);
    truth.look(world.at, world.car.x, error);
    if (error !== null) shown.late = error.timeError - error.planned;
    const { neutral } = setting;
    if (neutral === null) continue;
    const { x } = world.car;
    if (x >= neutral.heldAt) heldFrom ??= world.at;
    shown.stopped = heldFrom !== null && world.at - heldFrom < neutral.heldS * 1e6;
    shown.holdSpeed = x >= neutral.from && x < neutral.to ? neutral.speed : null;
  }
  throw new Error(`${setting.title}, ${method}, seed ${seed}: never reached the finish`);
}

const clockAt = (at: number, source: 'exchange' | 'pps'): NewObservation => ({
  type: 'clock.v1',
  at,
  source,
  officialMs: RELEASE_MS + (at - RELEASE_US) / 1000,
  uncertaintyMs: 1,
});

function makeWorld(setting: Setting, method: Method, seed: number, pack: Pack, rates: DriveRates): DriveWorld {
  const { parameters, navigator, lead } = setting;
  const leadMs = lead.mean + createRandom(seed, 'lead').gauss(lead.sigma);
  return createDriveWorld({
    pack,
    seed,
    releaseAt: RELEASE_US,
    utcMsAtZero: RELEASE_MS - RELEASE_US / 1000,
    navigator: method === 'none' ? null : { ...navigator, leadMs },
    faults: { ...setting.faults, noGnss: !usesGnss(method) },
    parameters,
    rates,
    road: theRoad(),
  });
}

function makeFollower({ navigator, parameters, lead }: Setting, method: Method, pack: Pack, world: DriveWorld): Follower {
  if (method === 'ratioPlain') return followByPlainRatio(pack, RELEASE_US);
  if (method !== 'limit') return followByEngine(pack);
  return followByLimit(pack, RELEASE_US, {
    scatterS: (navigator.scatterMs ?? 0) / 1000,
    lead: { mean: lead.mean / 1000, sigma: lead.sigma / 1000 },
    surveySigma: parameters.surveySigma,
    line: parameters.line,
    mistaken: world.mistaken,
  });
}

/** Gives the follower each observation when it arrives: a fix is late, and so is a touch that is. */
function makeFeed(follower: Follower, world: DriveWorld): (observations: readonly NewObservation[]) => void {
  let waiting: NewObservation[] = [];
  return (observations) => {
    follower.know?.(world.at, world.driven);
    if (waiting.length > 0 || observations.length > 1) {
      const all = waiting.concat(observations).sort((a, b) => a.at - b.at);
      waiting = [];
      for (const o of all)
        if (o.at > world.at) waiting.push(o);
        else follower.take(o);
      return;
    }
    for (const o of observations)
      if (o.at > world.at) waiting.push(o);
      else follower.take(o);
  };
}

const surveyed = new WeakMap<Pack, readonly SurveyedPoint[]>();

/** The pack with its release and, where positions are used, the line as this drive's officials surveyed it. */
function preparePack(setting: Setting, method: Method, seed: number): Pack {
  const pack = packFor(setting.pack, method);
  const attempt = { ...pack.attempt, releaseMs: RELEASE_MS };
  if (!pack.raceClass.aids.gnssPosition) return { ...pack, attempt };
  let exact = surveyed.get(setting.pack);
  if (exact === undefined) {
    const last = pack.courseBook.checkpoints[pack.courseBook.checkpoints.length - 1];
    exact = surveyRoad(theRoad(), -200, Number(last?.at.text) * 1000 + 1000);
    surveyed.set(setting.pack, exact);
  }
  return { ...pack, attempt, courseBook: { ...pack.courseBook, geometry: shifted(exact, setting.geometryOff, seed) } };
}

function shifted(
  exact: readonly SurveyedPoint[],
  { constant, sigma, spanM }: Setting['geometryOff'],
  seed: number,
): readonly SurveyedPoint[] {
  if (constant === 0 && sigma === 0) return exact;
  const wander = createWander(createRandom(seed, 'geometry'), sigma, spanM);
  return exact.map((point, i) => ({ ...point, d: point.d + constant + wander(point.d - (exact[i - 1]?.d ?? point.d)) }));
}
