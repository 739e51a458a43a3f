/**
 * When the car began to move from rest. Works on raw metres (nominal scale) and instants only: which launch was the start is
 * decided later, from the release.
 */
export interface Launch {
  /** Raw place of the rest before it: metres by the nominal scale, counts, metres by GNSS. */
  readonly r: number;
  readonly w: number;
  readonly g: number;
  /** First knot that had moved. */
  readonly movedAt: number;
  readonly first: FirstMovement;
}

/** Moving off, not yet far enough to call it a launch. */
export interface MovingOff extends Launch {
  /** Instants and metres since rest of the first knots. */
  readonly t: number[];
  readonly s: number[];
}

export interface FirstMovement {
  /** Instant, microseconds; fractions allowed. */
  readonly at: number;
  /** Metres between the last count at rest and the car's true place at rest, 0 up to one pulse. */
  readonly within: number;
}

export interface LaunchWatch {
  /** Where the car has been still (or was last seen), and since when. */
  cell: { at: number; r: number; w: number; g: number } | null;
  current: MovingOff | null;
  done: Launch[];
}

export const makeLaunchWatch = (): LaunchWatch => ({ cell: null, current: null, done: [] });

/** A car that stayed within this for this long stood still. A standing encoder dithers by a count or two. */
const STILL_M = 0.02;
const STILL_US = 700_000;
const STEP_M = 1;
/** Further than a shuffle on the grid. */
const LAUNCH_M = 6;
const APART_US = 20_000;

export type LaunchEvent = 'none' | 'moved' | 'complete';

/** True while the first metres are being driven. */
export const isLaunching = (watch: LaunchWatch): boolean => watch.current !== null;

export interface LaunchKnot {
  readonly at: number;
  /** Raw metres by the nominal scale, counts, metres by GNSS. */
  readonly r: number;
  readonly w: number;
  readonly g: number;
  /** Last record that showed no movement. */
  readonly stillAt: number;
  /** One pulse of the source, metres; 0 for GNSS. */
  readonly pulseMetres: number;
}

/** Takes a knot. */
export function watchLaunch(watch: LaunchWatch, { at, r, w, g, stillAt, pulseMetres }: LaunchKnot): LaunchEvent {
  const { cell, current } = watch;
  if (cell === null) {
    watch.cell = { at, r, w, g };
    return 'none';
  }
  if (Math.abs(r - cell.r) <= STILL_M) return 'none';
  const [restedAt, restR, restW, restG] = [cell.at, cell.r, cell.w, cell.g];
  cell.at = at;
  cell.r = r;
  cell.w = w;
  cell.g = g;
  // either records said so, or a box that only speaks when the wheel turns was silent and then a step or two further
  const rested = stillAt - restedAt >= STILL_US || (at - restedAt >= STILL_US && Math.abs(r - restR) <= STEP_M);
  if (rested) {
    watch.current = { r: restR, w: restW, g: restG, movedAt: at, first: { at, within: 0 }, t: [at], s: [r - restR] };
    return 'moved';
  }
  if (current === null) return 'none';
  const s = r - current.r;
  if (s < LAUNCH_M && at - (current.t[current.t.length - 1] as number) < APART_US) return 'none';
  current.t.push(at);
  current.s.push(s);
  if (s < LAUNCH_M) return 'none';
  watch.current = null;
  watch.done.push({ r: current.r, w: current.w, g: current.g, movedAt: current.movedAt, first: firstMovement(current, pulseMetres) });
  return 'complete';
}

/** Steadiest pull that can be told from a roll, and the longest a car can have crept before the first knot. */
const LEAST_ACCELERATION = 0.3;
const LONGEST_BEFORE_S = 2.5;

/**
 * First movement, extrapolated back to rest: s = ½a(t−t₀)² is a parabola in t, so least squares over the first metres give its
 * vertex, whatever part of a pulse the car had covered when it stood. Where the knots show no steady pull, the first knot less
 * the time of one step. `pulseMetres` bounds `within`; 0 for GNSS.
 */
export function firstMovement(launch: Pick<MovingOff, 't' | 's'>, pulseMetres: number): FirstMovement {
  const { t, s } = launch;
  const t1 = t[0] as number;
  const fit = parabola(
    t.map((x) => (x - t1) / 1e6),
    s,
  );
  if (fit !== null && 2 * fit.c2 >= LEAST_ACCELERATION) {
    const vertex = -fit.c1 / (2 * fit.c2);
    if (vertex <= 0 && vertex >= -LONGEST_BEFORE_S) {
      const rest = fit.c0 - (fit.c1 * fit.c1) / (4 * fit.c2);
      return { at: t1 + vertex * 1e6, within: Math.min(Math.max(0, rest), pulseMetres) };
    }
  }
  const [s0, s1, t2] = [s[0] as number, s[1], t[1]];
  if (s1 === undefined || t2 === undefined || !(s1 > s0)) return { at: t1, within: 0 };
  return { at: t1 - Math.min(((t2 - t1) * s0) / (s1 - s0), LONGEST_BEFORE_S * 1e6), within: 0 };
}

/** Least-squares parabola c0 + c1·x + c2·x², by the normal equations; null where the points do not fix one. */
function parabola(x: readonly number[], y: readonly number[]): { c0: number; c1: number; c2: number } | null {
  const n = x.length;
  if (n < 4) return null;
  const sum = (f: (i: number) => number): number => x.reduce((total, _, i) => total + f(i), 0);
  const mean = sum((i) => x[i] as number) / n;
  const u = x.map((v) => v - mean);
  const at = (values: readonly number[], i: number): number => values[i] as number;
  const [s2, s3, s4] = [sum((i) => at(u, i) ** 2), sum((i) => at(u, i) ** 3), sum((i) => at(u, i) ** 4)];
  const [y0, y1, y2] = [sum((i) => at(y, i)), sum((i) => at(y, i) * at(u, i)), sum((i) => at(y, i) * at(u, i) ** 2)];
  // with centred x the sum of x vanishes: eliminate by hand
  const d = n * (s2 * s4 - s3 * s3) - s2 * s2 * s2;
  if (!(Math.abs(d) > 1e-12)) return null;
  const c2 = (n * (s2 * y2 - s3 * y1) - s2 * s2 * y0) / d;
  const c1 = (y1 - s3 * c2) / s2;
  const c0 = (y0 - s2 * c2) / n;
  return { c0: c0 - c1 * mean + c2 * mean * mean, c1: c1 - 2 * c2 * mean, c2 };
}

/** The stretch after `from` is told anew, GNSS metres beyond `g` becoming `share` counts each: what is remembered of it too. */
export function rewriteLaunches(watch: LaunchWatch, from: number, w: number, g: number, share: number): void {
  const anew = <T extends { w: number; g: number }>(x: T, at: number): T => (at > from ? { ...x, w: w + (x.g - g) * share, g } : x);
  if (watch.cell !== null) watch.cell = anew(watch.cell, watch.cell.at);
  if (watch.current !== null) watch.current = anew(watch.current, watch.current.movedAt);
  watch.done = watch.done.map((launch) => anew(launch, launch.movedAt));
}
