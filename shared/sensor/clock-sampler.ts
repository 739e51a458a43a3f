import type { ClockV1, Unnumbered } from '#shared/journal/observation.ts';
import { createLowerEnvelope } from './lower-envelope.ts';

/**
 * Samples of the official clock from the time in RMC and ZDA sentences. A sentence comes later than the time it states
 * by an unknown constant and by jitter; the jitter falls out of a lower envelope, the constant is taken as 150 ms give or
 * take 80 ms (one sigma; common practice, no source) until a better source is heard.
 */
export interface ClockSampler {
  /** `utcMs` as stated by a sentence that arrived at `arrivalUs`; at most one sample every 10 s. */
  take(utcMs: number, arrivalUs: number): readonly Unnumbered<ClockV1>[];
}

const LATENCY_MS = 150;
const LATENCY_SIGMA_MS = 80;
/** Jitter still in the envelope while it rests on fewer than `SETTLED` sentences. */
const UNSETTLED_SIGMA_MS = 100;
const SETTLED = 10;
const INTERVAL_US = 10e6;
/** A receiver that corrects its clock by more than this has set it anew. */
const STEP_MS = 2000;
const ALLOWANCE = 100e-6;

export function createClockSampler(): ClockSampler {
  const envelope = createLowerEnvelope(ALLOWANCE);
  let taken = 0;
  let due = Number.NEGATIVE_INFINITY;
  return {
    take(utcMs, arrivalUs) {
      const arrivalMs = arrivalUs / 1000;
      const offset = arrivalMs - utcMs;
      if (envelope.value !== null && Math.abs(offset - envelope.value) > STEP_MS) {
        envelope.reset();
        taken = 0;
        due = Number.NEGATIVE_INFINITY;
      }
      const least = envelope.add(arrivalMs, offset);
      taken += 1;
      if (arrivalUs < due) return [];
      due = arrivalUs + INTERVAL_US;
      const uncertaintyMs = taken < SETTLED ? Math.hypot(LATENCY_SIGMA_MS, UNSETTLED_SIGMA_MS) : LATENCY_SIGMA_MS;
      return [{ type: 'clock.v1', at: Math.round(arrivalUs), source: 'nmea', officialMs: arrivalMs - least + LATENCY_MS, uncertaintyMs }];
    },
  };
}
