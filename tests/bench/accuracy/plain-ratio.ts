import type { Pack } from '#shared/course/pack.ts';
import { courseTimes } from './course-times.ts';
import type { Follower } from './follower.ts';
import { makePast } from './past.ts';

/**
 * The classic rule as it is driven by hand: at a touch the distance becomes the place's, and the scale is multiplied by
 * official over measured leg, but for the first. Common practice, no source. No touch is ever doubted.
 */
export function followByPlainRatio(pack: Pack, releaseAt: number): Follower {
  const course = courseTimes(pack);
  const past = makePast();
  const leadUs = pack.settings.tapLeadMs.glass * 1000;
  const seatM = pack.car.behindNose?.seatM ?? 0;
  let metresPerPulse = pack.wheel.mmPerPulse / 1000;
  let count: { readonly last: number; readonly total: number } | null = null;
  let mark = { d: course.model.start - pack.attempt.stagedBehindM, pulses: 0 };
  const distanceAt = (at: number): number => mark.d + (past.at(at) - mark.pulses) * metresPerPulse;

  return {
    take(o) {
      if (o.type === 'pulse.v1' && o.channel === pack.wheel.channel) {
        count = count === null ? { last: o.count, total: 0 } : { last: o.count, total: count.total + ((o.count - count.last) | 0) };
        past.add(o.at, count.total);
      }
      const place = o.type === 'tap.v1' ? course.placeOf(o.checkpoint) : null;
      if (place === null) return;
      const d = place.d + seatM;
      const pulses = past.at(o.at - leadUs);
      const [official, measured] = [d - mark.d, (pulses - mark.pulses) * metresPerPulse];
      if (place.duty === 'scale' && official > 0 && measured > 0) metresPerPulse *= official / measured;
      mark = { d, pulses };
    },
    shown: (at) => (at < releaseAt ? null : { ...course.errorAt(distanceAt(at), (at - releaseAt) / 1e6), sigma: Number.NaN }),
  };
}
