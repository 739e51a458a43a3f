import { SURELY_MOVING } from '#shared/pace/gnss.ts';
import type { Odometer } from '#shared/pace/odometer.ts';
import { carriedThrough } from '#shared/pace/pulse-gap.ts';
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
  // the last knot is where the car was when the fix was true, not when it came
  const most = CARRY_US + o.gnss.lag.us;
  if (silent > GNSS_FRESH_US) return { w: o.w, g: o.g + (speed * most) / 1e6, speed: null, source: 'none' };
  return { w: o.w, g: o.g + (speed * Math.min(age, most)) / 1e6, speed, source: 'gnss' };
}

/** Last record of the wheel that measures now. */
const heardAt = ({ wheel, second }: Odometer): number => (second.standing === null ? wheel.at : second.channel.at);

function wheelNow(o: Odometer, at: number, age: number, metresPerPulse: number): Now {
  const { g, w } = o;
  if (o.gap.phase !== 'steady' && o.second.standing === null) return gapNow(o, at, metresPerPulse);
  const rate = rateNow(o.track);
  const speed = rate * metresPerPulse;
  const steps = (rate * age) / 1e6;
  const heard = heardAt(o);
  if (at - heard > FRESH_US) return quietWheel(o, at, age, rate, speed);
  // alive and unchanged: the next pulse has not come, so the car is less than one pulse further
  if (heard > o.wheelKnot.at) {
    const unchanged = (heard - o.wheelKnot.at) / 1e6;
    const most = unchanged < BRIEF_S ? rate : Math.sign(rate) * Math.min(Math.abs(rate), 1 / unchanged);
    return { w: w + clampStep(steps), g, speed: most * metresPerPulse, source: 'wheel' };
  }
  const carried = Math.abs(speed) > CARRY_SPEED ? steps : clampStep(steps);
  return { w: w + carried, g, speed, source: 'wheel' };
}

/** The count fell short of what any braking explains: on at the last speed, or at rest where GNSS says so. */
function gapNow(o: Odometer, at: number, metresPerPulse: number): Now {
  const { g, w, gap } = o;
  const rest = restBy(o, at);
  if (rest !== null) return { w, g, speed: rest, source: 'wheel' };
  if (gap.phase === 'lost' || at - gap.at > CARRY_US + FRESH_US) return { w, g, speed: null, source: 'none' };
  const through = w - o.wheelKnot.total + gap.total + carriedThrough(gap, at);
  return { w: Math.max(w, through), g, speed: gap.rate * metresPerPulse, source: 'wheel' };
}

/** Speed where GNSS says that the car hardly moves, else null. */
function restBy({ gnss }: Odometer, at: number): number | null {
  const fix = gnss.recent[gnss.recent.length - 1];
  if (fix === undefined || at - fix.at > GNSS_FRESH_US || fix.speed > SURELY_MOVING) return null;
  return fix.speed < AT_REST ? 0 : fix.speed;
}

/** No record for a second: a box that only speaks when the wheel turns is standing still, if it was slow or GNSS says so. */
function quietWheel(o: Odometer, at: number, age: number, rate: number, speed: number): Now {
  const { g, w, wheelKnot } = o;
  const standing: Now = { w: w + clampStep((rate * age) / 1e6), g, speed: 0, source: 'wheel' };
  if (Math.abs(speed) <= CARRY_SPEED || heardAt(o) - wheelKnot.at > FRESH_US) return standing;
  const rest = restBy(o, at);
  if (rest !== null) return { ...standing, speed: rest };
  const source = age <= CARRY_US ? 'wheel' : 'none';
  return { w: w + (rate * Math.min(age, CARRY_US)) / 1e6, g, speed: null, source };
}

/** Metres that may have gone by unmeasured: at the last speed, since that is carried on no longer. */
export function unmeasuredNow(o: Odometer, at: number, metresPerPulse: number): number {
  const last = o.track.recent.at[o.track.recent.at.length - 1];
  if (o.mode === 'none' || last === undefined) return 0;
  const fix = o.gnss.recent[o.gnss.recent.length - 1];
  const speed = o.mode === 'gnss' ? (fix?.speed ?? 0) : Math.abs(rateNow(o.track)) * metresPerPulse;
  return (speed * Math.max(0, at - last - CARRY_US)) / 1e6;
}

const clampStep = (steps: number): number => Math.max(-1, Math.min(1, steps));
