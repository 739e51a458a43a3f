import { type Belief, COLD, D, type Estimate, LEAD, N, OFFICIAL, PLACED, SCALE, SPEED, type TapInput } from '#shared/pace/belief.ts';
import { absorb, add, type Covariance, carryFirst, dot, type Row, shrink, times } from '#shared/pace/covariance.ts';
import type { Anchor } from '#shared/pace/run-state.ts';
import type { SourceNode } from '#shared/pace/source-node.ts';
import type { Raw } from '#shared/pace/track.ts';

/**
 * The estimator: an extended Kalman filter over what the crew cannot see. Distance follows
 * dD = e^κ · (m·(dw − A·dh + B·du) + dg), where m = m₀·e^λ is the scale of a warm, slow tyre in driven metres per count; A is the
 * cold tyres' deficit, weighted by coldness (h); B is what speed does, with (v/50)² (u); κ tells official from driven metres.
 * Three more: the slow error of GNSS positions, and the navigator's lead by each input beyond the one in the pack. Kalman's equations are common
 * knowledge of estimation theory; the model and its figures are our own, tuned by simulation, no source.
 */

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

/** Written over by every call: rows of the formulae, and what comes of them. */
const scratch = { f: new Float64Array(N), h: new Float64Array(N), c: new Float64Array(N), k: new Float64Array(N) };

/** An estimate that is still being made: only its maker may write to it. */
type Draft = { -readonly [K in keyof Omit<Anchor, 'belief'>]: Anchor[K] } & { belief: { -readonly [K in keyof Belief]: Belief[K] } };

/** Field by field: a spread with one of its fields told again costs more than all the arithmetic that follows. */
const draftOf = (a: Estimate): Draft => ({
  at: a.at,
  d: a.d,
  w: a.w,
  g: a.g,
  h: a.h,
  u: a.u,
  mmPerPulse: a.mmPerPulse,
  cold: a.cold,
  speed: a.speed,
  official: a.official,
  belief: { covariance: a.belief.covariance.slice(), placed: a.belief.placed, lead: a.belief.lead, temper: a.belief.temper },
  scaleVariance: a.scaleVariance,
  variance: a.variance,
  covariance: a.covariance,
  scaleFrom: a.scaleFrom,
  coldShare: a.coldShare,
});

/** ∂D/∂state from the anchor to raw values, first row of F; returns driven metres by the wheel. */
function rowTo(a: Anchor, raw: Raw, f: Row): number {
  const m = a.mmPerPulse / 1000;
  const dh = raw.h - a.h;
  const du = raw.u - a.u;
  const wheel = m * (raw.w - a.w - a.cold * dh + a.speed * du);
  f[D] = 1;
  f[SCALE] = a.official * wheel;
  f[COLD] = -a.official * m * dh;
  f[SPEED] = a.official * m * du;
  f[OFFICIAL] = a.official * (wheel + raw.g - a.g);
  return wheel;
}

/** Variance of the distance at raw values beyond the anchor, m². */
export function grownVariance(a: Anchor, belief: Belief, raw: Raw): number {
  const { f, c } = scratch;
  const wheel = rowTo(a, raw, f);
  times(belief.covariance, N, f, c);
  return dot(c, f) + roadVariance(wheel, raw.g - a.g, f[OFFICIAL] as number, wanderOf(belief, coldnessOf(a, raw)));
}

function roadVariance(wheel: number, gnss: number, official: number, wander: number): number {
  const w = Math.abs(wheel);
  return SLIPS * w + (wander * w ** 3) / 3 + GNSS_NOISE * Math.abs(gnss) + LINE * Math.abs(official);
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
  const draft = draftOf(a);
  carryDraft(draft, raw, at, lost);
  return draft;
}

function carryDraft(a: Draft, raw: Raw, at: number, lost: number): void {
  const { f, c } = scratch;
  const p = a.belief.covariance;
  const wheel = rowTo(a, raw, f);
  const official = f[OFFICIAL] as number;
  carryFirst(p, N, f, c);
  const wander = wanderOf(a.belief, coldnessOf(a, raw));
  const w = Math.abs(wheel);
  add(p, N, D, D, roadVariance(wheel, raw.g - a.g, official, wander) + lost);
  add(p, N, D, SCALE, (wander * w * w) / 2);
  add(p, N, SCALE, SCALE, wander * w);
  const keep = Math.exp(-Math.max(0, at - a.at) / 1e6 / PLACED_S);
  shrink(p, N, PLACED, keep);
  a.belief.placed *= keep;
  a.at = at;
  a.d += official;
  a.w = raw.w;
  a.g = raw.g;
  a.h = raw.h;
  a.u = raw.u;
}

/** Takes in a misfit of variance `s`, whose covariance with the state stands in `scratch.c`. `placeOnly`: moves the distance and nothing else. */
function absorbMisfit(a: Draft, s: number, misfit: number, placeOnly = false): void {
  const { c, k } = scratch;
  for (let i = 0; i < N; i++) k[i] = placeOnly && i !== D && i !== PLACED ? 0 : (c[i] as number) / s;
  absorb(a.belief.covariance, N, c, k, s);
  const by = (i: number): number => (k[i] as number) * misfit;
  a.d += by(D);
  a.mmPerPulse *= Math.exp(by(SCALE));
  a.cold += by(COLD);
  a.speed += by(SPEED);
  a.official *= Math.exp(by(OFFICIAL));
  a.belief.placed += by(PLACED);
  const { glass, wired } = a.belief.lead;
  a.belief.lead = { glass: glass + by(LEAD.glass), wired: wired + by(LEAD.wired) };
}

/** An estimate at a node: carried there, and compared with what GNSS says of the stretch since the node before and of the place. */
export function compareAt(a: Estimate, since: SourceNode | null, node: SourceNode, placedAt: number, lost: number): Estimate {
  const draft = draftOf(a);
  carryDraft(draft, node, node.at, lost);
  if (since !== null) compareSpeed(draft, since, node, placedAt);
  comparePosition(draft, node);
  return draft;
}

/**
 * GNSS's metres since the node before against the wheel's. `placedAt`: instant of the last tap: slips before it no longer matter
 * to the distance. The estimate must stand at the node.
 */
function compareSpeed(a: Draft, since: SourceNode, node: SourceNode, placedAt: number): void {
  if (node.compared === null) return;
  const { h, c } = scratch;
  const m = a.mmPerPulse / 1000;
  const dh = node.h - since.h;
  const du = node.u - since.u;
  const wheel = m * (node.w - since.w - a.cold * dh + a.speed * du);
  const misfit = node.gnssMetres - since.gnssMetres - (node.g - since.g) - wheel;
  const noise = node.compared + (SLOW_SPEED * (node.at - since.at)) / 1e6;
  const slipped = SLIPS * Math.abs(wheel);
  h.fill(0);
  h[SCALE] = wheel;
  h[COLD] = -m * dh;
  h[SPEED] = m * du;
  times(a.belief.covariance, N, h, c);
  const s = dot(c, h) + noise + slipped;
  // a slip of the wheel is in the distance and in the misfit alike
  const share = Math.min(1, Math.max(0, (node.at - placedAt) / Math.max(1, node.at - since.at)));
  if (misfit * misfit > GATE * GATE * s) {
    a.d += a.official * misfit * share;
    add(a.belief.covariance, N, D, D, noise);
    return;
  }
  c[D] = (c[D] as number) + a.official * slipped * share;
  absorbMisfit(a, s, misfit);
}

/** A position on the surveyed line. The estimate must stand at the node. */
function comparePosition(a: Draft, { position }: SourceNode): void {
  if (position === null) return;
  const { h, c } = scratch;
  const { sigma } = position;
  const p = a.belief.covariance;
  // the slow error is as large as the receiver says today
  const slow = Math.max(0, (SLOW_SHARE * sigma) ** 2 - (p[PLACED * N + PLACED] as number));
  add(p, N, PLACED, PLACED, slow);
  h.fill(0);
  h[D] = 1;
  h[PLACED] = 1;
  times(p, N, h, c);
  const s = dot(c, h) + (QUICK_SHARE * sigma) ** 2;
  const misfit = position.d - a.d - a.belief.placed;
  if (misfit * misfit > GATE * GATE * s) add(p, N, PLACED, PLACED, -slow);
  else absorbMisfit(a, s, misfit);
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

/** Leaves P·h of a tap in `scratch.c` and returns h·P·h. */
function tapVariance(p: Covariance, { v, input }: TapAtPlace): number {
  const { h, c } = scratch;
  h.fill(0);
  h[D] = 1;
  h[LEAD[input]] = -v;
  times(p, N, h, c);
  return dot(c, h);
}

/** How far a tap is off, before it is taken in. The estimate must stand at the tap. */
export function tapMisfit(a: Estimate, tap: TapAtPlace): TapMisfit {
  const own = a.belief.temper.scatter * (tap.scatter * tap.v) ** 2 + tap.surveySigma ** 2 + PULSE_VARIANCE;
  const misfit = tap.d - a.d + tap.v * a.belief.lead[tap.input];
  return { misfit, variance: tapVariance(a.belief.covariance, tap) + own, own };
}

/** Doubt added before a tap is taken in: m² of the distance, and the metres over which the scale may have done that. */
export interface Doubt {
  readonly variance: number;
  readonly over: number | null;
}

/** Takes a tap in. `placeOnly`: the crew wants the distance placed and nothing learnt. */
export function takeTap(before: Estimate, tap: TapAtPlace, placeOnly: boolean, doubt: Doubt): Estimate {
  const a = draftOf(before);
  const p = a.belief.covariance;
  add(p, N, D, D, doubt.variance);
  if (doubt.over !== null) {
    add(p, N, D, SCALE, doubt.variance / doubt.over);
    add(p, N, SCALE, SCALE, doubt.variance / doubt.over ** 2);
  }
  const { misfit, variance } = tapMisfit(a, tap);
  absorbMisfit(a, variance, misfit, placeOnly);
  return a;
}
