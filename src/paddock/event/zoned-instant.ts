/**
 * The instant at which clocks in an IANA zone show a date and a time of day; null where they never do (a time of day that
 * the change to summer time skips). Of two such instants, the earlier.
 */
export function zonedInstant(isoDate: string, time: string, timeZone: string): number | null {
  const wanted = Date.parse(`${isoDate}T${time}Z`);
  if (Number.isNaN(wanted)) return null;
  // Zones differ from UTC by at most 14 h: the offsets a day either side are the only two that can hold.
  const offsets = [wanted - DAY_MS, wanted + DAY_MS].map((near) => wallClock(near, timeZone) - near);
  const instants = offsets.map((offset) => wanted - offset).filter((instant) => wallClock(instant, timeZone) === wanted);
  return instants.length === 0 ? null : Math.min(...instants);
}

const DAY_MS = 86_400_000;

/** What a clock in the zone shows, read as if it were UTC, unix ms. */
export function wallClock(unixMs: number, timeZone: string): number {
  const fields = new Intl.DateTimeFormat('en-GB', {
    timeZone,
    year: 'numeric',
    month: '2-digit',
    day: '2-digit',
    hour: '2-digit',
    minute: '2-digit',
    second: '2-digit',
    hourCycle: 'h23',
  }).formatToParts(unixMs);
  const field = (type: Intl.DateTimeFormatPartTypes): string => fields.find((part) => part.type === type)?.value ?? '';
  return Date.parse(`${field('year')}-${field('month')}-${field('day')}T${field('hour')}:${field('minute')}:${field('second')}Z`);
}

export const dateInZone = (unixMs: number, timeZone: string): string => new Date(wallClock(unixMs, timeZone)).toISOString().slice(0, 10);
export const timeInZone = (unixMs: number, timeZone: string): string => new Date(wallClock(unixMs, timeZone)).toISOString().slice(11, 19);
