import type { Duty } from '#shared/course/course-book.ts';
import type { CockpitSettings } from '#shared/course/pack.ts';
import type { Anchor, PlacePassing } from '#shared/pace/run-state.ts';
import { gainScale, ratioScale, SCALE_DRIFT, SCALE_SIGMA_FIRST, SCALE_SIGMA_LATER, shortestLeg } from '#shared/pace/scale.ts';
import type { Raw } from '#shared/pace/track.ts';

/** Whether and how a leg between two touched places corrects the wheel scale. */

export interface ScaleLeg {
  readonly rule: CockpitSettings['scaleRule'];
  readonly duty: Duty;
  readonly anchor: Anchor;
  readonly raw: Raw;
  /** Official distance of the place, m. */
  readonly d: number;
  /** One sigma of the place's error, m. */
  readonly sigma: number;
  /** The scale was corrected before in this run. */
  readonly corrected: boolean;
}

export interface ScaleOutcome {
  readonly mmPerPulse: number;
  /** Relative variance from here on. */
  readonly variance: number;
  /** Why the scale was left alone; null when it was corrected. */
  readonly kept: PlacePassing['scaleKept'];
}

/** A leg of which more than this share was covered by GNSS says too little about the wheel. */
const MOST_GNSS_SHARE = 0.2;

export function correctScale(leg: ScaleLeg): ScaleOutcome {
  const { anchor, raw, rule } = leg;
  const gnss = raw.g - anchor.g;
  const official = leg.d - anchor.d - gnss;
  const measured = ((raw.w - anchor.w) * anchor.mmPerPulse) / 1000;
  const drifted = anchor.scaleVariance + SCALE_DRIFT * Math.max(0, measured);
  const keep = (kept: NonNullable<ScaleOutcome['kept']>): ScaleOutcome => ({ mmPerPulse: anchor.mmPerPulse, variance: drifted, kept });
  if (leg.duty === 'settle') return keep('settle');
  if (leg.duty !== 'scale') return keep('place');
  if (rule === 'place only') return keep('rule');
  if (!(official > 0) || !(measured > 0) || Math.abs(gnss) > MOST_GNSS_SHARE * official) return keep('leg too short');
  if (rule === 'gain') {
    const update = gainScale(anchor.mmPerPulse, official, measured, drifted, leg.sigma * leg.sigma);
    return { mmPerPulse: update.mmPerPulse, variance: update.variance, kept: null };
  }
  if (official < shortestLeg(leg.sigma, leg.corrected ? SCALE_SIGMA_LATER : SCALE_SIGMA_FIRST)) return keep('leg too short');
  return {
    mmPerPulse: ratioScale(anchor.mmPerPulse, official, measured),
    variance: (2 * leg.sigma * leg.sigma) / (official * official),
    kept: null,
  };
}
