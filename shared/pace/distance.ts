import type { Anchor, RunState } from '#shared/pace/run-state.ts';
import { SCALE_DRIFT } from '#shared/pace/scale.ts';
import type { Raw } from '#shared/pace/track.ts';
import { rawAt } from '#shared/pace/track.ts';

/** From raw values to official distance and its uncertainty, by the anchor in force. */

/** Official distance of raw values: anchor + count difference × scale, never summed steps. */
export const distanceOf = (anchor: Anchor, raw: Raw): number =>
  anchor.d + ((raw.w - anchor.w) * anchor.mmPerPulse) / 1000 + (raw.g - anchor.g);

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

/** Tyres that warm up after the start change their scale by about this much (relative); the first leg carries it as uncertainty. */
const COLD_TYRES = 0.0035;
/** Slips and lost pulses, m² per metre. */
const SLIPS = 6e-4;
/** Metres by GNSS err by about this share. */
const GNSS_SHARE = 0.004;

/** Variance in m² of the distance at raw values, grown since the anchor. `losses`: stretches that nothing measured. */
export function distanceVariance(
  anchor: Anchor,
  raw: Raw,
  at: number,
  firstLeg: boolean,
  losses: readonly { readonly at: number; readonly sigma: number }[],
): number {
  const wheel = Math.abs(((raw.w - anchor.w) * anchor.mmPerPulse) / 1000);
  const gnss = Math.abs(raw.g - anchor.g) * GNSS_SHARE;
  const scale = anchor.scaleVariance + (firstLeg ? COLD_TYRES * COLD_TYRES : 0);
  let variance = anchor.variance + scale * wheel * wheel + SLIPS * wheel + (SCALE_DRIFT * wheel ** 3) / 3 + gnss * gnss;
  for (const loss of losses) if (loss.at > anchor.at && loss.at <= at) variance += loss.sigma * loss.sigma;
  return variance;
}
