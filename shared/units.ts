/**
 * Branded quantities and the one checked way to make each. SI inside, other units at the edges.
 * A branded value reads as a plain number; only these constructors may brand one.
 */

declare const unit: unique symbol;
type Quantity<U extends string> = number & { readonly [unit]: U };

/** Length or position along a course, metres. */
export type Metres = Quantity<'m'>;
/** Speed, metres per second. */
export type MetresPerSecond = Quantity<'m/s'>;
/** A span of time, seconds. For time errors: positive = late, negative = early. */
export type Seconds = Quantity<'s'>;
/** An instant on a run's session clock, whole microseconds since the run's first page opened. */
export type Micros = Quantity<'us'>;
/** An instant of civil time, unix milliseconds; fractions allowed where a clock is finer. */
export type UnixMs = Quantity<'unix-ms'>;
/** Wheel scale: distance per pulse, millimetres. */
export type MillimetresPerPulse = Quantity<'mm/pulse'>;

function finite(value: number, name: string): number {
  if (!Number.isFinite(value)) throw new RangeError(`${name} must be a finite number, got ${value}`);
  return value;
}

/** @throws RangeError if not finite. */
export const metres = (value: number): Metres => finite(value, 'metres') as Metres;
/** @throws RangeError if not finite. */
export const metresPerSecond = (value: number): MetresPerSecond => finite(value, 'metres per second') as MetresPerSecond;
/** @throws RangeError if not finite. */
export const seconds = (value: number): Seconds => finite(value, 'seconds') as Seconds;
/** Rounds to the whole microsecond. @throws RangeError if not finite. */
export const micros = (value: number): Micros => Math.round(finite(value, 'micros')) as Micros;
/** @throws RangeError if not finite. */
export const unixMs = (value: number): UnixMs => finite(value, 'unix milliseconds') as UnixMs;
/** @throws RangeError if not finite or not positive. */
export function millimetresPerPulse(value: number): MillimetresPerPulse {
  if (!(finite(value, 'wheel scale') > 0)) throw new RangeError(`wheel scale must be above zero, got ${value}`);
  return value as MillimetresPerPulse;
}

/** International mile, exact. Source: 1959 agreement, NIST SP 811 appendix B. */
export const METRES_PER_MILE = 1609.344;
export const METRES_PER_KM = 1000;

export type DistanceUnit = 'km' | 'mi';
export type SpeedUnit = 'km/h' | 'mph';

export const metresPer = (u: DistanceUnit): number => (u === 'mi' ? METRES_PER_MILE : METRES_PER_KM);
export const speedUnitOf = (u: DistanceUnit): SpeedUnit => (u === 'mi' ? 'mph' : 'km/h');
/** Metres per second in one unit of speed (1 km/h or 1 mph). */
export const metresPerSecondPer = (u: SpeedUnit): number => (u === 'mph' ? METRES_PER_MILE : METRES_PER_KM) / 3600;
