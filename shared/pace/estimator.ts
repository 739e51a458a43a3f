import type { Pack } from '#shared/course/pack.ts';
import { absorb, add, type Covariance, carryFirst, dot, shrink, times } from '#shared/pace/covariance.ts';
import type { Anchor, TapAct } from '#shared/pace/run-state.ts';
import type { SourceNode } from '#shared/pace/source-node.ts';
import { leadSigma } from '#shared/pace/tap-lead.ts';
import type { Raw } from '#shared/pace/track.ts';

type TapInput = TapAct['input'];

/**
 * The estimator: an extended Kalman filter over what the crew cannot see. Distance follows
 * dD = e^κ · (m·(dw − A·dh + B·du) + dg), where m = m₀·e^λ is the scale of a warm, slow tyre in driven metres per count; A is the
 * cold tyres' deficit, weighted by coldness (h); B is what speed does, with (v/50)² (u); κ tells official from driven metres.
 * Three more: the slow error of GNSS positions, and the navigator's lead by each input beyond the one in the pack. Kalman's equations are common
 * knowledge of estimation theory; the model and its figures are our own, tuned by simulation, no source.
 */

/** Places in the state vector. */
const D = 0;
const SCALE = 1;
const COLD = 2;
const SPEED = 3;
const OFFICIAL = 4;
const PLACED = 5;
const LEAD = { glass: 6, wired: 7 } as const;
const N = 8;

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
/** Wander of a warm tyre's scale, and more of it while it warms, relative² per metre. */
const SCALE_WANDER = 6e-12;
const WARMING_WANDER = 3e-11;
/** The line driven comes and goes about its mean: over kilometres a walk of the distance, m² per metre. */
const LINE = 2e-4;
/** Slips and lost pulses, m² per metre. */
const SLIPS = 4e-4;
/** GNSS metres that stood in for the wheel, m² per metre. */
const GNSS_NOISE = 4e-4;
/** A receiver's speed wanders slowly, about 0.016 m/s over a minute: m² per second beyond what each fix says of itself. */
const SLOW_SPEED = 0.03;
/** Of a position's error this share is slow, over this long (s); the rest changes with every fix. */
const SLOW_SHARE = 0.95;
const QUICK_SHARE = 0.35;
const PLACED_S = 120;
/** Beyond so many sigmas a comparison or a position is not believed. */
const GATE = 4;
/** Reading between two pulses, m². */
const PULSE_VARIANCE = 0.1;

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

interface Way {
  /** ∂D/∂state, first row of F. */
  readonly f: number[];
  /** Driven metres by the wheel, and official metres in all. */
  readonly wheel: number;
  readonly official: number;
  readonly gnss: number;
}

function wayTo(a: Anchor, raw: Raw): Way {
  const m = a.mmPerPulse / 1000;
  const [dw, dh, du, dg] = [raw.w - a.w, raw.h - a.h, raw.u - a.u, raw.g - a.g];
  const wheel = m * (dw - a.cold * dh + a.speed * du);
  const official = a.official * (wheel + dg);
  const f = [1, a.official * wheel, -a.official * m * dh, a.official * m * du, official, 0, 0, 0];
  return { f, wheel, official, gnss: dg };
}

/** Variance of the distance at raw values beyond the anchor, m². */
export function grownVariance(a: Anchor, belief: Belief, raw: Raw): number {
  const way = wayTo(a, raw);
  return dot(times(belief.covariance, N, way.f), way.f) + roadVariance(way, wanderOf(belief, coldnessOf(a, raw)));
}

function roadVariance({ wheel, gnss, official }: Way, wander: number): number {
  const [w, all] = [Math.abs(wheel), Math.abs(official)];
  return SLIPS * w + (wander * w ** 3) / 3 + GNSS_NOISE * Math.abs(gnss) + LINE * all;
}

/** Wander of the scale, relative² per metre: tyres that are still warming wander more than their law says. */
const wanderOf = ({ temper }: Belief, coldness: number): number => temper.wander * SCALE_WANDER + WARMING_WANDER * coldness;

/** Mean coldness of a stretch, 0..1. */
function coldnessOf(a: Anchor, raw: Raw): number {
  const dw = raw.w - a.w;
  return dw === 0 ? 0 : Math.min(1, Math.max(0, (raw.h - a.h) / dw));
}

/** The estimate carried on to raw values at an instant; `lost` m² of what nothing measured on the way. */
export function carry(a: Estimate, raw: Raw, at: number, lost: number): Estimate {
  const way = wayTo(a, raw);
  const p = a.belief.covariance.slice();
  carryFirst(p, N, way.f);
  const wander = wanderOf(a.belief, coldnessOf(a, raw));
  const w = Math.abs(way.wheel);
  add(p, N, D, D, roadVariance(way, wander) + lost);
  add(p, N, D, SCALE, (wander * w * w) / 2);
  add(p, N, SCALE, SCALE, wander * w);
  const keep = Math.exp(-Math.max(0, at - a.at) / 1e6 / PLACED_S);
  shrink(p, N, PLACED, keep);
  const belief = { ...a.belief, covariance: p, placed: a.belief.placed * keep };
  return { ...a, at, d: a.d + way.official, w: raw.w, g: raw.g, h: raw.h, u: raw.u, belief };
}

/** The state after a misfit, by gain `k`. */
function move(a: Estimate, k: readonly number[], misfit: number, covariance: Covariance): Estimate {
  const by = (i: number): number => (k[i] as number) * misfit;
  return {
    ...a,
    d: a.d + by(D),
    mmPerPulse: a.mmPerPulse * Math.exp(by(SCALE)),
    cold: a.cold + by(COLD),
    speed: a.speed + by(SPEED),
    official: a.official * Math.exp(by(OFFICIAL)),
    belief: {
      ...a.belief,
      covariance,
      placed: a.belief.placed + by(PLACED),
      lead: { glass: a.belief.lead.glass + by(LEAD.glass), wired: a.belief.lead.wired + by(LEAD.wired) },
    },
  };
}

function update(a: Estimate, c: readonly number[], s: number, misfit: number, only?: readonly number[]): Estimate {
  const k = c.map((x, i) => (only === undefined || only.includes(i) ? x / s : 0));
  const p = a.belief.covariance.slice();
  absorb(p, N, c, k, s);
  return move(a, k, misfit, p);
}

/**
 * GNSS's metres since the node before against the wheel's. `since`: raw values and instant of that node; `placedAt`: instant of
 * the last tap: slips before it no longer matter to the distance. The estimate must stand at the node.
 */
export function compareSpeed(a: Estimate, since: SourceNode & Raw, node: SourceNode & Raw, placedAt: number): Estimate {
  if (node.compared === null) return a;
  const m = a.mmPerPulse / 1000;
  const [dw, dh, du] = [node.w - since.w, node.h - since.h, node.u - since.u];
  const wheel = m * (dw - a.cold * dh + a.speed * du);
  const misfit = node.gnssMetres - since.gnssMetres - (node.g - since.g) - wheel;
  const seconds = (node.at - since.at) / 1e6;
  const h = [0, wheel, -m * dh, m * du, 0, 0, 0, 0];
  const c = times(a.belief.covariance, N, h);
  const slipped = SLIPS * Math.abs(wheel);
  const s = dot(c, h) + node.compared + SLOW_SPEED * seconds + slipped;
  // a slip of the wheel is in the distance and in the misfit alike
  const share = Math.min(1, Math.max(0, (node.at - placedAt) / Math.max(1, node.at - since.at)));
  c[D] = (c[D] as number) + a.official * slipped * share;
  if (misfit * misfit <= GATE * GATE * s) return update(a, c, s, misfit);
  const p = a.belief.covariance.slice();
  add(p, N, D, D, node.compared + SLOW_SPEED * seconds);
  return { ...a, d: a.d + a.official * misfit * share, belief: { ...a.belief, covariance: p } };
}

/** A position on the surveyed line. The estimate must stand at the node. */
export function comparePosition(a: Estimate, { position }: SourceNode): Estimate {
  if (position === null) return a;
  const { sigma } = position;
  const p = a.belief.covariance.slice();
  // the slow error is as large as the receiver says today
  const slow = (SLOW_SHARE * sigma) ** 2 - (p[PLACED * N + PLACED] as number);
  add(p, N, PLACED, PLACED, Math.max(0, slow));
  const h = [1, 0, 0, 0, 0, 1, 0, 0];
  const c = times(p, N, h);
  const s = dot(c, h) + (QUICK_SHARE * sigma) ** 2;
  const misfit = position.d - a.d - a.belief.placed;
  if (misfit * misfit > GATE * GATE * s) return a;
  return update({ ...a, belief: { ...a.belief, covariance: p } }, c, s, misfit);
}

export interface TapMisfit {
  /** Official less believed, m, and its variance: the estimate's own and the tap's. */
  readonly misfit: number;
  readonly variance: number;
  /** m² of the tap alone. */
  readonly own: number;
}

export interface TapAtPlace {
  /** Official distance of the nose when the navigator's eye passes the place, m, and the survey's sigma. */
  readonly d: number;
  readonly surveySigma: number;
  /** Speed at the touch, m/s. */
  readonly v: number;
  /** The pack's scatter of taps, s. */
  readonly scatter: number;
  readonly input: TapInput;
}

const tapRow = ({ v, input }: TapAtPlace): number[] => (input === 'glass' ? [1, 0, 0, 0, 0, 0, -v, 0] : [1, 0, 0, 0, 0, 0, 0, -v]);

/** How far a tap is off, before it is taken in. The estimate must stand at the tap. */
export function tapMisfit(a: Estimate, tap: TapAtPlace): TapMisfit {
  const h = tapRow(tap);
  const own = a.belief.temper.scatter * (tap.scatter * tap.v) ** 2 + tap.surveySigma ** 2 + PULSE_VARIANCE;
  const misfit = tap.d - a.d + tap.v * a.belief.lead[tap.input];
  return { misfit, variance: dot(times(a.belief.covariance, N, h), h) + own, own };
}

/** Doubt added before a tap is taken in: m² of the distance, and the metres over which the scale may have done that. */
export interface Doubt {
  readonly variance: number;
  readonly over: number | null;
}

/** Takes a tap in. `placeOnly`: the crew wants the distance placed and nothing learnt. */
export function takeTap(before: Estimate, tap: TapAtPlace, placeOnly: boolean, doubt: Doubt): Estimate {
  const p = before.belief.covariance.slice();
  add(p, N, D, D, doubt.variance);
  if (doubt.over !== null) {
    add(p, N, D, SCALE, doubt.variance / doubt.over);
    add(p, N, SCALE, SCALE, doubt.variance / doubt.over ** 2);
  }
  const a: Estimate = { ...before, belief: { ...before.belief, covariance: p } };
  const { misfit, variance } = tapMisfit(a, tap);
  return update(a, times(p, N, tapRow(tap)), variance, misfit, placeOnly ? [D, PLACED] : undefined);
}
