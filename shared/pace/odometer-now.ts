import { SURELY_MOVING } from '#shared/pace/gnss.ts';
import type { Odometer } from '#shared/pace/odometer.ts';
import { type Counts, rateNow } from '#shared/pace/track.ts';

/** The odometer between records: carried forward, as long as that is honest. */

/** Speed at an instant, m/s, and raw values carried forward from the last knot; null speed where nothing tells it. */
export interface Now extends Counts {
  readonly speed: number | null;
  readonly source: 'wheel' | 'gnss' | 'none';
}

const FRESH_US = 1_000_000;
const GNSS_FRESH_US = 3_000_000;
const CARRY_US = 2_000_000;
const CARRY_SPEED = 5;
/** Below this a receiver at rest still reports some speed, m/s. */
const AT_REST = 0.3;
/** Unchanged for less than this may be a hiccup of the box, not the car. */
const BRIEF_S = 0.15;

/** Values at an instant at or after the last knot. Scale: metres per pulse in force. */
export function odometerNow(o: Odometer, at: number, metresPerPulse: number): Now {
  const lastAt = o.track.recent.at[o.track.recent.at.length - 1];
  if (o.mode === 'none' || lastAt === undefined) return { w: o.w, g: o.g, speed: null, source: 'none' };
  const age = Math.max(0, at - lastAt);
  return o.mode === 'gnss' ? gnssNow(o, at, age) : wheelNow(o, at, age, metresPerPulse);
}

function gnssNow(o: Odometer, at: number, age: number): Now {
  const fix = o.gnss.recent[o.gnss.recent.length - 1];
  if (fix === undefined) return { w: o.w, g: o.g, speed: null, source: 'none' };
  const silent = at - fix.at;
  const speed = fix.speed < AT_REST ? 0 : fix.speed;
  if (silent > GNSS_FRESH_US) return { w: o.w, g: o.g + (speed * CARRY_US) / 1e6, speed: null, source: 'none' };
  return { w: o.w, g: o.g + (speed * Math.min(age, CARRY_US)) / 1e6, speed, source: 'gnss' };
}

function wheelNow(o: Odometer, at: number, age: number, metresPerPulse: number): Now {
  const { wheel, g, w } = o;
  const rate = rateNow(o.track);
  const speed = rate * metresPerPulse;
  const steps = (rate * age) / 1e6;
  if (at - wheel.at > FRESH_US) return quietWheel(o, at, age, rate, speed);
  // alive and unchanged: the next pulse has not come, so the car is less than one pulse further
  if (wheel.at > o.wheelKnot.at) {
    const unchanged = (wheel.at - o.wheelKnot.at) / 1e6;
    const most = unchanged < BRIEF_S ? rate : Math.sign(rate) * Math.min(Math.abs(rate), 1 / unchanged);
    return { w: w + clampStep(steps), g, speed: most * metresPerPulse, source: 'wheel' };
  }
  const carried = Math.abs(speed) > CARRY_SPEED ? steps : clampStep(steps);
  return { w: w + carried, g, speed, source: 'wheel' };
}

/** No record for a second: a box that only speaks when the wheel turns is standing still, if it was slow or GNSS says so. */
function quietWheel(o: Odometer, at: number, age: number, rate: number, speed: number): Now {
  const { g, w, wheel, wheelKnot } = o;
  const standing: Now = { w: w + clampStep((rate * age) / 1e6), g, speed: 0, source: 'wheel' };
  if (Math.abs(speed) <= CARRY_SPEED || wheel.at - wheelKnot.at > FRESH_US) return standing;
  const fix = o.gnss.recent[o.gnss.recent.length - 1];
  if (fix !== undefined && at - fix.at <= GNSS_FRESH_US && fix.speed <= SURELY_MOVING)
    return { ...standing, speed: fix.speed < AT_REST ? 0 : fix.speed };
  const source = age <= CARRY_US ? 'wheel' : 'none';
  return { w: w + (rate * Math.min(age, CARRY_US)) / 1e6, g, speed: null, source };
}

const clampStep = (steps: number): number => Math.max(-1, Math.min(1, steps));
