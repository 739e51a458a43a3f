import { addToHull, hullLine, type LowerHull, makeLowerHull } from '#shared/lower-hull.ts';

/**
 * Edges of a receiver's pulse per second: each is a whole second of the official clock, seen late by what the way to the session
 * clock adds. Windows of 10, 20, 40 and then 60 s give one estimate each, from edges that no other window holds.
 */
export interface PpsEdges {
  /** First edge of the window, session microseconds; null between windows. */
  from: number | null;
  hull: LowerHull;
  /** Length of the window, s. */
  span: number;
  /** Edges in a row that did not lie on the window's second. */
  stray: number;
}

export const makePpsEdges = (): PpsEdges => ({ from: null, hull: makeLowerHull(), span: 10, stray: 0 });

const LONGEST_S = 60;
const LEAST_EDGES = 5;
/** An edge that is off the others by more is of another clock, or noise on the wire. ms */
const STRAY_MS = 50;
const STRAYS = 5;
/** ms in a second; crystals differ by less than 100 ppm. */
const STEEPEST = 0.1;
/**
 * Of an even spread of lateness the envelope keeps `KEPT` of the mean over the count, and scatters by `SCATTER` of it. The line
 * itself takes from what few edges show of their spread, as degrees of freedom. By simulation.
 */
const KEPT = 3.7;
const SCATTER = 2.8;
const TAKEN = 4;
const FINEST_MS = 0.05;

/** A whole second of the official clock began at `at` (session microseconds, fractions), give or take `sigmaMs`. */
export interface PpsSecond {
  readonly at: number;
  readonly sigmaMs: number;
}

/** Takes an edge; the window's estimate when it is full. */
export function takeEdge(pps: PpsEdges, at: number): PpsSecond | null {
  if (pps.from !== null && !isOnSecond(pps, at)) {
    pps.stray++;
    if (pps.stray < STRAYS) return null;
    pps.from = null;
    pps.span = 10;
  }
  pps.stray = 0;
  if (pps.from === null) {
    pps.from = at;
    pps.hull = makeLowerHull();
  }
  const seconds = (at - pps.from) / 1e6;
  addToHull(pps.hull, Math.round(seconds), (seconds - Math.round(seconds)) * 1000);
  return seconds >= pps.span - 0.5 ? closeWindow(pps) : null;
}

function isOnSecond(pps: PpsEdges, at: number): boolean {
  const s = (at - (pps.from as number)) / 1e6;
  const known = pps.hull.y[pps.hull.y.length - 1] as number;
  return s > 0 && Math.abs((s - Math.round(s)) * 1000 - known) < STRAY_MS;
}

function closeWindow(pps: PpsEdges): PpsSecond | null {
  const from = pps.from as number;
  const { n } = pps.hull;
  const line = hullLine(pps.hull, STEEPEST);
  pps.from = null;
  pps.span = Math.min(LONGEST_S, pps.span * 2);
  if (line === null || n < LEAST_EDGES) return null;
  // the envelope at the middle, carried to the whole second beside it
  const second = Math.round(line.x);
  const late = line.y + line.slope * (second - line.x) - (KEPT * line.excess) / n;
  return { at: from + second * 1e6 + late * 1000, sigmaMs: Math.hypot(FINEST_MS, (SCATTER * line.excess) / (n - TAKEN)) };
}
