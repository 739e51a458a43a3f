import type { Duty } from '#shared/course/course-book.ts';
import type { CockpitSettings } from '#shared/course/pack.ts';
import { coldShare } from '#shared/pace/distance.ts';
import type { Anchor, PlacePassing } from '#shared/pace/run-state.ts';
import { gainScale, ratioScale, SCALE_DRIFT, SCALE_SIGMA_FIRST, SCALE_SIGMA_LATER, shortestLeg } from '#shared/pace/scale.ts';
import type { Counts } from '#shared/pace/track.ts';

/**
 * Whether and how a leg corrects the wheel scale. The leg runs from the last place that set the scale (before the first, from
 * the settle place or the start), so that short legs add up: counts are known exactly at both ends, and that the distance was
 * placed in between does not matter.
 */

export interface ScaleLeg {
  readonly rule: CockpitSettings['scaleRule'];
  readonly duty: Duty;
  readonly anchor: Anchor;
  readonly raw: Counts;
  readonly at: number;
  /** Official distance of the place, m. */
  readonly d: number;
  /** One sigma of the place's error, m. */
  readonly sigma: number;
  /** Instant of the first movement. */
  readonly movedAt: number;
  /** Variance of what nothing measured on the leg, m². */
  readonly lost: number;
  /** Relative variance by which the scale may have changed beyond what tyres do. */
  readonly changed: number;
}

export interface ScaleOutcome extends Pick<Anchor, 'mmPerPulse' | 'scaleVariance' | 'covariance' | 'coldShare'> {
  /** Why the scale was left alone; null when it was corrected. */
  readonly kept: PlacePassing['scaleKept'];
}

/** A leg of which more than this share was covered by GNSS says too little about the wheel. */
const MOST_GNSS_SHARE = 0.2;

export function correctScale(leg: ScaleLeg): ScaleOutcome {
  const { anchor, raw, rule, duty } = leg;
  const { mmPerPulse, scaleFrom } = anchor;
  const gnss = raw.g - scaleFrom.g;
  const official = leg.d - scaleFrom.d - gnss;
  const measured = ((raw.w - scaleFrom.w) * mmPerPulse) / 1000;
  const drifted = anchor.scaleVariance + leg.changed + SCALE_DRIFT * Math.max(0, ((raw.w - anchor.w) * mmPerPulse) / 1000);
  const keep = (kept: NonNullable<ScaleOutcome['kept']>): ScaleOutcome => {
    return { mmPerPulse, scaleVariance: drifted, covariance: 0, coldShare: anchor.coldShare, kept };
  };
  if (duty === 'settle') return keep('settle');
  if (duty !== 'scale') return keep('place');
  if (rule === 'place only') return keep('rule');
  if (!(official > 0) || !(measured > 0) || Math.abs(gnss) > MOST_GNSS_SHARE * official) return keep('leg too short');
  // two places make the leg's error, and what nothing measured
  const sigma2 = leg.sigma * leg.sigma + leg.lost / 2;
  const cold = coldShare(leg.movedAt, scaleFrom.at, leg.at);
  if (rule === 'gain') {
    const update = gainScale(mmPerPulse, official, measured, drifted, sigma2);
    const covariance = (update.gain * leg.sigma * leg.sigma) / official;
    return {
      mmPerPulse: update.mmPerPulse,
      scaleVariance: update.variance,
      covariance,
      coldShare: blend(anchor.coldShare, cold, update.gain),
      kept: null,
    };
  }
  if (official < shortestLeg(Math.sqrt(sigma2), anchor.coldShare === null ? SCALE_SIGMA_FIRST : SCALE_SIGMA_LATER))
    return keep('leg too short');
  return {
    mmPerPulse: ratioScale(mmPerPulse, official, measured),
    // the scale is the mean over the leg; by its end the tyre has wandered from that
    scaleVariance: (2 * sigma2) / (official * official) + (SCALE_DRIFT * official) / 3,
    covariance: (leg.sigma * leg.sigma) / official,
    coldShare: cold,
    kept: null,
  };
}

/** How cold the tyres were for a scale that is part the old, part the new. */
const blend = (before: number | null, now: number, gain: number): number => (before === null ? now : before + gain * (now - before));
