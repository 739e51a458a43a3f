import type { ClockV1 } from '#shared/journal/observation.ts';

/**
 * Kalman filter of the official clock: offset (official less session, ms), rate (ms a second), for each kind of source the error
 * that its samples have in common, and what server and receivers are off the event's own clock. Those common errors are states,
 * so that a source heard a hundred times does not seem surer than its own path allows, sources are weighed by
 * 1/(bias² + scatter²), and a receiver's latency is learnt from any better source and stays known when that one is gone.
 * The state vector is [offset, rate, exchange, nmea, tap, pps, utc]; `p` its covariance, row by row.
 */
export interface ClockFilter {
  at: number;
  x: number[];
  p: number[];
  /** The variance each source's common error began with, ms². */
  began: number[];
}

export type ClockSource = Exclude<ClockV1['source'], 'wall'>;

/** One sample: official less session is `z` ms at `at`. */
export interface ClockSample {
  readonly at: number;
  readonly source: ClockSource;
  readonly z: number;
  /** Variance of what is common to the source's samples, and of what is this one's own; ms². */
  readonly bias: number;
  readonly own: number;
}

const N = 7;
const UTC = 6;
const SLOT: Readonly<Record<ClockSource, number>> = { exchange: 2, nmea: 3, tap: 4, pps: 5 };

/** A plain crystal: evenly spread over ±50 ppm. */
export const UNKNOWN_RATE = 0.05 / Math.sqrt(3);
/** What a change of temperature does to a known rate, ms a second. */
export const WARMTH = 0.001;
/** Rate wanders by 0.15 ppm in a minute; (ms/s)² a second. */
export const RATE_WALK = 0.00015 ** 2 / 60;
/** A receiver's latency wanders by 3 ms in an hour (judgement), ms² a second. */
const LATENCY_WALK = 9 / 3600;
/** Before the first sample, ms. */
const NOTHING_KNOWN = 1e4;
/** Another uncertainty than before is another path, with an asymmetry of its own. */
const SAME_PATH = 2;

export function makeClockFilter(first: ClockSample): ClockFilter {
  const p = new Array<number>(N * N).fill(0);
  p[0] = NOTHING_KNOWN ** 2;
  p[N + 1] = UNKNOWN_RATE ** 2;
  return { at: first.at, x: [first.z, 0, 0, 0, 0, 0, 0], p, began: [0, 0, 0, 0, 0, 0] };
}

/** Moves on to a later instant; to an earlier one, nothing. */
export function predictClock(f: ClockFilter, at: number): void {
  const tau = (at - f.at) / 1e6;
  if (!(tau > 0)) return;
  const { x, p } = f;
  f.at = at;
  x[0] = get(x, 0) + get(x, 1) * tau;
  for (let i = 0; i < N; i++) add(p, i, tau * get(p, N + i));
  for (let i = 0; i < N; i++) add(p, i * N, tau * get(p, i * N + 1));
  add(p, 0, (RATE_WALK * tau ** 3) / 3 + (WARMTH * tau) ** 2);
  add(p, 1, (RATE_WALK * tau * tau) / 2);
  add(p, N, (RATE_WALK * tau * tau) / 2);
  add(p, N + 1, RATE_WALK * tau);
  add(p, SLOT.nmea * (N + 1), LATENCY_WALK * tau);
}

/** What a sample says against the filter, which must have been moved on: surprise (ms), its variance, and the covariances with it. */
export interface Surprise {
  readonly by: number;
  readonly variance: number;
  readonly ph: readonly number[];
}

export function surpriseOf(f: ClockFilter, s: ClockSample): Surprise {
  const slot = SLOT[s.source];
  openBias(f, slot, s);
  const { x, p } = f;
  // a sample may lie a little before the present: there the clock was less by its rate
  const lag = Math.min(0, (s.at - f.at) / 1e6);
  const h = new Array<number>(N).fill(0);
  h[0] = 1;
  h[1] = lag;
  h[slot] = 1;
  h[UTC] = s.source === 'tap' ? 0 : 1;
  const ph = h.map((_, i) => dot(h, p, i * N));
  return { by: s.z - dot(h, x, 0), variance: Math.max(0, dot(h, ph, 0)) + s.own, ph };
}

/** Takes the sample in. @returns its weight against what was known, 0..1. */
export function updateClock(f: ClockFilter, { by, variance, ph }: Surprise): number {
  const { x, p } = f;
  for (let i = 0; i < N; i++) {
    const k = get(ph, i) / variance;
    add(x, i, k * by);
    for (let j = 0; j < N; j++) add(p, i * N + j, -k * get(ph, j));
  }
  return get(ph, 0) / variance;
}

/** Forgets how a source's common error stood, save a receiver's latency, which is its own wherever the car goes. */
function openBias(f: ClockFilter, slot: number, s: ClockSample): void {
  const { began, p, x } = f;
  const ratio = s.bias / get(began, slot);
  if (get(began, slot) > 0 && (s.source === 'nmea' || (ratio < SAME_PATH && ratio > 1 / SAME_PATH))) return;
  began[slot] = s.bias;
  x[slot] = 0;
  for (let i = 0; i < N; i++) {
    p[slot * N + i] = 0;
    p[i * N + slot] = 0;
  }
  p[slot * (N + 1)] = s.bias;
}

/** Less variance than none there is not. */
export function doubtOffset(f: ClockFilter, variance: number): void {
  f.p[0] = Math.max(0, get(f.p, 0) + variance);
}

/** Moves the offset, a source's common error, or how far server and receivers are off the event, and makes room around it. */
export function moveOffset(f: ClockFilter, by: number, variance: number): void {
  add(f.x, 0, by);
  doubtOffset(f, variance);
}
export const moveSource = (f: ClockFilter, source: ClockSource, by: number, variance: number): void =>
  moveState(f, SLOT[source], by, variance);
export const moveUtc = (f: ClockFilter, by: number, variance: number): void => moveState(f, UTC, by, variance);

/** Moves the event's clock away from server and receivers, which agree with the filter so far. */
export function moveEvent(f: ClockFilter, by: number, variance: number): void {
  moveOffset(f, by, variance);
  moveUtc(f, -by, variance);
  add(f.p, UTC, -variance);
  add(f.p, UTC * N, -variance);
}

function moveState(f: ClockFilter, slot: number, by: number, variance: number): void {
  add(f.x, slot, by);
  add(f.p, slot * (N + 1), variance);
}

/** Offset, rate and their variances at the filter's instant. */
export const clockEstimate = ({ x, p }: ClockFilter) => ({
  offset: get(x, 0),
  rate: get(x, 1),
  variance: Math.max(0, get(p, 0)),
  cross: get(p, 1),
  rateVariance: Math.max(0, get(p, N + 1)),
  /** Server and receivers less official. */
  utc: get(x, UTC),
});

const get = (list: readonly number[], i: number): number => list[i] as number;
function add(list: number[], i: number, by: number): void {
  list[i] = get(list, i) + by;
}
function dot(h: readonly number[], of: readonly number[], from: number): number {
  let sum = 0;
  for (let i = 0; i < N; i++) sum += get(h, i) * get(of, from + i);
  return sum;
}
