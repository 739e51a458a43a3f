import type { Pack } from '#shared/course/pack.ts';
import { createRandom, createWander } from './random.ts';

/**
 * A wheel and its pulses. Official distance per pulse differs from the pack's by a fixed factor, grows as the tyre warms and
 * with the square of speed, and drifts; the driven line is not the surveyed one. Sizes as in simulations of long
 * closed-road runs: own judgement, no source.
 */
export interface DriveWheel {
  /** Pulses (with their fraction) for the next `dx` metres of official distance at speed `v`, over `dt` seconds. */
  pulses(dx: number, v: number, dt: number): number;
}

export interface WheelFaults {
  /** A driven wheel spins at the launch and slips with speed. */
  readonly driven: boolean;
  /** Pulses get lost now and then. */
  readonly dropouts: boolean;
}

const HEAT = { mean: 0.0035, sigma: 0.001, fromS: 250, toS: 600 };
const SPEED_GROWTH = { low: 0.0005, high: 0.002 };
/** Random drift: 0.03 % over 30 km. */
const DRIFT_PER_ROOT_METRE = 0.0003 / Math.sqrt(30_000);
const LINE = { sigma: 0.001, wanderSigma: 0.0002, spanM: 5000 };
const SLIP = { everyM: 10_000, low: 0.3, high: 3, overS: 1 };
const DROPOUT = { everyM: 15_000, low: 1, high: 6 };
const SPIN_TO_SPEED = 12;
const LAUNCH_S = 20;
/** Speed at which the growth by speed is stated, m/s. */
const TYPICAL_SPEED = 50;
/** Tyres change slowly. */
const REFRESH_S = 0.5;
const DRIVEN_SLIP = 0.008;

export function createDriveWheel(pack: Pack, seed: number, faults: WheelFaults): DriveWheel {
  const random = createRandom(seed, 'wheel');
  const perPulse = pack.wheel.mmPerPulse / 1000;
  const fixed = random.gauss(pack.wheel.scaleSigma) + random.gauss(LINE.sigma);
  const heat = { full: HEAT.mean + random.gauss(HEAT.sigma), span: random.range(HEAT.fromS, HEAT.toS) };
  const speedGrowth = random.range(SPEED_GROWTH.low, SPEED_GROWTH.high);
  const line = createWander(random, LINE.wanderSigma, LINE.spanM);
  const spin = (faults.driven ? random.range(5, 20) : random.range(0, 1)) / (SPIN_TO_SPEED ** 2 / (2 * pack.plan.acceleration));
  const slip = createSlip(seed);
  const lost = createDropouts(seed, faults.dropouts);
  let drift = 0;
  let movingS = 0;
  let since = { s: Number.POSITIVE_INFINITY, m: 0 };
  let perPulseNow = perPulse;

  const refresh = (v: number): void => {
    drift += random.gauss(DRIFT_PER_ROOT_METRE * Math.sqrt(since.m));
    const share = (v / TYPICAL_SPEED) ** 2;
    const growth = heat.full * (1 - Math.exp(-movingS / heat.span)) + speedGrowth * share - (faults.driven ? DRIVEN_SLIP * share : 0);
    perPulseNow = perPulse * Math.exp(fixed + growth + drift + line(since.m));
    since = { s: 0, m: 0 };
  };

  return {
    pulses(dx, v, dt) {
      if (dx <= 0) return 0;
      movingS += dt;
      since = { s: since.s + dt, m: since.m + dx };
      if (since.s >= REFRESH_S) refresh(v);
      const turned = dx * (1 + (v < SPIN_TO_SPEED && movingS < LAUNCH_S ? spin : 0)) + slip(dx, v, dt);
      return lost(turned / perPulseNow, dx);
    },
  };
}

/** Metres the wheel turns too far (or too little) now and then, spread over a second. */
function createSlip(seed: number): (dx: number, v: number, dt: number) => number {
  const random = createRandom(seed, 'slip');
  let rate = 0;
  let left = 0;
  return (dx, v, dt) => {
    if (left <= 0 && v > 10 && random.unit() < dx / SLIP.everyM) {
      left = SLIP.overS;
      rate = (random.range(SLIP.low, SLIP.high) * (random.unit() < 0.5 ? -1 : 1)) / SLIP.overS;
    }
    if (left <= 0) return 0;
    left -= dt;
    return rate * dt;
  };
}

function createDropouts(seed: number, on: boolean): (pulses: number, dx: number) => number {
  const random = createRandom(seed, 'dropouts');
  let owed = 0;
  return (pulses, dx) => {
    if (on && random.unit() < dx / DROPOUT.everyM) owed += random.range(DROPOUT.low, DROPOUT.high);
    const lost = Math.min(owed, pulses);
    owed -= lost;
    return pulses - lost;
  };
}
