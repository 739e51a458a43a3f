import { formatClock } from '#shared/course/format.ts';

/** Instants and ages in words, always in a named zone. English only, through Intl. */

export function formatDay(unixMs: number, timeZone: string): string {
  return new Intl.DateTimeFormat('en-GB', { timeZone, weekday: 'short', day: 'numeric', month: 'short', year: 'numeric' }).format(unixMs);
}

/** `10:42:00 Europe/Vienna`; tenths only where they matter. */
export const clockInZone = (unixMs: number, timeZone: string): string => `${formatClock(unixMs, timeZone)} ${timeZone}`;

export const dayAndClock = (unixMs: number, timeZone: string): string => `${formatDay(unixMs, timeZone)}, ${clockInZone(unixMs, timeZone)}`;

/** `2026-06-12` to `12 Jun 2026`. */
export function formatDate(isoDate: string): string {
  return new Intl.DateTimeFormat('en-GB', { timeZone: 'UTC', day: 'numeric', month: 'short', year: 'numeric' }).format(
    Date.parse(`${isoDate}T00:00:00Z`),
  );
}

const STEPS: readonly [Intl.RelativeTimeFormatUnit, number][] = [
  ['day', 86_400_000],
  ['hour', 3_600_000],
  ['minute', 60_000],
];

/** `3 minutes ago`, `in 2 hours`; within a minute `just now`. */
export function relativeAge(thenMs: number, nowMs: number): string {
  const span = thenMs - nowMs;
  for (const [unit, size] of STEPS) {
    if (Math.abs(span) >= size) return new Intl.RelativeTimeFormat('en-GB', { numeric: 'always' }).format(Math.trunc(span / size), unit);
  }
  return 'just now';
}

/** The zone of whoever looks, for instants that belong to the device and not to an event. */
export const deviceZone = (): string => Intl.DateTimeFormat().resolvedOptions().timeZone;
