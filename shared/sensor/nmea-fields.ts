/** Fields of NMEA 0183 sentences. A field that is empty or makes no sense is null, never 0. */

/** International knot, exact: 1852 m an hour. Source: BIPM, SI brochure, 8th edition, table 8. */
export const METRES_PER_SECOND_PER_KNOT = 1852 / 3600;
export const METRES_PER_SECOND_PER_KMH = 1 / 3.6;
export const DAY_MS = 86_400_000;

/** Plain decimal number, or null. Some receivers print a plus, or nothing before the point. */
export function decimalField(text: string | undefined): number | null {
  return text !== undefined && /^[-+]?(\d+\.?\d*|\.\d+)$/.test(text) ? Number(text) : null;
}

/** Whole number in low..high, or null. */
export function wholeField(text: string | undefined, low: number, high: number): number | null {
  if (text === undefined || !/^\d{1,10}$/.test(text)) return null;
  const value = Number(text);
  return value >= low && value <= high ? value : null;
}

/** `hhmmss` or `hhmmss.sss` to milliseconds of the UTC day, or null. Second 60 (a leap second) is allowed. */
export function timeOfDayField(text: string | undefined): number | null {
  const parts = /^(\d{2})(\d{2})(\d{2})(\.\d*)?$/.exec(text ?? '');
  if (!parts) return null;
  const [hours, minutes, seconds] = [Number(parts[1]), Number(parts[2]), Number(parts[3])];
  if (hours > 23 || minutes > 59 || seconds > 60) return null;
  const fraction = parts[4] === undefined || parts[4] === '.' ? 0 : Number(parts[4]);
  return (hours * 3600 + minutes * 60 + seconds) * 1000 + Math.round(fraction * 1e6) / 1000;
}

/** Day, month (1..12) and year to unix milliseconds at 00:00 UTC, or null where there is no such day. */
export function utcDay(day: number | null, month: number | null, year: number | null): number | null {
  if (day === null || month === null || year === null) return null;
  const ms = Date.UTC(year, month - 1, day);
  const made = new Date(ms);
  return made.getUTCDate() === day && made.getUTCMonth() === month - 1 ? ms : null;
}

/** `ddmmyy` to unix milliseconds at 00:00 UTC, or null. Years 80..99 are 1980..1999: GPS time begins in 1980. */
export function dateField(text: string | undefined): number | null {
  const parts = /^(\d{2})(\d{2})(\d{2})$/.exec(text ?? '');
  if (!parts) return null;
  const year = Number(parts[3]);
  return utcDay(Number(parts[1]), Number(parts[2]), year + (year >= 80 ? 1900 : 2000));
}

/**
 * `ddmm.mmm` or `dddmm.mmm` with its hemisphere to signed degrees (north, east positive), or null.
 * @param limit 90 for latitude, 180 for longitude
 */
export function angleField(text: string | undefined, hemisphere: string | undefined, limit: 90 | 180): number | null {
  const parts = /^(\d{2,3})(\d{2}(?:\.\d*)?)$/.exec(text ?? '');
  const [positive, negative] = limit === 90 ? ['N', 'S'] : ['E', 'W'];
  if (!parts || parts[1]?.length !== (limit === 90 ? 2 : 3) || (hemisphere !== positive && hemisphere !== negative)) return null;
  const minutes = Number(parts[2]);
  const degrees = Number(parts[1]) + minutes / 60;
  if (minutes >= 60 || degrees > limit) return null;
  return hemisphere === negative && degrees !== 0 ? -degrees : degrees;
}

/** Degrees true, 0..360, or null. */
export function courseField(text: string | undefined): number | null {
  const value = decimalField(text);
  return value !== null && value >= 0 && value <= 360 ? value : null;
}
