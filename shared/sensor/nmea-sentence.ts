import {
  angleField,
  courseField,
  dateField,
  decimalField,
  METRES_PER_SECOND_PER_KMH,
  METRES_PER_SECOND_PER_KNOT,
  timeOfDayField,
  utcDay,
  wholeField,
} from './nmea-fields.ts';

/**
 * The sentences of NMEA 0183 that say where, how fast or when, of any talker. Layouts as described in gpsd's "NMEA
 * Revealed" (gpsd.gitlab.io/gpsd/NMEA.html).
 */

interface Position {
  /** Milliseconds of the UTC day. */
  readonly timeOfDayMs: number | null;
  /** False: the receiver says it has no fix. Null: it says nothing. */
  readonly valid: boolean | null;
  readonly lat: number | null;
  readonly lon: number | null;
}
interface Motion {
  /** Speed over ground, m/s. */
  readonly speed: number | null;
  /** Degrees true. */
  readonly course: number | null;
}
export type RmcSentence = Position & Motion & { readonly kind: 'rmc'; readonly dayMs: number | null };
export type GgaSentence = Position & {
  readonly kind: 'gga';
  /** Radius that holds 95 % of positions, metres, as estimated from HDOP and quality. */
  readonly accuracy: number | null;
};
export type GllSentence = Position & { readonly kind: 'gll' };
export type VtgSentence = Motion & { readonly kind: 'vtg' };
export type ZdaSentence = { readonly kind: 'zda'; readonly timeOfDayMs: number | null; readonly dayMs: number | null };
export type NmeaSentence = RmcSentence | GgaSentence | GllSentence | VtgSentence | ZdaSentence;

const position = (lat: string | undefined, ns: string | undefined, lon: string | undefined, ew: string | undefined) => {
  const pair = { lat: angleField(lat, ns, 90), lon: angleField(lon, ew, 180) };
  return pair.lat === null || pair.lon === null ? { lat: null, lon: null } : pair;
};

/** Modes that measure nothing: no fix, typed in by hand, simulated. A place typed in is a stale one. */
const isUnmeasured = (mode: string | undefined): boolean => mode === 'N' || mode === 'M' || mode === 'S';

/** Status `A`/`V`, overruled by the mode where the sentence has one. */
function statusField(status: string | undefined, mode: string | undefined): boolean | null {
  if (status === 'V' || isUnmeasured(mode)) return false;
  return status === 'A' ? true : null;
}

/** The same by the quality of a GGA: 0 no fix, 7 typed in by hand, 8 simulated. */
const UNMEASURED_QUALITY: readonly (number | null)[] = [0, 7, 8];
/**
 * One sigma of a range, metres, by quality: 1 autonomous, 2 differential, 4 RTK, 5 RTK float, 6 dead reckoning. Common practice,
 * no source. RTK repeats within centimetres, but another survey's line lies half a metre off (measured on a recorded drive).
 */
const RANGE_SIGMA: readonly (number | undefined)[] = [undefined, 3, 1.5, 3, 0.4, 0.6, 5];
/** Receivers print 50 or 99.99 where they know none. */
const UNKNOWN_HDOP = 50;

/** 95 % radius: twice the horizontal error, which is HDOP times the error of a range. */
function accuracyOf(hdop: number | null, quality: number | null): number | null {
  return hdop !== null && hdop > 0 && hdop < UNKNOWN_HDOP ? 2 * hdop * (RANGE_SIGMA[quality ?? 1] ?? 3) : null;
}

const scaled = (value: number | null, factor: number): number | null => (value === null || value < 0 ? null : value * factor);

function rmc(f: readonly string[]): RmcSentence {
  return {
    kind: 'rmc',
    timeOfDayMs: timeOfDayField(f[1]),
    valid: statusField(f[2], f[12]),
    ...position(f[3], f[4], f[5], f[6]),
    speed: scaled(decimalField(f[7]), METRES_PER_SECOND_PER_KNOT),
    course: courseField(f[8]),
    dayMs: dateField(f[9]),
  };
}

function gga(f: readonly string[]): GgaSentence {
  const quality = wholeField(f[6], 0, 9);
  return {
    kind: 'gga',
    timeOfDayMs: timeOfDayField(f[1]),
    valid: quality === null ? null : !UNMEASURED_QUALITY.includes(quality),
    ...position(f[2], f[3], f[4], f[5]),
    accuracy: accuracyOf(decimalField(f[8]), quality),
  };
}

function gll(f: readonly string[]): GllSentence {
  return { kind: 'gll', timeOfDayMs: timeOfDayField(f[5]), valid: statusField(f[6], f[7]), ...position(f[1], f[2], f[3], f[4]) };
}

function vtg(f: readonly string[]): VtgSentence {
  if (isUnmeasured(f[9])) return { kind: 'vtg', speed: null, course: null };
  const knots = f[6] === 'N' ? scaled(decimalField(f[5]), METRES_PER_SECOND_PER_KNOT) : null;
  const kmh = f[8] === 'K' ? scaled(decimalField(f[7]), METRES_PER_SECOND_PER_KMH) : null;
  return { kind: 'vtg', speed: knots ?? kmh, course: f[2] === 'T' ? courseField(f[1]) : null };
}

function zda(f: readonly string[]): ZdaSentence {
  const day = utcDay(wholeField(f[2], 1, 31), wholeField(f[3], 1, 12), wholeField(f[4], 1980, 2999));
  return { kind: 'zda', timeOfDayMs: timeOfDayField(f[1]), dayMs: day };
}

const DECODERS: Readonly<Record<string, (fields: readonly string[]) => NmeaSentence>> = {
  RMC: rmc,
  GGA: gga,
  GLL: gll,
  VTG: vtg,
  ZDA: zda,
};

/**
 * Decodes the body of a sentence whose checksum has been found good (the text between `$` and `*`).
 * Null for every sentence that is none of the five; proprietary ones (first letter P) never are.
 */
export function decodeNmea(body: string): NmeaSentence | null {
  const fields = body.split(',');
  const address = /^([A-OQ-Z][A-Z0-9])([A-Z]{3})$/.exec(fields[0] ?? '');
  const decode = address?.[2] === undefined ? undefined : DECODERS[address[2]];
  return decode ? decode(fields) : null;
}
