import { grownVariance } from '#shared/pace/estimator.ts';
import type { Anchor, RunState } from '#shared/pace/run-state.ts';
import { SCALE_DRIFT } from '#shared/pace/scale.ts';
import type { Raw } from '#shared/pace/track.ts';
import { rawAt } from '#shared/pace/track.ts';

/** From raw values to official distance and its uncertainty, by the anchor in force. */

/** Official distance of raw values: anchor + differences × scale, never summed steps. */
export function distanceOf(anchor: Anchor, raw: Raw): number {
  const counts = raw.w - anchor.w - anchor.cold * (raw.h - anchor.h) + anchor.speed * (raw.u - anchor.u);
  return anchor.d + anchor.official * ((counts * anchor.mmPerPulse) / 1000 + (raw.g - anchor.g));
}

/** Official millimetres per pulse at this moment: the scale with what cold and speed do to it. */
export const scaleNow = (anchor: Anchor, coldness: number, square: number): number =>
  anchor.official * anchor.mmPerPulse * (1 - anchor.cold * coldness + anchor.speed * square);

/** The anchor in force at an instant: the last one not after it; the first before all. */
export function anchorAt(anchors: readonly Anchor[], at: number): Anchor | null {
  for (let i = anchors.length - 1; i > 0; i--) if ((anchors[i] as Anchor).at <= at) return anchors[i] as Anchor;
  return anchors[0] ?? null;
}

/** Official distance at a past instant, or null before the start. */
export function distanceAt(state: RunState, at: number): number | null {
  const anchor = anchorAt(state.derived.anchors, at);
  const raw = rawAt(state.odometer.track, at);
  if (anchor === null || raw === null || at < anchor.at) return null;
  return distanceOf(anchor, raw);
}

/** Tyres that warm up after the start change their scale by about this much (relative). */
const COLD_TYRES = 0.0035;
/** The cold tyres' deficit decays over this time of driving, s. */
const WARMING_S = 400;
/** Slips and lost pulses, m² per metre. */
const SLIPS = 6e-4;
/** Metres by GNSS err by about this share. */
const GNSS_SHARE = 0.004;

/**
 * Mean share of the cold tyres' deficit between two instants, 1 at the first movement and falling to 0: the mean of
 * e^(−t/τ). Own model of how tyres warm; no source.
 */
export function coldShare(movedAt: number, from: number, to: number): number {
  const [a, b] = [Math.max(0, from - movedAt) / 1e6 / WARMING_S, Math.max(0, to - movedAt) / 1e6 / WARMING_S];
  return b - a < 1e-6 ? Math.exp(-a) : (Math.exp(-a) - Math.exp(-b)) / (b - a);
}

/** Relative variance of the scale over a stretch: its own, and what tyres have done since it was measured. */
function stretchScaleVariance(anchor: Anchor, movedAt: number, at: number): number {
  // the pack's own scale may have been measured on tyres as warm or as cold as can be
  const changed = anchor.coldShare === null ? 1 : anchor.coldShare - coldShare(movedAt, anchor.at, at);
  return anchor.scaleVariance + (COLD_TYRES * changed) ** 2;
}

/** Variance in m² of what nothing measured after one instant, up to another. */
export function lossVariance(losses: readonly Loss[], after: number, upTo: number): number {
  let variance = 0;
  for (const loss of losses) if (loss.at > after && loss.at <= upTo) variance += loss.sigma * loss.sigma;
  return variance;
}

export interface Loss {
  readonly at: number;
  /** One sigma, metres. */
  readonly sigma: number;
}

/** Variance in m² of the distance at raw values, grown since the anchor. `movedAt`: instant of the first anchor, when the tyres began to warm. */
export function distanceVariance(anchor: Anchor, raw: Raw, at: number, movedAt: number, losses: readonly Loss[]): number {
  if (anchor.belief !== null) return grownVariance(anchor, anchor.belief, raw) + lossVariance(losses, anchor.at, at);
  const wheel = Math.abs(((raw.w - anchor.w) * anchor.mmPerPulse) / 1000);
  const gnss = Math.abs(raw.g - anchor.g) * GNSS_SHARE;
  const scale = stretchScaleVariance(anchor, movedAt, at) * wheel * wheel + 2 * anchor.covariance * wheel;
  const road = SLIPS * wheel + (SCALE_DRIFT * wheel ** 3) / 3;
  return anchor.variance + scale + road + gnss * gnss + lossVariance(losses, anchor.at, at);
}
