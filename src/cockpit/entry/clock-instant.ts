import { formatClock } from '#shared/course/format.ts';
import { clockSeconds } from './entry-field.ts';

const DAY_S = 86_400;

/** Seconds of the day that a clock in the zone shows at that instant. */
function secondsOfDay(unixMs: number, timeZone: string): number {
  return clockSeconds(formatClock(unixMs, timeZone).replaceAll(':', '')) ?? 0;
}

/**
 * The instant nearest to `nearMs` at which a clock in the zone shows `wantedS` seconds of the day. Midnight and a change
 * to or from summer time in between are taken along; a time that the change leaves out gives null.
 */
export function instantOfClock(wantedS: number, nearMs: number, timeZone: string): number | null {
  const wholeMs = Math.floor(nearMs / 1000) * 1000;
  let delta = wantedS - secondsOfDay(wholeMs, timeZone);
  if (delta > DAY_S / 2) delta -= DAY_S;
  if (delta < -DAY_S / 2) delta += DAY_S;
  const first = wholeMs + delta * 1000;
  let off = wantedS - secondsOfDay(first, timeZone);
  if (off > DAY_S / 2) off -= DAY_S;
  if (off < -DAY_S / 2) off += DAY_S;
  const instant = first + off * 1000;
  return secondsOfDay(instant, timeZone) === wantedS ? instant : null;
}
