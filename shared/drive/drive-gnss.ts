import type { NewObservation } from '#shared/journal/observation.ts';
import { type DriveRoad, METRES_PER_DEGREE, metresPerDegreeOfLongitude } from './drive-road.ts';
import { createRandom, createWander } from './random.ts';

/** A receiver on the roof: speed and position with noise, told late. */
export interface DriveGnss {
  /** The fix measured at `at` (session microseconds), or none during an outage. Its own `at` is when it arrives. */
  fix(at: number, x: number, v: number): NewObservation | null;
}

export const FIX_INTERVAL_US = 200_000;
const LATENCY_US = { fixed: 150_000, jitter: 30_000 };
const SPEED = { white: 0.08, slow: 0.01, spanS: 60 };
const POSITION = { white: 1, slow: 3, spanS: 120 };
/** 95 % radius of two equal axes is 2.448 sigma. Source: chi-square with two degrees of freedom. */
const ACCURACY = 2.448 * Math.hypot(POSITION.white, POSITION.slow);
const OUTAGE = { everyS: 300, low: 3, high: 20 };
const STEP_S = FIX_INTERVAL_US / 1e6;

export function createDriveGnss(
  road: DriveRoad,
  seed: number,
  options: { readonly utcMsAtZero: number | null; readonly outages: boolean },
): DriveGnss {
  const random = createRandom(seed, 'gnss');
  const [east, north] = [createWander(random, POSITION.slow, POSITION.spanS), createWander(random, POSITION.slow, POSITION.spanS)];
  const slowSpeed = createWander(random, SPEED.slow, SPEED.spanS);
  let outage = 0;

  return {
    fix(at, x, v) {
      const speed = Math.max(0, v + slowSpeed(STEP_S) + random.gauss(SPEED.white));
      const [de, dn] = [east(STEP_S) + random.gauss(POSITION.white), north(STEP_S) + random.gauss(POSITION.white)];
      const late = LATENCY_US.fixed + random.range(0, LATENCY_US.jitter);
      if (options.outages && random.unit() < STEP_S / OUTAGE.everyS) outage = random.range(OUTAGE.low, OUTAGE.high);
      outage -= STEP_S;
      if (outage > 0) return null;
      const place = road.at(x);
      return {
        type: 'fix.v1',
        at: Math.round(at + late),
        via: 'nmea',
        lat: place.lat + dn / METRES_PER_DEGREE,
        lon: place.lon + de / metresPerDegreeOfLongitude(place.lat),
        speed,
        course: v > 1 ? place.course : null,
        accuracy: ACCURACY,
        utcMs: options.utcMsAtZero === null ? null : Math.round(options.utcMsAtZero + at / 1000),
      };
    },
  };
}
