import { DAY_MS } from './nmea-fields.ts';

/** Dates from receivers: week rollover repaired, sentences without a date given the nearest day. */
export interface UtcTracker {
  /**
   * Unix milliseconds of a time of day. With `dayMs` (00:00 UTC of the sentence's own date) the date is learnt; without,
   * the day nearest to the last known instant is taken, or null if no date has been seen.
   */
  utcMs(timeOfDayMs: number | null, dayMs: number | null): number | null;
}

/** The GPS week number has ten bits in the civil message: dates repeat after 1024 weeks. Source: IS-GPS-200. */
const ROLLOVER_MS = 1024 * 7 * DAY_MS;
const TEN_YEARS_MS = 3652.5 * DAY_MS;

/** Adds whole rollovers to a date more than ten years before `floorMs` (no receiver in use can be that far back). */
export function repairWeekRollover(ms: number, floorMs: number | null): number {
  let repaired = ms;
  while (floorMs !== null && repaired < floorMs - TEN_YEARS_MS) repaired += ROLLOVER_MS;
  return repaired;
}

/** @param floorMs an instant that the present cannot precede, such as the build's; null to take dates as they come */
export function createUtcTracker(floorMs: number | null): UtcTracker {
  let known: number | null = null;
  return {
    utcMs(timeOfDayMs, dayMs) {
      if (timeOfDayMs === null) return null;
      if (dayMs !== null) known = repairWeekRollover(dayMs, floorMs) + timeOfDayMs;
      else if (known !== null) {
        const sameDay = Math.floor(known / DAY_MS) * DAY_MS + timeOfDayMs;
        known = sameDay - DAY_MS * Math.round((sameDay - known) / DAY_MS);
      }
      return known;
    },
  };
}
