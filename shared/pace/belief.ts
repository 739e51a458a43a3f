import type { Pack } from '#shared/course/pack.ts';
import { add, type Covariance } from '#shared/pace/covariance.ts';
import type { Anchor, TapAct } from '#shared/pace/run-state.ts';
import { leadSigma } from '#shared/pace/tap-lead.ts';

/** What the estimator believes beside the distance and the scale that an anchor holds, and what it believes before the first metre. */

/** Places in the state vector. */
export const D = 0;
export const SCALE = 1;
export const COLD = 2;
export const SPEED = 3;
export const OFFICIAL = 4;
export const PLACED = 5;
export const LEAD = { glass: 6, wired: 7 } as const;
export const N = 8;

export type TapInput = TapAct['input'];

export interface Belief {
  readonly covariance: Covariance;
  /** Slow error of GNSS positions along the course, m. */
  readonly placed: number;
  /** The navigator's lead beyond the pack's by input, s; positive = touches late. */
  readonly lead: Readonly<Record<TapInput, number>>;
  readonly temper: Temper;
}

/** What this hand and these tyres are like beside what is usual: factors on the variance of a tap's scatter and of the scale's wander. */
export interface Temper {
  readonly scatter: number;
  readonly wander: number;
}

export const USUAL: Temper = { scatter: 1, wander: 1 };

/** An anchor under the estimator. */
export type Estimate = Anchor & { readonly belief: Belief };

/** Deficit of cold tyres and its sigma; growth by speed at 50 m/s and its sigma, and the same for a driven wheel, which slips. */
const COLD_TYRES = { mean: 0.0035, sigma: 0.0015 };
const BY_SPEED = { rolling: { mean: 0.00125, sigma: 0.0006 }, driven: { mean: -0.0065, sigma: 0.005 } };
/** A scale that was not measured on warm tyres may be off by as much as tyres grow. */
const WARMTH_UNKNOWN = 0.004;
/** The line driven against the line surveyed. */
const LINE_SIGMA = 0.001;

/** What is believed before the first metre. `variance`: of the distance at the start, m². */
export function firstBelief(pack: Pack, variance: number): Belief {
  const { aids } = pack.raceClass;
  const { scaleSigma, scaleSource, driven } = pack.wheel;
  const byGnss = aids.gnssSpeed || aids.gnssPosition;
  const line = LINE_SIGMA * LINE_SIGMA;
  const covariance = new Array<number>(N * N).fill(0);
  const set = (i: number, value: number): void => add(covariance, N, i, i, value);
  set(D, variance);
  set(SCALE, scaleSigma * scaleSigma + (scaleSource === 'run' ? 0 : WARMTH_UNKNOWN ** 2) + (byGnss ? 0 : line));
  set(COLD, COLD_TYRES.sigma ** 2);
  set(SPEED, (driven === true ? BY_SPEED.driven : BY_SPEED.rolling).sigma ** 2);
  set(OFFICIAL, byGnss ? line : 0);
  for (const input of ['glass', 'wired'] as const) set(LEAD[input], leadSigma(pack, input) ** 2);
  return { covariance, placed: 0, lead: { glass: 0, wired: 0 }, temper: USUAL };
}

/** The tyres' part of the first anchor: `cold` and `speed`. */
export function firstTyres(pack: Pack): { readonly cold: number; readonly speed: number } {
  return { cold: COLD_TYRES.mean, speed: (pack.wheel.driven === true ? BY_SPEED.driven : BY_SPEED.rolling).mean };
}
