import type { PrintedDistance, PrintedSpeed } from '#shared/course/course-book.ts';
import { type Metres, type MetresPerSecond, metres, metresPer, metresPerSecond, metresPerSecondPer } from '#shared/units.ts';

/** Turns printed decimals into SI once. The text's digits are read as an integer, so that 12.345 km is exactly 12 345 m. */

interface Decimal {
  /** All digits as one integer. */
  readonly digits: number;
  readonly decimals: number;
}

/** Fifteen digits are exact in a float64; more is no survey. */
const PRINTED = /^(\d+)(?:\.(\d+))?$/;
const MOST_DIGITS = 15;

/** Plain decimal text, no sign, point as the separator. Null for anything else. */
export function readDecimal(text: string): Decimal | null {
  if (typeof text !== 'string') return null;
  const match = PRINTED.exec(text);
  if (match === null) return null;
  const whole = match[1] ?? '';
  const fraction = match[2] ?? '';
  if (whole.length + fraction.length > MOST_DIGITS) return null;
  return { digits: Number(whole + fraction), decimals: fraction.length };
}

const isDistanceUnit = (unit: unknown): boolean => unit === 'km' || unit === 'mi';
const isSpeedUnit = (unit: unknown): boolean => unit === 'km/h' || unit === 'mph';

/** Metres of a printed distance, or null where the text is no plain decimal. */
export function readPrintedMetres(d: PrintedDistance): Metres | null {
  const decimal = readDecimal(d.text);
  if (decimal === null || !isDistanceUnit(d.unit)) return null;
  return metres((decimal.digits * metresPer(d.unit)) / 10 ** decimal.decimals);
}

/** Metres per second of a printed speed, or null where the text is no plain decimal. */
export function readPrintedSpeed(s: PrintedSpeed): MetresPerSecond | null {
  const decimal = readDecimal(s.text);
  if (decimal === null || !isSpeedUnit(s.unit)) return null;
  return metresPerSecond((decimal.digits * metresPerSecondPer(s.unit)) / 10 ** decimal.decimals);
}

/** @throws RangeError where the text is no plain decimal: check the course book before. */
export function printedMetres(d: PrintedDistance): Metres {
  const value = readPrintedMetres(d);
  if (value === null) throw new RangeError(`not a printed distance: ${JSON.stringify(d)}`);
  return value;
}

/** @throws RangeError where the text is no plain decimal: check the course book before. */
export function printedSpeed(s: PrintedSpeed): MetresPerSecond {
  const value = readPrintedSpeed(s);
  if (value === null) throw new RangeError(`not a printed speed: ${JSON.stringify(s)}`);
  return value;
}

/** The step of the last printed decimal, metres: 12.34 km is printed to 10 m. @throws RangeError as `printedMetres`. */
export function printedFineness(d: PrintedDistance): Metres {
  const decimal = readDecimal(d.text);
  if (decimal === null || !isDistanceUnit(d.unit)) throw new RangeError(`not a printed distance: ${JSON.stringify(d)}`);
  return metres(metresPer(d.unit) / 10 ** decimal.decimals);
}
