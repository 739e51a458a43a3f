import type { SurveyedPoint } from '#shared/course/course-book.ts';
import type { NewObservation } from '#shared/journal/observation.ts';
import type { Path } from './path.ts';

/** One recorded drive, ready for the engine. Session seconds throughout. */
export interface RecordedDrive {
  readonly name: string;
  /** What the truth is, for the table's foot. */
  readonly truthBy: string;
  readonly truth: Path;
  readonly releaseT: number;
  readonly stagedBehindM: number;
  readonly lengthM: number;
  /** As they arrived, in order. */
  readonly arrived: readonly Arrived[];
  /** Wheels by channel, with the scale known before the drive. */
  readonly wheels: readonly RecordedWheel[];
  readonly gnss: { readonly speed: boolean; readonly position: boolean };
  /** A line surveyed by other equipment or on another pass; null where the only line is the drive's own. */
  readonly geometry: readonly SurveyedPoint[] | null;
}

export interface Arrived {
  readonly t: number;
  readonly observation: NewObservation;
}

export interface RecordedWheel {
  readonly name: string;
  readonly channel: number;
  readonly mmPerPulse: number;
  readonly scaleSigma: number;
}

const WRAP = 2 ** 32;
export const micro = (t: number): number => Math.round(t * 1e6);

export const pulse = (t: number, channel: number, count: number): Arrived => ({
  t,
  observation: { type: 'pulse.v1', at: micro(t), channel, count: ((Math.round(count) % WRAP) + WRAP) % WRAP, boxUs: micro(t) % WRAP },
});

export interface FixValues {
  readonly lat?: number | null;
  readonly lon?: number | null;
  readonly speed?: number | null;
  readonly accuracy?: number | null;
}

export const fix = (t: number, { lat = null, lon = null, speed = null, accuracy = null }: FixValues): Arrived => ({
  t,
  observation: { type: 'fix.v1', at: micro(t), via: 'nmea', lat, lon, speed, course: null, accuracy, utcMs: null },
});

/** Counts of a wheel known only by its speed: pulses of 50 mm by the trapezoid. */
export const SPEED_PULSE_MM = 50;
export function pulsesOfSpeed(rows: readonly { readonly t: number; readonly speed: number }[], channel: number): Arrived[] {
  let metres = 0;
  return rows.map(({ t, speed }, i) => {
    const before = rows[i - 1];
    if (before !== undefined) metres += ((speed + before.speed) / 2) * (t - before.t);
    return pulse(t, channel, Math.floor((metres * 1000) / SPEED_PULSE_MM));
  });
}

/** Surveyed points at least `step` metres apart. */
export function geometryOf(path: Path, step = 20): SurveyedPoint[] {
  const points: SurveyedPoint[] = [];
  for (const { lat, lon, metres } of path.points) {
    if (lat === null || lon === null) continue;
    const last = points.at(-1);
    if (last === undefined || metres >= last.d + step) points.push({ lat, lon, d: metres });
  }
  return points;
}

export const inOrder = (list: readonly Arrived[]): Arrived[] => [...list].sort((a, b) => a.t - b.t);
