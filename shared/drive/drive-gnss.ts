import type { NewObservation } from '#shared/journal/observation.ts';
import type { GnssParameters, Noise } from './drive-parameters.ts';
import { type DriveRoad, METRES_PER_DEGREE, metresPerDegreeOfLongitude } from './drive-road.ts';
import { createRandom, createWander, type Random } from './random.ts';

/** A receiver on the roof: speed and position with noise, told late. */
export interface DriveGnss {
  /**
   * The fix measured at `at` (session microseconds) with the aerial at official distance `x` and `v` metres over ground in a
   * second, or none during an outage. Its own `at` is when it arrives.
   */
  fix(at: number, x: number, v: number): NewObservation | null;
}

export interface DriveGnssOptions {
  readonly utcMsAtZero: number | null;
  readonly outages: boolean;
  readonly parameters: GnssParameters;
  /** From fix to fix, seconds. */
  readonly stepS: number;
}

/** 95 % radius of two equal axes is 2.448 sigma. Source: chi-square with two degrees of freedom. */
const accuracyOf = (position: Noise): number => 2.448 * Math.hypot(position.white, position.slow);
/** The one long outage of a drive begins this long after the first fix, at random. */
const LONG_OUTAGE_FROM = { low: 100, high: 2000 };

export function createDriveGnss(road: DriveRoad, seed: number, { utcMsAtZero, outages, parameters, stepS }: DriveGnssOptions): DriveGnss {
  const { latencyUs, speed: speedNoise, position } = parameters;
  const random = createRandom(seed, 'gnss');
  const [east, north] = [createWander(random, position.slow, position.spanS), createWander(random, position.slow, position.spanS)];
  const slowSpeed = createWander(random, speedNoise.slow, speedNoise.spanS);
  const isOut = createOutages(parameters, random, stepS, createRandom(seed, 'long outage'));
  const accuracy = accuracyOf(position);

  return {
    fix(at, x, v) {
      const speed = Math.max(0, v + slowSpeed(stepS) + random.gauss(speedNoise.white));
      const [de, dn] = [east(stepS) + random.gauss(position.white), north(stepS) + random.gauss(position.white)];
      const late = latencyUs.fixed + random.range(0, latencyUs.jitter);
      if (outages && isOut()) return null;
      const place = road.at(x);
      return {
        type: 'fix.v1',
        at: Math.round(at + late),
        via: 'nmea',
        lat: place.lat + dn / METRES_PER_DEGREE,
        lon: place.lon + de / metresPerDegreeOfLongitude(place.lat),
        speed,
        course: v > 1 ? place.course : null,
        accuracy,
        utcMs: utcMsAtZero === null ? null : Math.round(utcMsAtZero + at / 1000),
      };
    },
  };
}

function createOutages({ outages, longOutageS }: GnssParameters, random: Random, stepS: number, long: Random): () => boolean {
  let left = 0;
  let untilLong = longOutageS > 0 ? long.range(LONG_OUTAGE_FROM.low, LONG_OUTAGE_FROM.high) : Number.POSITIVE_INFINITY;
  return () => {
    if (random.unit() < stepS / outages.everyS) left = Math.max(left, random.range(outages.low, outages.high));
    untilLong -= stepS;
    if (untilLong <= 0) {
      left = Math.max(left, longOutageS);
      untilLong = Number.POSITIVE_INFINITY;
    }
    left -= stepS;
    return left > 0;
  };
}
