import { type FirstMovement, firstMovement } from '#shared/pace/first-movement.ts';

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
  /** Last record that showed no movement before. */
  readonly stillAt: number;
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
/** A car that moves off as gently as this makes its first two pulses this far apart in time, m/s². */
const GENTLE = 1.5;
const STEP_M = 1;
/** Further than a shuffle on the grid, and enough pulses to draw a line through. */
const LAUNCH_M = 6;
const LAUNCH_PULSES = 6;
const APART_US = 20_000;

export type LaunchEvent = 'none' | 'moved' | 'complete';

/** True while the first metres are being driven. */
export const isLaunching = (watch: LaunchWatch): boolean => watch.current !== null;

/**
 * Takes a knot: raw metres by the nominal scale, counts, metres by GNSS. `stillAt`: last record that showed no movement. `pulseMetres`
 * and `interval`: one pulse of the source, and microseconds since the record before; 0 for GNSS. No object: a knot comes with every pulse.
 */
export function watchLaunch(
  watch: LaunchWatch,
  at: number,
  r: number,
  w: number,
  g: number,
  stillAt: number,
  pulseMetres: number,
  interval: number,
): LaunchEvent {
  const { cell, current } = watch;
  // under way, as nearly always: looked at first, and short
  if (cell !== null && current === null && Math.max(at, stillAt) - cell.at < STILL_US) {
    if (Math.abs(r - cell.r) > STILL_M) moveTo(cell, at, r, w, g);
    return 'none';
  }
  if (cell === null) {
    watch.cell = { at, r, w, g };
    return 'none';
  }
  return watchRest(watch, cell, at, r, w, g, stillAt, pulseMetres, interval);
}

type Cell = NonNullable<LaunchWatch['cell']>;

function moveTo(cell: Cell, at: number, r: number, w: number, g: number): void {
  cell.at = at;
  cell.r = r;
  cell.w = w;
  cell.g = g;
}

function watchRest(
  watch: LaunchWatch,
  cell: Cell,
  at: number,
  r: number,
  w: number,
  g: number,
  stillAt: number,
  pulseMetres: number,
  interval: number,
): LaunchEvent {
  if (Math.abs(r - cell.r) <= STILL_M) return 'none';
  const { current } = watch;
  const still = current === null ? STILL_US : STILL_US + 1e6 * Math.sqrt((2 * pulseMetres) / GENTLE);
  // either records said so, or a box that only speaks when the wheel turns was silent and then a step or two further
  const rested = stillAt - cell.at >= still || (at - cell.at >= still && Math.abs(r - cell.r) <= STEP_M);
  if (rested) watch.current = { r: cell.r, w: cell.w, g: cell.g, movedAt: at, first: { at, within: 0 }, t: [at], s: [r - cell.r], stillAt };
  moveTo(cell, at, r, w, g);
  if (rested) return 'moved';
  return current === null ? 'none' : moveOn(watch, current, at, r, pulseMetres, interval);
}

/** The next of the first metres. */
function moveOn(watch: LaunchWatch, current: MovingOff, at: number, r: number, pulseMetres: number, interval: number): LaunchEvent {
  const s = r - current.r;
  const enough = s >= Math.max(LAUNCH_M, LAUNCH_PULSES * pulseMetres);
  if (!enough && at - (current.t[current.t.length - 1] as number) < APART_US) return 'none';
  current.t.push(at);
  current.s.push(s);
  if (!enough) return 'none';
  watch.current = null;
  const first = firstMovement({ t: current.t, s: current.s, stillAt: current.stillAt, pulseMetres, interval });
  watch.done.push({ r: current.r, w: current.w, g: current.g, movedAt: current.movedAt, first });
  return 'complete';
}

/** The stretch after `from` is told anew, GNSS metres beyond `g` becoming `share` counts each: what is remembered of it too. */
export function rewriteLaunches(watch: LaunchWatch, from: number, w: number, g: number, share: number): void {
  const anew = <T extends { w: number; g: number }>(x: T, at: number): T => (at > from ? { ...x, w: w + (x.g - g) * share, g } : x);
  if (watch.cell !== null) watch.cell = anew(watch.cell, watch.cell.at);
  if (watch.current !== null) watch.current = anew(watch.current, watch.current.movedAt);
  watch.done = watch.done.map((launch) => anew(launch, launch.movedAt));
}

/** The counts since `from` had run the wrong way: what is remembered of them is mirrored about `w`. */
export function rewindLaunches(watch: LaunchWatch, from: number, w: number, metresPerPulse: number): void {
  const anew = <T extends { r: number; w: number; g: number }>(x: T, at: number): T => {
    const mirrored = 2 * w - x.w;
    return at >= from ? { ...x, w: mirrored, r: mirrored * metresPerPulse + x.g } : x;
  };
  if (watch.cell !== null) watch.cell = anew(watch.cell, watch.cell.at);
  watch.done = watch.done.map((launch) => anew(launch, launch.movedAt));
  if (watch.current === null || watch.current.movedAt < from) return;
  const current = anew(watch.current, watch.current.movedAt);
  watch.current = { ...current, s: current.s.map((s) => -s) };
}
