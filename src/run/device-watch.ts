import type { NewObservation } from '#shared/journal/observation.ts';
import type { ClockReading, SessionClock } from './clock.ts';

const PAIR_EVERY_MS = 10_000;
/** The device's two clocks come apart by more than this only when it slept or its wall clock was set. */
const APART_MS = 50;

/** The pair of the device's clocks, every ten seconds and whenever they came apart: then a gap may have begun. */
export function createDeviceWatch(clock: SessionClock) {
  let last: ClockReading = clock.reading();
  return {
    look(): { readonly pair: NewObservation | null; readonly apart: boolean } {
      const now = clock.reading();
      const apart = Math.abs(now.wall - last.wall - (now.mono - last.mono)) > APART_MS;
      if (!apart && now.mono - last.mono < PAIR_EVERY_MS * clock.rate) return { pair: null, apart };
      last = now;
      return { pair: { type: 'clock-pair.v1', ...now }, apart };
    },
  };
}
