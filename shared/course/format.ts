import { type DistanceUnit, metresPer, metresPerSecondPer, type SpeedUnit } from '#shared/units.ts';

/** English text of quantities, for both worlds. Figures are rounded from integers, never by `toFixed` of a float. */

/** `|value|` rounded half away from zero to `decimals`, as digits. No sign: the caller has a word for it. */
export function roundedDigits(value: number, decimals: number): string {
  const tenPower = 10 ** decimals;
  // a whole number of micro-units first, so that binary dust (1.005 = 1.00499…) does not decide the last digit
  const micro = Math.round(Math.abs(value) * 1e6);
  const step = 1e6 / tenPower;
  const n = Math.floor((micro + step / 2) / step);
  const whole = Math.floor(n / tenPower);
  return decimals === 0 ? String(whole) : `${whole}.${String(n % tenPower).padStart(decimals, '0')}`;
}

const isZero = (digits: string): boolean => !/[1-9]/.test(digits);

/** Metres as text in the unit, unit not included. Negative (staged behind the line) keeps a minus sign. */
export function formatDistance(m: number, unit: DistanceUnit, decimals: number): string {
  const digits = roundedDigits(m / metresPer(unit), decimals);
  return m < 0 && !isZero(digits) ? `−${digits}` : digits;
}

/** Speed as a whole number of the unit, unit not included. */
export function formatSpeed(mps: number, unit: SpeedUnit): string {
  return roundedDigits(mps / metresPerSecondPer(unit), 0);
}

/** A time error as magnitude and word, never a bare sign. Positive seconds = late. A shown zero is `level`. */
export function formatTimeError(
  seconds: number,
  decimals: number,
): { readonly magnitude: string; readonly word: 'late' | 'early' | 'level' } {
  const magnitude = roundedDigits(seconds, decimals);
  if (isZero(magnitude)) return { magnitude, word: 'level' };
  return { magnitude, word: seconds > 0 ? 'late' : 'early' };
}

/** Seconds as `m:ss`, or `h:mm:ss` from one hour on; `decimals` digits of the second. */
export function formatDuration(seconds: number, decimals = 0): string {
  const total = roundedDigits(seconds, decimals);
  const [whole = '0', fraction] = total.split('.');
  const s = Number(whole);
  const two = (n: number): string => String(n).padStart(2, '0');
  const minutes = Math.floor(s / 60);
  const head = minutes < 60 ? `${minutes}:${two(s % 60)}` : `${Math.floor(minutes / 60)}:${two(minutes % 60)}:${two(s % 60)}`;
  const sign = seconds < 0 && !isZero(total) ? '−' : '';
  return sign + head + (fraction === undefined ? '' : `.${fraction}`);
}

/** Civil clock time `HH:MM:SS` in an IANA zone, cut (never rounded up into the next second), `decimals` digits of the second. */
export function formatClock(unixMs: number, timeZone: string, decimals = 0): string {
  const parts = clockFormat(timeZone).format(Math.floor(unixMs / 1000) * 1000);
  if (decimals === 0) return parts;
  const micro = Math.floor((unixMs - Math.floor(unixMs / 1000) * 1000) * 1000);
  return `${parts}.${String(micro).padStart(6, '0').slice(0, decimals)}`;
}

const clockFormats = new Map<string, Intl.DateTimeFormat>();
function clockFormat(timeZone: string): Intl.DateTimeFormat {
  let format = clockFormats.get(timeZone);
  if (format === undefined) {
    format = new Intl.DateTimeFormat('en-GB', { timeZone, hour: '2-digit', minute: '2-digit', second: '2-digit', hourCycle: 'h23' });
    clockFormats.set(timeZone, format);
  }
  return format;
}
