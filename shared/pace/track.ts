/**
 * What the car has covered, raw: wheel counts `w` and metres by GNSS `g`, by instant. Each knot is an instant at which
 * something changed. Only one of the two grows at a time, so distance = Δw × scale + Δg whatever the scale turns out to be.
 *
 * `recent` holds the last seconds in full, for the instant of a touch. `trace` holds the whole run sparsely; places passed by
 * distance come from it alone, so that deriving them again later gives the same bits.
 */
export interface Knots {
  /** Index of the first knot still kept; the arrays are cut back now and then, not at every knot. */
  head: number;
  at: number[];
  w: number[];
  g: number[];
}

export interface Track {
  recent: Knots;
  trace: Knots;
}

export interface Raw {
  readonly w: number;
  readonly g: number;
}

const RECENT_US = 5_000_000;
const TRACE_US = 250_000;
/** Much denser while the car pulls away: there a straight line between knots would bend the start. */
const TRACE_LAUNCH_US = 20_000;

const makeKnots = (): Knots => ({ head: 0, at: [], w: [], g: [] });
export const makeTrack = (): Track => ({ recent: makeKnots(), trace: makeKnots() });

function push(k: Knots, at: number, w: number, g: number): void {
  k.at.push(at);
  k.w.push(w);
  k.g.push(g);
}

/** Appends a knot; `at` must not lie before the last one. Returns true when the trace grew. */
export function addKnot(track: Track, at: number, w: number, g: number, launching: boolean): boolean {
  const { recent, trace } = track;
  const last = recent.at.length - 1;
  const lastTraced = trace.at.length === 0 ? Number.NEGATIVE_INFINITY : (trace.at[trace.at.length - 1] as number);
  push(recent, at, w, g);
  while (recent.head < last && (recent.at[recent.head + 1] as number) < at - RECENT_US) recent.head++;
  if (recent.head > 1024) dropHead(recent);
  if (at - lastTraced < (launching ? TRACE_LAUNCH_US : TRACE_US)) return false;
  if (last >= 0) keepStandstill(recent, trace, at, lastTraced);
  push(trace, at, w, g);
  return true;
}

/** A knot after a long rest: the end of the rest belongs in the trace too, or the car would seem to have crept. */
function keepStandstill(recent: Knots, trace: Knots, at: number, lastTraced: number): void {
  const i = recent.at.length - 2;
  const before = recent.at[i] as number;
  if (at - before > TRACE_US && before > lastTraced) push(trace, before, recent.w[i] as number, recent.g[i] as number);
}

function dropHead(k: Knots): void {
  k.at.splice(0, k.head);
  k.w.splice(0, k.head);
  k.g.splice(0, k.head);
  k.head = 0;
}

/** Raw values at an instant between two knots by straight line; before the first and after the last, that knot's own. */
function within(k: Knots, at: number): Raw {
  let low = k.head;
  let high = k.at.length - 1;
  if (at >= (k.at[high] as number)) return { w: k.w[high] as number, g: k.g[high] as number };
  if (at <= (k.at[low] as number)) return { w: k.w[low] as number, g: k.g[low] as number };
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if ((k.at[middle] as number) <= at) low = middle;
    else high = middle;
  }
  const [t0, t1] = [k.at[low] as number, k.at[high] as number];
  const f = t1 > t0 ? (at - t0) / (t1 - t0) : 1;
  const [w0, g0] = [k.w[low] as number, k.g[low] as number];
  return { w: w0 + ((k.w[high] as number) - w0) * f, g: g0 + ((k.g[high] as number) - g0) * f };
}

export const lastKnotAt = (track: Track): number | null => track.recent.at[track.recent.at.length - 1] ?? null;

/** Raw values at an instant: in full for the last seconds, else from the trace. Null before the first knot ever. */
export function rawAt(track: Track, at: number): Raw | null {
  const { recent, trace } = track;
  if (recent.at.length === 0) return null;
  return at >= (recent.at[recent.head] as number) ? within(recent, at) : within(trace, at);
}

/** Raw values at an instant from the trace alone. */
export const tracedAt = (track: Track, at: number): Raw | null => (track.trace.at.length === 0 ? null : within(track.trace, at));

/**
 * The wheel came back and its count went on: what GNSS bridged after `from` becomes counts, in GNSS's own proportions, ending
 * at `endW` where GNSS stood at `endG`. Knots from `until` on are dropped.
 */
export function bridgeToCounts(track: Track, from: { at: number; w: number; g: number }, until: number, endW: number, endG: number): void {
  const share = endG > from.g ? (endW - from.w) / (endG - from.g) : 0;
  for (const k of [track.recent, track.trace]) {
    while (k.at.length > k.head && (k.at[k.at.length - 1] as number) >= until && (k.at[k.at.length - 1] as number) > from.at) {
      k.at.pop();
      k.w.pop();
      k.g.pop();
    }
    for (let i = k.at.length - 1; i >= k.head && (k.at[i] as number) > from.at; i--) {
      k.w[i] = from.w + ((k.g[i] as number) - from.g) * share;
      k.g[i] = from.g;
    }
  }
}

/** Speed is read over at least this long. */
const RATE_US = 250_000;

/** Counts per second over the last knots, at least a quarter of a second apart where they are that close. */
export function rateNow(track: Track): number {
  const { at, w, head } = track.recent;
  const last = at.length - 1;
  let i = last - 1;
  while (i > head && (at[last] as number) - (at[i] as number) < RATE_US) i--;
  if (i < head) return 0;
  const us = (at[last] as number) - (at[i] as number);
  return us > 0 ? (((w[last] as number) - (w[i] as number)) * 1e6) / us : 0;
}
