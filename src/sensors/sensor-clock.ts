/**
 * What a source needs of the session clock (`src/run/clock.ts` fits). `at` is affine in its stamp, which is all that the
 * conversions here rest on; the sources themselves never read `performance`.
 */
export interface SensorClock {
  /** Whole microseconds on the session clock. */
  now(): number;
  /** Session instant of a `performance` stamp of this page, ms. */
  at(performanceTimeStamp: number): number;
  /** Session seconds per second of the device: 1 on a real run. */
  readonly rate: number;
}

/** The page's `performance` stamp, ms, of a session instant: the inverse of `clock.at`. */
export const pageStamp = (clock: SensorClock, at: number): number => (at - clock.at(0)) / (1000 * clock.rate);

/** The page's `performance` stamp of the present, ms. */
export const pageStampNow = (clock: SensorClock): number => pageStamp(clock, clock.now());
