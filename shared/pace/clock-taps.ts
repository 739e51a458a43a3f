/**
 * An official clock that can only be seen, taken by touches in its rhythm: on ten or more of its seconds running. Whoever taps along
 * anticipates by an amount of their own, the same in every touch; taps along the device's own flash show it, and it is taken off.
 */

/** How early (−) or late (+) a person taps along what they see, ms, one sigma beside it. */
export interface OwnRhythm {
  readonly lateMs: number;
  readonly sigmaMs: number;
}

export interface TapSet {
  /** Session instant, microseconds, at which the second of the last touch began on the official clock. */
  readonly at: number;
  readonly sigmaMs: number;
}

export const LEAST_TOUCHES = 10;
export const OWN_TOUCHES = 15;
/** What people unknown to us anticipate by, one sigma; and what their eye makes of another display than ours. Judgement, ms. */
const UNKNOWN_RHYTHM: OwnRhythm = { lateMs: 0, sigmaMs: 30 };
const OTHER_DISPLAY_MS = 12;
/** A touch this far from the others was a slip. ms */
const SLIP_MS = 150;
/** Of the median of normal errors over that of their mean. */
const MEDIAN = 1.25;

/** @param touches session instants, microseconds, in order. Null while fewer than ten keep the rhythm of a second. */
export function tapSetOf(touches: readonly number[], own: OwnRhythm = UNKNOWN_RHYTHM): TapSet | null {
  const first = touches[0];
  if (first === undefined) return null;
  const { seconds, late } = rhythm(touches, first);
  const found = middle(late);
  if (found === null || found.n < LEAST_TOUCHES) return null;
  return {
    at: Math.round(first + seconds * 1e6 + (found.median - own.lateMs) * 1000),
    sigmaMs: Math.hypot(found.sigmaMs, own.sigmaMs, OTHER_DISPLAY_MS),
  };
}

/** From touches along the device's own flash, whose seconds begin at `flash` and every second from it on (session microseconds). */
export function ownRhythm(touches: readonly number[], flash: number): OwnRhythm | null {
  const late = touches.map((t) => (t - flash - 1e6 * Math.round((t - flash) / 1e6)) / 1000);
  const found = middle(late);
  return found === null || found.n < LEAST_TOUCHES ? null : { lateMs: found.median, sigmaMs: found.sigmaMs };
}

/** Seconds from the first touch to the last, whole, and how late each touch was against the first one's rhythm, ms. */
function rhythm(touches: readonly number[], first: number): { readonly seconds: number; readonly late: number[] } {
  let seconds = 0;
  let before = first;
  const late = touches.map((t) => {
    seconds += Math.round((t - before) / 1e6);
    before = t;
    return (t - first) / 1000 - seconds * 1000;
  });
  return { seconds, late };
}

function middle(late: readonly number[]): { readonly median: number; readonly sigmaMs: number; readonly n: number } | null {
  const rough = medianOf(late);
  const kept = late.filter((ms) => Math.abs(ms - rough) < SLIP_MS);
  if (kept.length < 2) return null;
  const median = medianOf(kept);
  const spread = Math.sqrt(kept.reduce((sum, ms) => sum + (ms - median) ** 2, 0) / (kept.length - 1));
  return { median, sigmaMs: (MEDIAN * spread) / Math.sqrt(kept.length), n: kept.length };
}

function medianOf(values: readonly number[]): number {
  const sorted = values.toSorted((a, b) => a - b);
  const half = (sorted.length - 1) / 2;
  return ((sorted[Math.floor(half)] ?? 0) + (sorted[Math.ceil(half)] ?? 0)) / 2;
}
