import { formatDuration } from '#shared/course/format.ts';

/** The last minute is told in seconds alone; `0` stands from the release on. */
export function countdownText(toReleaseS: number): string {
  const whole = Math.max(0, Math.ceil(toReleaseS - 1e-6));
  return whole <= 60 ? String(whole) : formatDuration(whole);
}

const TICKS_FROM_S = 10;

/** The tick that belongs to this instant: 10 … 1, and 0 for the second after the release; null while silent. */
export function tickAt(toReleaseS: number): number | null {
  if (toReleaseS <= -1) return null;
  const whole = Math.max(0, Math.ceil(toReleaseS - 1e-6));
  return whole <= TICKS_FROM_S ? whole : null;
}
