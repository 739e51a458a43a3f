import type { Pack } from '#shared/course/pack.ts';
import { createEvents, createLosses, type Losses } from './drive-faults.ts';
import type { DriveFaults } from './drive-options.ts';
import { type DriveParameters, TYPICAL_SPEED } from './drive-parameters.ts';
import { createRandom, createWander, type Random } from './random.ts';

/**
 * A wheel and its pulses. Official distance per pulse differs from the pack's by a fixed factor, grows as the tyre warms and
 * with the square of speed, and drifts; the driven line is not the surveyed one.
 */
export interface DriveWheel {
  /** Pulses (with their fraction) for the next `dx` metres of official distance, ending at `x` with speed `v`, over `dt` seconds. */
  pulses(dx: number, x: number, v: number, dt: number): number;
  /** ln(official / driven metres) here. */
  readonly line: number;
  readonly losses: Losses;
}

export interface DriveWheelOptions {
  readonly pack: Pack;
  readonly seed: number;
  readonly faults: DriveFaults;
  readonly parameters: DriveParameters;
  readonly courseEnd: number;
  /** A second wheel has numbers of its own, but the road of the first. */
  readonly beside?: DriveWheel;
}

const SPIN_TO_SPEED = 12;
const LAUNCH_S = 20;
/** Tyres change slowly. */
const REFRESH_S = 0.5;
/** An undriven wheel spins by no more than this at the launch. */
const UNDRIVEN_SPIN = { low: 0, high: 1 };

export function createDriveWheel({ pack, seed, faults, parameters, courseEnd, beside }: DriveWheelOptions): DriveWheel {
  const { tyre, driven } = parameters;
  const ending = beside === undefined ? '' : ' 2';
  const isDriven = (faults.driven ?? pack.wheel.driven) === true && beside === undefined;
  const random = createRandom(seed, `wheel${ending}`);
  const perPulse = pack.wheel.mmPerPulse / 1000;
  const fixed = tyre.offset + random.gauss(tyre.sigma ?? pack.wheel.scaleSigma);
  const lineOfRun = random.gauss(parameters.line.sigma);
  const heat = createHeat(parameters, random);
  const speedGrowth = random.range(tyre.speedGrowth.low, tyre.speedGrowth.high) - (isDriven ? driven.slip : 0);
  const lineHere = createWander(random, parameters.line.wanderSigma, parameters.line.spanM);
  const { low, high } = isDriven ? driven.spin : UNDRIVEN_SPIN;
  const spin = random.range(low, high) / (SPIN_TO_SPEED ** 2 / (2 * pack.plan.acceleration));
  const slip = createSlip(parameters, createRandom(seed, `slip${ending}`));
  const lost = createDropouts(parameters, createRandom(seed, `dropouts${ending}`), faults.dropouts ?? false);
  const losses = createLosses(parameters, createRandom(seed, `losses${ending}`), courseEnd);
  let line = lineOfRun;
  let drift = 0;
  let since = { s: Number.POSITIVE_INFINITY, m: 0 };
  let perPulseNow = perPulse;

  const refresh = (v: number): void => {
    drift += random.gauss(tyre.driftPerRootMetre * Math.sqrt(since.m));
    line = lineOfRun + lineHere(since.m);
    const road = beside === undefined ? line : beside.line;
    perPulseNow = perPulse * Math.exp(fixed + heat.growth() + speedGrowth * (v / TYPICAL_SPEED) ** 2 + drift + road);
    since = { s: 0, m: 0 };
  };

  return {
    pulses(dx, x, v, dt) {
      if (dx <= 0) {
        heat.park(dt);
        return 0;
      }
      heat.roll(dt);
      since.s += dt;
      since.m += dx;
      if (since.s >= REFRESH_S) refresh(v);
      const turned = dx * (1 + (v < SPIN_TO_SPEED && heat.rolledS < LAUNCH_S ? spin : 0)) + slip(x, v, dt);
      const pulses = lost(turned / perPulseNow, x);
      return losses.take(x, dt) ? 0 : pulses;
    },
    get line() {
      return line;
    },
    losses,
  };
}

/** A tyre warms while it rolls and cools while it is parked. */
function createHeat({ tyre }: DriveParameters, random: Random) {
  const full = tyre.heat.mean + random.gauss(tyre.heat.sigma);
  const parts = tyre.heat.parts.map(({ share, low, high }) => ({ share, span: random.range(low, high), warmS: 0 }));
  let rolledS = 0;
  return {
    growth(): number {
      let warm = 0;
      for (const part of parts) warm += part.share * (1 - Math.exp(-part.warmS / part.span));
      return full * warm;
    },
    roll(dt: number): void {
      rolledS += dt;
      for (const part of parts) part.warmS += dt;
    },
    /** As if it had rolled for less long: what is left of the warmth is what so long a roll would have given. */
    park(dt: number): void {
      if (rolledS === 0) return;
      const keep = Math.exp(-dt / tyre.coolS);
      for (const part of parts) part.warmS = -part.span * Math.log(1 - keep * (1 - Math.exp(-part.warmS / part.span)));
    },
    get rolledS(): number {
      return rolledS;
    },
  };
}

/** Metres the wheel turns too far (or too little) now and then, spread over a second. */
function createSlip({ slips }: DriveParameters, random: Random): (x: number, v: number, dt: number) => number {
  const event = createEvents(random, slips.everyM);
  let rate = 0;
  let left = 0;
  return (x, v, dt) => {
    if (event(x)) {
      const size = random.range(slips.low, slips.high) * (random.unit() < 0.5 ? -1 : 1);
      if (left <= 0 && v > 10) {
        left = slips.overS;
        rate = size / slips.overS;
      }
    }
    if (left <= 0) return 0;
    const during = Math.min(dt, left);
    left -= during;
    return rate * during;
  };
}

function createDropouts({ dropouts }: DriveParameters, random: Random, on: boolean): (pulses: number, x: number) => number {
  const event = createEvents(random, dropouts.everyM);
  let owed = 0;
  return (pulses, x) => {
    if (on && event(x)) owed += random.range(dropouts.low, dropouts.high);
    const lost = Math.min(owed, pulses);
    owed -= lost;
    return pulses - lost;
  };
}
