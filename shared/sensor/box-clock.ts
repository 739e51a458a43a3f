import { createLowerEnvelope } from './lower-envelope.ts';
import { WRAP } from './pulse-sentence.ts';

/**
 * The pulse box's clock mapped onto the session clock, so that a pulse carries the instant it happened and not the
 * jittery instant its line arrived. What remains is the least delay of the path (a few milliseconds on a wire), the same
 * for every pulse.
 *
 * A restarted box begins near 0 again. It shows as box time running back, as box time ahead of the arrivals, or, where
 * both hide it, as lines that are all late by more than `STALE_US` for `STALE_WINDOW_US`: the map then starts afresh.
 */
export interface BoxClock {
  /** Session clock instant, whole microseconds, of the box's `boxUs` that arrived at `arrivalUs`. */
  map(boxUs: number, arrivalUs: number): number;
  /** How often the map has had to start afresh. */
  readonly restarts: number;
}

/** Crystals of cheap boxes and tablets differ by some tens of ppm. Common practice, no source. */
const ALLOWANCE = 100e-6;
/** Sentences of one box may be out of order by the length of its send queue, not more. */
const BACK_US = 1e6;
const AHEAD_US = 2e6;
const STALE_US = 1e6;
const STALE_WINDOW_US = 5e6;

interface Last {
  readonly raw: number;
  readonly total: number;
  readonly arrival: number;
}

/** @param pace session microseconds in one of the wire's: delays of the path happen in the wire's time (1 on a real run). */
export function createBoxClock(pace = 1): BoxClock {
  const [backUs, aheadUs, staleUs, windowUs] = [BACK_US, AHEAD_US, STALE_US, STALE_WINDOW_US].map((us) => us * pace) as [
    number,
    number,
    number,
    number,
  ];
  const envelope = createLowerEnvelope(ALLOWANCE);
  let last: Last | null = null;
  let restarts = 0;
  let window = { until: 0, least: Number.POSITIVE_INFINITY };

  const startAfresh = (arrival: number): void => {
    envelope.reset();
    window = { until: arrival + windowUs, least: Number.POSITIVE_INFINITY };
  };

  const isStale = (arrival: number, lateness: number): boolean => {
    window.least = Math.min(window.least, lateness);
    if (arrival < window.until) return false;
    const stale = window.least > staleUs;
    window = { until: arrival + windowUs, least: Number.POSITIVE_INFINITY };
    return stale;
  };

  return {
    map(boxUs, arrivalUs) {
      const total: number = last === null ? boxUs : last.total + unwrappedStep(last, boxUs, arrivalUs);
      const offset = arrivalUs - total;
      const before = envelope.value;
      if (last === null || before === null) startAfresh(arrivalUs);
      else if (total - last.total < -backUs || offset - before < -aheadUs || isStale(arrivalUs, offset - before)) {
        restarts += 1;
        startAfresh(arrivalUs);
      }
      last = { raw: boxUs, total, arrival: arrivalUs };
      return Math.round(total + envelope.add(arrivalUs, offset));
    },
    get restarts() {
      return restarts;
    },
  };
}

/** Box time since the last sentence: of all the steps that fit modulo 2^32, the one nearest to the arrivals' step. */
function unwrappedStep(last: Last, raw: number, arrival: number): number {
  const step = raw - last.raw;
  return step + WRAP * Math.round((arrival - last.arrival - step) / WRAP);
}
