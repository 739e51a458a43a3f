import type { Pack } from '#shared/course/pack.ts';
import type { NewObservation, Observation } from '#shared/journal/observation.ts';

/** Closed-form drives: where the car is at any instant is one formula, so that every figure can be worked out beside the engine. */

/** Session instant of the release, microseconds. Official clock: releaseMs at this instant. */
export const RELEASE_US = 100_000_000;

export interface Motion {
  /** Metres truly driven since the release at t seconds after it; 0 before. */
  metresAt(t: number): number;
}

/** Standing start at a m/s² up to v m/s, then steady. `late`: reaction in seconds. */
export function fromRest(a: number, v: number, late = 0): Motion {
  const ramp = v / a;
  return {
    metresAt(t) {
      const u = Math.max(0, t - late);
      return u < ramp ? (a * u * u) / 2 : (v * v) / (2 * a) + v * (u - ramp);
    },
  };
}

export interface DriveOptions {
  readonly hz?: number;
  /** Seconds after the release. */
  readonly until: number;
  readonly from?: number;
  /** True metres of a pulse. */
  readonly metresPerPulse?: number;
  readonly firstCount?: number;
  readonly channel?: number;
}

/** Polled records of one channel: the count is whole, the instant is the poll's. */
export function pulses(motion: Motion, options: DriveOptions): NewObservation[] {
  const { hz = 20, until, from = -10, metresPerPulse = 0.25, firstCount = 0, channel = 0 } = options;
  const list: NewObservation[] = [];
  for (let i = Math.ceil(from * hz); i <= until * hz; i++) {
    const t = i / hz;
    const at = Math.round(RELEASE_US + t * 1e6);
    const count = (firstCount + Math.floor(motion.metresAt(t) / metresPerPulse + 1e-9)) % 2 ** 32;
    list.push({ type: 'pulse.v1', at, channel, count, boxUs: (at + 4_000_000_000) % 2 ** 32 });
  }
  return list;
}

export function fixes(motion: Motion, options: { hz?: number; until: number; from?: number; latency?: number }): NewObservation[] {
  const { hz = 10, until, from = -10, latency = 0 } = options;
  const list: NewObservation[] = [];
  for (let i = Math.ceil(from * hz); i <= until * hz; i++) {
    const t = i / hz;
    const speed = (motion.metresAt(t + 0.0005) - motion.metresAt(t - 0.0005)) / 0.001;
    const at = Math.round(RELEASE_US + (t + latency) * 1e6);
    list.push({ type: 'fix.v1', at, via: 'nmea', lat: null, lon: null, speed, course: null, accuracy: null, utcMs: null });
  }
  return list;
}

/** Instant, seconds after the release, at which the motion has covered the metres: bisection on the formula. */
export function instantOf(motion: Motion, metres: number): number {
  let [low, high] = [0, 100_000];
  for (let i = 0; i < 200; i++) {
    const middle = (low + high) / 2;
    if (motion.metresAt(middle) < metres) low = middle;
    else high = middle;
  }
  return high;
}

export const clockCheck = (p: Pack): NewObservation => ({
  type: 'clock.v1',
  at: RELEASE_US - 20_000_000,
  source: 'exchange',
  officialMs: (p.attempt.releaseMs ?? 0) - 20_000,
  uncertaintyMs: 5,
});

export const tapAt = (t: number, checkpoint: string | null = null, input: 'glass' | 'wired' = 'glass'): NewObservation => ({
  type: 'tap.v1',
  at: Math.round(RELEASE_US + t * 1e6),
  input,
  checkpoint,
});

/** In order of instant, numbered. Equal instants keep the order given. */
export function journal(...lists: readonly (readonly NewObservation[])[]): Observation[] {
  return lists
    .flat()
    .map((o, i) => ({ o, i }))
    .sort((a, b) => a.o.at - b.o.at || a.i - b.i)
    .map(({ o }, seq) => ({ ...o, seq }) as Observation);
}
