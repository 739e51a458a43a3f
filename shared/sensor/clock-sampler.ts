import type { ClockV1, Unnumbered } from '#shared/journal/observation.ts';
import { addToHull, hullLine, makeLowerHull } from '#shared/lower-hull.ts';

/**
 * Samples of the official clock from the time in RMC and ZDA sentences. A sentence comes later than the time it states by an
 * unknown constant and by jitter. The jitter falls out of a lower envelope over windows of 10, 20, 40 and then 60 s, each of
 * sentences of its own; the constant is taken as 150 ms give or take 80 ms (one sigma; common practice, no source), and whoever
 * hears a better source learns it. One sentence is enough for a first sample.
 */
export interface ClockSampler {
  /** `utcMs` as stated by a sentence that arrived at `arrivalUs`; at most one sample every 10 s, save after a step of the receiver. */
  take(utcMs: number, arrivalUs: number): readonly Unnumbered<ClockV1>[];
}

const LATENCY_MS = 150;
const LATENCY_SIGMA_MS = 80;
/** Of one sentence nobody knows how late it was. */
const FIRST_SIGMA_MS = 100;
/** What an envelope's end scatters by, over the mean excess and the root of the count. By simulation. */
const SCATTER = 0.75;
const FIRST_WINDOW_MS = 10_000;
const LONGEST_MS = 60_000;
/** A receiver that corrects its clock by more than this has set it anew. */
const STEP_MS = 2000;
/** Crystals differ by less. */
const STEEPEST = 100e-6;

export function createClockSampler(): ClockSampler {
  let hull = makeLowerHull();
  /** Arrival less stamp of the latest sentence, ms; null before any. */
  let last: number | null = null;
  let window = { from: 0, offset: 0, span: FIRST_WINDOW_MS };

  const begin = (from: number, offset: number, span: number): void => {
    hull = makeLowerHull();
    window = { from, offset, span };
  };
  const sample = (arrivalUs: number, offset: number, sigma: number): Unnumbered<ClockV1> => ({
    type: 'clock.v1',
    at: Math.round(arrivalUs),
    source: 'nmea',
    officialMs: arrivalUs / 1000 - offset + LATENCY_MS,
    uncertaintyMs: Math.hypot(LATENCY_SIGMA_MS, sigma),
  });

  return {
    take(utcMs, arrivalUs) {
      const arrivalMs = arrivalUs / 1000;
      const offset = arrivalMs - utcMs;
      const first = last === null || Math.abs(offset - last) > STEP_MS;
      last = offset;
      if (first) begin(arrivalMs, offset, FIRST_WINDOW_MS);
      addToHull(hull, arrivalMs - window.from, offset - window.offset);
      if (first) return [sample(arrivalUs, offset, FIRST_SIGMA_MS)];
      const passed = arrivalMs - window.from;
      const line = passed < window.span ? null : hullLine(hull, STEEPEST);
      if (line === null) return [];
      const scatter = Math.max(1, (SCATTER * line.excess) / Math.sqrt(hull.n));
      const envelope = window.offset + line.y + line.slope * (passed - line.x);
      begin(arrivalMs, offset, Math.min(LONGEST_MS, window.span * 2));
      return [sample(arrivalUs, envelope, scatter)];
    },
  };
}
