import type { FixV1 } from '#shared/journal/observation.ts';

/**
 * Sentences come after the receiver's instant by a time that jitters with the port and the page. The receiver's own clock does
 * not jitter: a fix is stamped by it, with the usual distance between the two clocks, so that only a steady lateness is left.
 */
export interface GnssStamp {
  /** Session instant of a fix less its receiver time, µs, averaged over the last `n`. */
  offsetUs: number;
  n: number;
}

export const makeGnssStamp = (): GnssStamp => ({ offsetUs: 0, n: 0 });

/** Beyond the year 2200 a receiver's clock tells nothing, and whole microseconds would not be exact. */
const LATEST_MS = 7_258_118_400_000;
/** Averaged over as many fixes at most. */
const LONGEST = 50;
/** Further off than this the receiver's clock was set, or the session clock was bridged: begin again. */
const SET_US = 300_000;

/** Session instant of a fix with the jitter taken off, whole µs. `anew`: it comes by another source. */
export function stampOf(stamp: GnssStamp, fix: FixV1, anew: boolean): number {
  if (typeof fix.utcMs !== 'number' || !(Math.abs(fix.utcMs) < LATEST_MS)) return fix.at;
  const off = fix.at - fix.utcMs * 1000 - stamp.offsetUs;
  if (anew || stamp.n === 0 || !(Math.abs(off) <= SET_US)) {
    stamp.offsetUs = fix.at - fix.utcMs * 1000;
    stamp.n = 1;
    return fix.at;
  }
  stamp.n = Math.min(stamp.n + 1, LONGEST);
  stamp.offsetUs += off / stamp.n;
  return Math.round(fix.utcMs * 1000 + stamp.offsetUs);
}
