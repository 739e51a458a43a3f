import type { Aids } from '#shared/course/race-class.ts';
import type { PulseV1 } from '#shared/journal/observation.ts';
import { gnssMetresAt, SURELY_MOVING } from '#shared/pace/gnss.ts';
import { handBack, noteGnss } from '#shared/pace/gnss-source.ts';
import type { Odometer, OdometerChange } from '#shared/pace/odometer.ts';
import { keepStill, knot, UNREMARKABLE } from '#shared/pace/odometer-knot.ts';
import { LOOK_US, restartGap, watchGap } from '#shared/pace/pulse-gap.ts';
import { returnToFirst, takeSecond } from '#shared/pace/second-wheel.ts';
import { rateNow } from '#shared/pace/track.ts';
import { beginAnew, takeRecord } from '#shared/pace/wheel.ts';
import { beginDirection, findDirection } from '#shared/pace/wheel-direction.ts';

/** The wheel as the source of distance: its count, what it missed, and the second wheel beside it. */

/** Unchanged for longer than this is a rest. */
const RESTED_US = 700_000;
const GNSS_FRESH_US = 1_500_000;
/** Beside the box's own clock the instants of records are set right by less than this from one to the next, or in a step. */
const STEP_US = 25_000;

export interface WheelChannels {
  /** The measuring one, and another to compare with. */
  readonly channel: number;
  readonly secondChannel?: number;
}

/** Takes a record of a wheel channel; the measuring one counts. */
export function takePulse(
  o: Odometer,
  pulse: PulseV1,
  { channel, secondChannel }: WheelChannels,
  aids: Aids,
  metresPerPulse: number,
): OdometerChange {
  if (!aids.wheel) return UNREMARKABLE;
  if (pulse.channel === channel) return takeFirst(o, pulse, metresPerPulse);
  if (pulse.channel === secondChannel) return takeSecond(o, pulse, metresPerPulse);
  o.otherRecords++;
  return UNREMARKABLE;
}

function takeFirst(o: Odometer, pulse: PulseV1, metresPerPulse: number): OdometerChange {
  const { wheel } = o;
  const { at: before, total } = wheel;
  // the second stood in and GNSS took over from it: what this one counted meanwhile is told already
  if (o.mode === 'gnss' && o.second.standing !== null) {
    o.second.standing = null;
    beginAnew(wheel);
  }
  const verdict = takeRecord(wheel, pulse, metresPerPulse);
  if (verdict === 'moved') o.usedWheel = true;
  if (o.mode === 'wheel' && (verdict === 'moved' || verdict === 'same')) return takeCount(o, wheel.total - total, metresPerPulse);
  if (verdict === 'held' || verdict === 'stale' || verdict === 'same') return UNREMARKABLE;
  return takeUp(o, verdict, before, metresPerPulse);
}

/** The wheel becomes the source of distance, or its count goes on from nothing known. */
function takeUp(o: Odometer, verdict: 'first' | 'moved' | 'restarted', before: number, metresPerPulse: number): OdometerChange {
  const { wheel } = o;
  o.usedWheel = true;
  restartGap(o.gap, wheel.at, wheel.total);
  if (wheel.forward === 0) beginDirection(o);
  if (o.mode === 'gnss') return handBack(o, verdict, metresPerPulse);
  if (verdict === 'restarted')
    return o.second.standing === null ? restart(o, before, metresPerPulse) : returnToFirst(o, 0, false, metresPerPulse);
  o.mode = 'wheel';
  o.wheelKnot = { at: wheel.at, total: wheel.total };
  return knot(o, wheel.at, o.w, o.g, metresPerPulse);
}

function takeCount(o: Odometer, step: number, metresPerPulse: number): OdometerChange {
  const { wheel, gap } = o;
  const turned = wheel.forward === 0 && step !== 0 && findDirection(o, metresPerPulse);
  // across a step of the instants no rate is one: what follows would look like pulses missed
  if (gap.phase === 'steady' && Math.abs(wheel.sinceBox - wheel.since) > STEP_US) restartGap(gap, wheel.at, wheel.total);
  if (gap.phase !== 'steady' || o.second.standing !== null || wheel.at - gap.at >= LOOK_US) {
    const change = lookForGap(o, step, metresPerPulse);
    if (change !== null) return change;
  }
  if (step === 0) {
    o.stillAt = wheel.at;
    return UNREMARKABLE;
  }
  const change = count(o, metresPerPulse);
  // all since the baseline was told anew
  return turned ? { ...change, launch: 'complete' } : change;
}

function count(o: Odometer, metresPerPulse: number): OdometerChange {
  const { wheel, wheelKnot } = o;
  const pulses = wheel.total - wheelKnot.total;
  // one pulse more may have been on its way all the time; several were not, and neither was one after a rest
  const still = o.stillAt - wheelKnot.at;
  if (still > 0 && (Math.abs(pulses) > 1 || still > RESTED_US)) keepStill(o);
  wheelKnot.at = wheel.at;
  wheelKnot.total = wheel.total;
  return knot(o, wheel.at, o.w + pulses, o.g, metresPerPulse);
}

/** Null where the record counts as any other. */
function lookForGap(o: Odometer, step: number, metresPerPulse: number): OdometerChange | null {
  const { wheel, gap } = o;
  const { at, total } = wheel;
  const help = o.second.standing !== null ? 'second' : gap.phase === 'open' && isAtRest(o) ? 'rest' : 'none';
  const verdict = watchGap(gap, at, total, step, wheel.since, help, metresPerPulse);
  if (verdict === 'hold') return UNREMARKABLE;
  if (help === 'second') {
    const isBack = verdict !== 'count' || (step !== 0 && gap.phase === 'steady' && gap.at === at);
    return isBack ? returnToFirst(o, gap.rate, verdict !== 'found', metresPerPulse) : UNREMARKABLE;
  }
  return verdict === 'count' ? null : fillGap(o, metresPerPulse);
}

/** GNSS says that the car hardly moves. */
function isAtRest({ gnss, wheel }: Odometer): boolean {
  const fix = gnss.recent[gnss.recent.length - 1];
  return fix !== undefined && fix.speed <= SURELY_MOVING && wheel.at - fix.at <= GNSS_FRESH_US;
}

/** The count of this record, what was held, and the pulses that were missed. */
function fillGap(o: Odometer, metresPerPulse: number): OdometerChange {
  const { wheel, fills } = o;
  const { filled: missed, sigma } = o.gap;
  const w = o.w + wheel.total - o.wheelKnot.total + missed;
  if (missed > 0) {
    fills.count++;
    fills.metres += missed * metresPerPulse;
    fills.at = wheel.at;
  }
  // a gap that was given up and went on: nothing measured that
  if (missed > 0) o.losses.push({ at: wheel.at, sigma: sigma * metresPerPulse, by: 'fill' });
  else noteLoss(o, wheel.at, sigma * metresPerPulse);
  o.wheelKnot.at = wheel.at;
  o.wheelKnot.total = wheel.total;
  return knot(o, wheel.at, w, o.g, metresPerPulse);
}

/** The box restarted between two records, or another took over: GNSS may know the gap, else only what it has counted since is known. */
function restart(o: Odometer, before: number, metresPerPulse: number): OdometerChange {
  const { wheel, gnss } = o;
  const gap = (wheel.at - before) / 1e6;
  const from = Math.max(before, o.wheelKnot.at);
  const [g0, g1] = [gnssMetresAt(gnss, from), gnssMetresAt(gnss, wheel.at)];
  const covered = gnss.recent.length > 1 && (gnss.recent[0] as { at: number }).at <= from && g0 !== null && g1 !== null;
  const metres = covered ? Math.max(0, g1 - g0) : 0;
  if (covered) noteGnss(o);
  else noteLoss(o, wheel.at, Math.abs(rateNow(o.track)) * metresPerPulse * gap);
  const w = covered ? o.w : o.w + (wheel.total - o.wheelKnot.total);
  o.wheelKnot = { at: wheel.at, total: wheel.total };
  return knot(o, wheel.at, w, o.g + metres, metresPerPulse);
}

/** A car that had not moved lost nothing. */
function noteLoss(o: Odometer, at: number, sigma: number): void {
  if (sigma > 0) o.losses.push({ at, sigma });
}
