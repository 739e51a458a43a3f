import { coldnessAfter, speedSquare } from '#shared/pace/heat.ts';

/**
 * What the car has covered, raw: wheel counts `w` and metres by GNSS `g`, by instant. Each knot is an instant at which
 * something changed. Distance = Δw × scale + Δg whatever the scale turns out to be. The trace also sums the counts weighted by
 * how cold the tyres were (`h`) and by the square of speed (`u`), so that a change of either can be estimated later.
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

export interface Trace extends Knots {
  /** ∫ coldness dw, and ∫ (v/50)² dw; counts. */
  h: number[];
  u: number[];
  /** Coldness at the knot, 0..1. */
  cold: number[];
}

export interface Track {
  recent: Knots;
  trace: Trace;
  /** Nominal metres per count: tells how fast the car is, never how far. */
  perCount: number;
}

export interface Counts {
  readonly w: number;
  readonly g: number;
}

export interface Raw extends Counts {
  readonly h: number;
  readonly u: number;
}

const RECENT_US = 5_000_000;
const TRACE_US = 250_000;
/** Much denser while the car pulls away: there a straight line between knots would bend the start. */
const TRACE_LAUNCH_US = 20_000;

// no spread: every trace would be of a kind of its own, and what meets many of them slow
export const makeTrack = (): Track => ({
  recent: { head: 0, at: [], w: [], g: [] },
  trace: { head: 0, at: [], w: [], g: [], h: [], u: [], cold: [] },
  perCount: 0,
});

function push(k: Knots, at: number, w: number, g: number): void {
  const n = k.at.length;
  k.at[n] = at;
  k.w[n] = w;
  k.g[n] = g;
}

/** Appends a knot; `at` must not lie before the last one. Returns true when the trace grew. */
export function addKnot(track: Track, at: number, w: number, g: number, launching: boolean): boolean {
  const { recent } = track;
  const last = recent.at.length - 1;
  push(recent, at, w, g);
  while (recent.head < last && (recent.at[recent.head + 1] as number) < at - RECENT_US) recent.head++;
  if (recent.head > 1024) dropHead(recent);
  const lastTraced = track.trace.at[track.trace.at.length - 1] ?? Number.NEGATIVE_INFINITY;
  if (at - lastTraced < (launching ? TRACE_LAUNCH_US : TRACE_US)) return false;
  if (last >= 0) keepStandstill(track, at, lastTraced);
  pushTrace(track, at, w, g);
  return true;
}

/** Coldness before anything is known: the tyres have stood. */
const COLD = 1;

function pushTrace({ trace, perCount }: Track, at: number, w: number, g: number): void {
  const last = trace.at.length - 1;
  push(trace, at, w, g);
  trace.h.push(0);
  trace.u.push(0);
  trace.cold.push(COLD);
  if (last >= 0) sumHeat(trace, last + 1, perCount);
  if (trace.at.length > MOST_TRACED) thin(trace);
}

/** Four and a half hours of driving; a longer trace keeps every other knot of its older half, so that memory stays bounded. */
const MOST_TRACED = 65_536;

function thin(trace: Trace): void {
  const kept = (_: number, i: number): boolean => i >= MOST_TRACED / 2 || i % 2 === 0;
  for (const column of ['at', 'w', 'g', 'h', 'u', 'cold'] as const) trace[column] = trace[column].filter(kept);
}

/** Coldness and sums of one knot of the trace, from the knot before. */
function sumHeat(trace: Trace, i: number, perCount: number): void {
  const { at, w, g, h, u, cold } = trace;
  const [dw, dt] = [(w[i] as number) - (w[i - 1] as number), ((at[i] as number) - (at[i - 1] as number)) / 1e6];
  const speed = dt > 0 ? Math.abs(dw * perCount + ((g[i] as number) - (g[i - 1] as number))) / dt : 0;
  cold[i] = coldnessAfter(cold[i - 1] as number, dt, speed);
  h[i] = (h[i - 1] as number) + ((cold[i] as number) + (cold[i - 1] as number)) * 0.5 * dw;
  u[i] = (u[i - 1] as number) + speedSquare(speed) * dw;
}

/** A knot after a long rest: the end of the rest belongs in the trace too, or the car would seem to have crept. */
function keepStandstill(track: Track, at: number, lastTraced: number): void {
  const { recent } = track;
  const i = recent.at.length - 2;
  const before = recent.at[i] as number;
  if (at - before > TRACE_US && before > lastTraced) pushTrace(track, before, recent.w[i] as number, recent.g[i] as number);
}

function dropHead(k: Knots): void {
  k.at.splice(0, k.head);
  k.w.splice(0, k.head);
  k.g.splice(0, k.head);
  k.head = 0;
}

/** Counts and GNSS metres at an instant between two knots by straight line; before the first and after the last, that knot's own. */
function within(k: Knots, at: number): Counts {
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

/** Index of the last knot of the trace not after an instant; the first where all are. */
function tracedBefore({ at }: Trace, instant: number): number {
  let low = 0;
  let high = at.length - 1;
  while (low < high) {
    const middle = (low + high + 1) >> 1;
    if ((at[middle] as number) <= instant) low = middle;
    else high = middle - 1;
  }
  return low;
}

/** The weighted sums at given counts, near an instant: they change slowly, so the slopes up to the knot before will do. A later knot changes nothing. */
export function withHeat({ trace }: Track, at: number, { w, g }: Counts): Raw {
  if (trace.at.length === 0) return { w, g, h: 0, u: 0 };
  const i = tracedBefore(trace, at);
  const dw = w - (trace.w[i] as number);
  const slope = slopesAfter(trace, i - 1);
  return { w, g, h: (trace.h[i] as number) + slope.h * dw, u: (trace.u[i] as number) + slope.u * dw };
}

function slopesAfter(trace: Trace, i: number): { h: number; u: number } {
  if (i < 0) return { h: COLD, u: 0 };
  const dw = (trace.w[i + 1] as number) - (trace.w[i] as number);
  if (dw === 0) return { h: trace.cold[i + 1] as number, u: 0 };
  return { h: ((trace.h[i + 1] as number) - (trace.h[i] as number)) / dw, u: ((trace.u[i + 1] as number) - (trace.u[i] as number)) / dw };
}

/** Coldness of the tyres at an instant, 0..1. */
export const coldnessAt = ({ trace }: Track, at: number): number =>
  trace.at.length === 0 ? COLD : (trace.cold[tracedBefore(trace, at)] as number);

/** Coldness and (v/50)² at the end of the trace. */
export function heatNow({ trace }: Track): { readonly coldness: number; readonly square: number } {
  const last = trace.at.length - 1;
  return { coldness: trace.cold[last] ?? COLD, square: slopesAfter(trace, last - 1).u };
}

export const lastKnotAt = (track: Track): number | null => track.recent.at[track.recent.at.length - 1] ?? null;

/** Raw values at an instant: in full for the last seconds, else from the trace. Null before the first knot ever. */
export function rawAt(track: Track, at: number): Raw | null {
  const { recent, trace } = track;
  if (recent.at.length === 0) return null;
  return withHeat(track, at, at >= (recent.at[recent.head] as number) ? within(recent, at) : within(trace, at));
}

/** Raw values at an instant from the trace alone. */
export const tracedAt = (track: Track, at: number): Raw | null =>
  track.trace.at.length === 0 ? null : withHeat(track, at, within(track.trace, at));

/** Raw values of one knot of the trace. */
export const knotAt = ({ w, g, h, u }: Trace, i: number): Raw => ({
  w: w[i] as number,
  g: g[i] as number,
  h: h[i] as number,
  u: u[i] as number,
});

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
  sumHeatAnew(track, from.at);
}

/** The end of the trace was told anew: so are its sums. */
function sumHeatAnew({ trace, perCount }: Track, from: number): void {
  const { at, h, u, cold } = trace;
  for (const sums of [h, u, cold]) sums.length = at.length;
  for (let i = Math.max(1, tracedBefore(trace, from) + 1); i < at.length; i++) sumHeat(trace, i, perCount);
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
