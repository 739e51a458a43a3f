import { correctScale } from '#shared/pace/derive-scale.ts';
import { distanceOf, distanceVariance, lossVariance } from '#shared/pace/distance.ts';
import type { Anchor } from '#shared/pace/run-state.ts';
import { placeSigma } from '#shared/pace/scale.ts';
import { PULSE_VARIANCE, type TapAt, type TapJudge } from '#shared/pace/tap-judge.ts';

/** No tyre changes by more; a leg that says so says something else. */
const MOST_CHANGE = 0.1;

/** A tap under the simple rules: the distance snaps to the place, and the leg corrects the scale by the team's rule. */
export function simpleJudge({ state, anchors, tap, raw }: TapAt): TapJudge {
  const anchor = anchors[anchors.length - 1] as Anchor;
  const { losses } = state.odometer;
  const movedAt = (anchors[0] as Anchor).at;
  const { scaleRule, tapScatterMs } = state.pack.settings;
  const seat = state.pack.car.behindNose?.seatM ?? 0;
  const measured = distanceOf(anchor, raw) - seat;
  const grown = distanceVariance(anchor, raw, tap.t, movedAt, losses);
  const sigmaAt = (surveySigma: number): number => placeSigma(tapScatterMs / 1000, raw.v, surveySigma);
  return {
    measured,
    grown,
    scale: anchor.mmPerPulse,
    misfit(place) {
      const own = sigmaAt(place.surveySigma) ** 2 + PULSE_VARIANCE;
      return { moved: place.d - measured, variance: grown + own, own };
    },
    take(place, story) {
      const at = Math.round(tap.t);
      const d = place.d + seat;
      const moved = place.d - measured;
      const sigma = sigmaAt(place.surveySigma);
      const { duty } = place.checkpoint;
      const { kept, ...scale } = correctScale({
        rule: scaleRule,
        // after a jump the counts of the leg are not to be trusted: it places, and must not teach the scale
        duty: (story === 'jump' || Math.abs(moved) > MOST_CHANGE * (d - anchor.scaleFrom.d)) && duty === 'scale' ? 'place' : duty,
        anchor,
        raw,
        at,
        d,
        sigma,
        movedAt,
        lost: lossVariance(losses, anchor.scaleFrom.at, at),
        changed: story === 'rescale' && d > anchor.d ? (moved / (d - anchor.d)) ** 2 : 0,
      });
      const here = { at, d, w: raw.w, g: raw.g };
      const scaleFrom = kept === null || story === 'jump' || duty === 'settle' ? here : anchor.scaleFrom;
      return {
        moved,
        kept,
        scaleAfter: scale.mmPerPulse,
        anchor: {
          ...here,
          h: raw.h,
          u: raw.u,
          cold: 0,
          speed: 0,
          official: 1,
          belief: null,
          ...scale,
          variance: sigma * sigma + PULSE_VARIANCE,
          scaleFrom,
        },
      };
    },
  };
}
