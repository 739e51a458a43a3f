import type { Aids } from '#shared/course/race-class.ts';
import { createRandom } from '#shared/drive/random.ts';
import type { NewObservation, Observation } from '#shared/journal/observation.ts';
import { takeGnss } from '#shared/pace/gnss-source.ts';
import { makeOdometer, type Odometer } from '#shared/pace/odometer.ts';
import type { Surveyed } from '#shared/pace/projected-fixes.ts';
import { takePulse } from '#shared/pace/wheel-source.ts';
import type { Motion } from '#tests/unit/pace/drives.ts';
import { us } from '#tests/unit/pace/folds.ts';

/** Drives for the two sources together: the odometer alone, fed in order. */

export const ALL: Aids = { wheel: true, gnssSpeed: true, gnssPosition: true, dataLink: false };

export interface FeedOptions {
  readonly metresPerPulse?: number;
  readonly aids?: Aids;
  readonly surveyed?: Surveyed | null;
  readonly driven?: boolean;
  readonly each?: (o: Odometer, at: number) => void;
}

export function feed(observations: readonly (NewObservation | Observation)[], options: FeedOptions = {}): Odometer {
  const { metresPerPulse = 0.25, aids = ALL, surveyed = null, driven = false, each } = options;
  const o = makeOdometer();
  let now = 0;
  observations.forEach((observation, seq) => {
    now = Math.max(now, observation.at);
    const known = { ...observation, seq } as Observation;
    if (known.type === 'pulse.v1') takePulse(o, known, { channel: 0 }, aids, metresPerPulse);
    else if (known.type === 'fix.v1') takeGnss(o, known, aids, now, metresPerPulse, surveyed, driven);
    each?.(o, now);
  });
  return o;
}

/** Speeds along a list of (seconds, m/s), straight between them: a launch and some zones. */
export function motionOf(points: readonly (readonly [number, number])[]): Motion & { speedAt(t: number): number } {
  const speedAt = (t: number): number => {
    const i = points.findIndex(([u]) => u >= t);
    if (i < 0) return (points[points.length - 1] as readonly [number, number])[1];
    if (i === 0) return (points[0] as readonly [number, number])[1];
    const [[t0, v0], [t1, v1]] = [points[i - 1], points[i]] as [readonly [number, number], readonly [number, number]];
    return v0 + ((v1 - v0) * (t - t0)) / (t1 - t0);
  };
  return {
    speedAt,
    metresAt(t) {
      let metres = 0;
      let [t0, v0] = points[0] as readonly [number, number];
      for (const [u] of points.slice(1)) {
        if (t <= t0) break;
        const to = Math.min(u, t);
        const v1 = speedAt(to);
        metres += ((v0 + v1) / 2) * (to - t0);
        [t0, v0] = [to, v1];
      }
      return t > t0 ? metres + v0 * (t - t0) : metres;
    },
  };
}

/** From rest to 45 m/s at 2.5 m/s², down to 20 for a zone, up again, and on. */
export const zoned = motionOf([
  [0.5, 0],
  [18.5, 45],
  [60, 45],
  [68, 20],
  [90, 20],
  [100, 45],
  [300, 45],
]);

export interface NoisyOptions {
  readonly until: number;
  readonly from?: number;
  readonly hz?: number;
  readonly seed: number;
  /** Seconds: steady lateness, and what jitters on top. */
  readonly latency: number;
  readonly jitter?: number;
  readonly via?: 'nmea' | 'geolocation';
  readonly utc?: boolean;
  readonly place?: (metres: number) => { readonly lat: number; readonly lon: number; readonly course: number };
  /** One sigma of a position, m. */
  readonly off?: number;
}

/** Fixes with a receiver's noise: 0.08 m/s from fix to fix. */
export function noisyFixes(motion: Motion, o: NoisyOptions): NewObservation[] {
  const { until, from = -10, hz = 5, latency, jitter = 0.03, via = 'nmea', utc = true, place, off = 0 } = o;
  const random = createRandom(o.seed, 'fixes');
  const list: NewObservation[] = [];
  for (let i = Math.ceil(from * hz); i <= until * hz; i++) {
    const t = i / hz;
    const true_ = (motion.metresAt(t + 0.0005) - motion.metresAt(t - 0.0005)) / 0.001;
    const here = place?.(motion.metresAt(t));
    const [n, e] = [random.gauss(off) / 111_200, random.gauss(off) / 78_700];
    list.push({
      type: 'fix.v1',
      at: us(t + latency + random.range(0, jitter)),
      via,
      lat: here === undefined ? null : here.lat + n,
      lon: here === undefined ? null : here.lon + e,
      speed: Math.max(0, true_ + random.gauss(0.08)),
      course: here?.course ?? null,
      accuracy: here === undefined ? null : 2.448 * Math.max(off, 1),
      utcMs: utc ? 1_800_000_000_000 + Math.round(t * 1000) : null,
    });
  }
  return list;
}
