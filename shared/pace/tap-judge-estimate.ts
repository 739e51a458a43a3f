import type { Estimate } from '#shared/pace/belief.ts';
import type { Place } from '#shared/pace/course-model.ts';
import { lossVariance, scaleNow } from '#shared/pace/distance.ts';
import { carry, type TapAtPlace, takeTap, tapMisfit } from '#shared/pace/estimator.ts';
import { speedSquare } from '#shared/pace/heat.ts';
import type { TapAt, TapJudge } from '#shared/pace/tap-judge.ts';
import { coldnessAt } from '#shared/pace/track.ts';

/** A tap under the estimator. The last anchor stands at the last node or tap before it. */
export function estimateJudge({ state, anchors, tap, raw }: TapAt): TapJudge {
  const last = anchors[anchors.length - 1] as Estimate;
  const { odometer, pack } = state;
  const seat = pack.car.behindNose?.seatM ?? 0;
  const scatter = pack.settings.tapScatterMs / 1000;
  const at = Math.round(tap.t);
  const here = carry(last, raw, at, lossVariance(odometer.losses, last.at, at));
  const tapAt = (place: Place): TapAtPlace => ({ d: place.d + seat, surveySigma: place.surveySigma, v: raw.v, scatter, input: tap.input });
  const coldness = coldnessAt(odometer.track, at);
  const scaleOf = (a: Estimate): number => scaleNow(a, coldness, speedSquare(raw.v));
  return {
    measured: here.d - seat,
    grown: here.belief.covariance[0] as number,
    scale: scaleOf(here),
    misfit(place) {
      const { misfit, variance, own } = tapMisfit(here, tapAt(place));
      return { moved: misfit, variance, own };
    },
    take(place, story) {
      const placeOnly = place.checkpoint.duty === 'place';
      const { misfit } = tapMisfit(here, tapAt(place));
      const over = story === 'rescale' && here.d > last.d ? here.d - last.d : null;
      const doubt = { variance: story === 'plain' ? 0 : misfit * misfit, over };
      const anchor = takeTap(here, tapAt(place), placeOnly, doubt);
      return { anchor, moved: anchor.d - here.d, scaleAfter: scaleOf(anchor), kept: placeOnly ? 'place' : null };
    },
  };
}
