import { frameSentence } from './checksum.ts';
import { DAY_MS, METRES_PER_SECOND_PER_KMH, METRES_PER_SECOND_PER_KNOT } from './nmea-fields.ts';

/**
 * Sentences as a pulse box or a receiver would send them: the inverse of the reader, for the simulator, tests and
 * recordings. Every function returns one sentence with its CR LF. Null becomes an empty field.
 */

const END = '\r\n';
const sentence = (...fields: readonly (string | number)[]): string => frameSentence(fields.join(',')) + END;

/** Cumulative `count` of a wheel channel at the box's `boxUs` (both 0..2^32-1). */
export const writeWheel = (channel: number, count: number, boxUs: number): string => sentence('PEVLW', channel, count, boxUs);
/** Cumulative presses of a wired button at the box's `boxUs`. */
export const writeButton = (button: number, presses: number, boxUs: number): string => sentence('PEVLB', button, presses, boxUs);
/** The edge of the receiver's pulse per second at the box's `boxUs`. */
export const writePps = (boxUs: number): string => sentence('PEVLT', boxUs);

/** What a receiver knows at one instant: unix ms, WGS84 degrees, m/s, degrees true. */
export interface ReceiverState {
  readonly utcMs: number;
  readonly lat: number | null;
  readonly lon: number | null;
  readonly speed: number | null;
  readonly course: number | null;
}

const two = (value: number): string => String(value).padStart(2, '0');

/** `hhmmss.sss`; the milliseconds are cut, so that a time never shows 60 s. */
function timeText(utcMs: number): string {
  const ms = Math.floor(((utcMs % DAY_MS) + DAY_MS) % DAY_MS);
  const whole = Math.floor(ms / 1000);
  return `${two(Math.floor(whole / 3600))}${two(Math.floor(whole / 60) % 60)}${two(whole % 60)}.${String(ms % 1000).padStart(3, '0')}`;
}

/** Seven decimals of a minute are 0.2 mm, as survey-grade receivers print. */
const MINUTE_DECIMALS = 7;

function angleText(degrees: number | null, width: 2 | 3): string {
  if (degrees === null) return ',';
  const unit = 60 * 10 ** MINUTE_DECIMALS;
  const ticks = Math.round(Math.abs(degrees) * unit);
  const minutes = ((ticks % unit) / 10 ** MINUTE_DECIMALS).toFixed(MINUTE_DECIMALS).padStart(MINUTE_DECIMALS + 3, '0');
  const hemisphere = width === 2 ? (degrees < 0 ? 'S' : 'N') : degrees < 0 ? 'W' : 'E';
  return `${String(Math.floor(ticks / unit)).padStart(width, '0')}${minutes},${hemisphere}`;
}

const numberText = (value: number | null, decimals: number): string => (value === null ? '' : value.toFixed(decimals));
const knots = (speed: number | null): number | null => (speed === null ? null : speed / METRES_PER_SECOND_PER_KNOT);
const hasFix = (r: ReceiverState): boolean => r.lat !== null && r.lon !== null;

/** Position, speed, course, date. @param talker two letters, such as GN */
export function writeRmc(r: ReceiverState, talker = 'GN'): string {
  const day = new Date(r.utcMs);
  const date = `${two(day.getUTCDate())}${two(day.getUTCMonth() + 1)}${two(day.getUTCFullYear() % 100)}`;
  const [status, mode] = hasFix(r) ? ['A', 'A'] : ['V', 'N'];
  const where = `${angleText(r.lat, 2)},${angleText(r.lon, 3)}`;
  return sentence(
    `${talker}RMC`,
    timeText(r.utcMs),
    status,
    where,
    numberText(knots(r.speed), 5),
    numberText(r.course, 2),
    date,
    '',
    '',
    mode,
  );
}

/** Position and quality (0 no fix, 1 autonomous, 2 differential, 4 and 5 RTK). */
export function writeGga(r: ReceiverState, quality = hasFix(r) ? 1 : 0, talker = 'GN'): string {
  const where = `${angleText(r.lat, 2)},${angleText(r.lon, 3)}`;
  return sentence(`${talker}GGA`, timeText(r.utcMs), where, quality, '', '', '', 'M', '', 'M', '', '');
}

/** Speed over ground and course. */
export function writeVtg(r: Pick<ReceiverState, 'speed' | 'course'>, talker = 'GN'): string {
  const kmh = r.speed === null ? null : r.speed / METRES_PER_SECOND_PER_KMH;
  const mode = r.speed === null ? 'N' : 'A';
  return sentence(`${talker}VTG`, numberText(r.course, 2), 'T', '', 'M', numberText(knots(r.speed), 5), 'N', numberText(kmh, 5), 'K', mode);
}

/** Position and status. */
export function writeGll(r: ReceiverState, talker = 'GN'): string {
  const [status, mode] = hasFix(r) ? ['A', 'A'] : ['V', 'N'];
  return sentence(`${talker}GLL`, `${angleText(r.lat, 2)},${angleText(r.lon, 3)}`, timeText(r.utcMs), status, mode);
}

/** UTC time and date. */
export function writeZda(utcMs: number, talker = 'GN'): string {
  const day = new Date(utcMs);
  return sentence(`${talker}ZDA`, timeText(utcMs), two(day.getUTCDate()), two(day.getUTCMonth() + 1), day.getUTCFullYear(), '00', '00');
}
