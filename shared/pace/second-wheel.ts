import type { PulseV1 } from '#shared/journal/observation.ts';
import type { Odometer, OdometerChange } from '#shared/pace/odometer.ts';
import { keepStill, knot, UNREMARKABLE } from '#shared/pace/odometer-knot.ts';
import { lastKnotAt } from '#shared/pace/track.ts';
import { makeWheelChannel, takeRecord, type WheelChannel } from '#shared/pace/wheel.ts';
import { compareWheels, makeWheelPair, pairUp, type WheelPair } from '#shared/pace/wheel-pair.ts';

/** A second wheel channel: compared with the measuring one all the time, and standing in where that falls silent or its count freezes. */
export interface SecondWheel {
  readonly channel: WheelChannel;
  readonly pair: WheelPair;
  /** While it stands in: raw counts of the measuring wheel, its own count and the measuring wheel's where it took over. */
  standing: { w: number; second: number; first: number } | null;
  standIns: number;
  standInMetres: number;
}

export const makeSecondWheel = (): SecondWheel => ({
  channel: makeWheelChannel(),
  pair: makeWheelPair(),
  standing: null,
  standIns: 0,
  standInMetres: 0,
});

/** The measuring wheel is silent for this long while the other goes on. */
const SILENT_US = 500_000;
/** How far the other must have gone on, in pulses and metres of the measuring wheel, and as a share of what its last speed makes. */
const WENT_ON_PULSES = 3;
const WENT_ON_M = 1;
const WENT_ON_SHARE = 0.3;
/** Before the ratio is learnt a pulse may be this much shorter than one of the measuring wheel. */
const UNKNOWN_SHARE = 1e-4;
const RESTED_US = 700_000;
/** Metres through the learnt ratio err by about this share. */
const RATIO_SHARE = 0.004;
/** Where the measuring wheel's count went on all the same, it agrees with the other to within this share and a few pulses. */
const COUNT_AGREES = 0.02;

/** Takes a record of the second channel. */
export function takeSecond(o: Odometer, pulse: PulseV1, metresPerPulse: number): OdometerChange {
  const { second } = o;
  const { channel, pair } = second;
  const own = pair.ratio === null ? metresPerPulse * UNKNOWN_SHARE : Math.abs(pair.ratio) * metresPerPulse;
  const verdict = takeRecord(channel, pulse, own);
  if (verdict === 'held' || verdict === 'stale') return UNREMARKABLE;
  if (verdict !== 'moved' && verdict !== 'same') {
    pair.seen = false;
    if (second.standing !== null) second.standing = { w: o.w, second: channel.total, first: o.wheel.total };
    return UNREMARKABLE;
  }
  if (o.mode !== 'wheel') {
    pair.seen = false;
    return UNREMARKABLE;
  }
  if (second.standing === null && !takesOver(o, metresPerPulse)) {
    if (o.gap.phase === 'steady' && pairUp(pair, o.gap, channel)) compareWheels(pair, metresPerPulse);
    channel.forward = Math.sign(pair.ratio ?? 0);
    return UNREMARKABLE;
  }
  return standOn(o, verdict === 'moved', pair.ratio as number, metresPerPulse);
}

/** The measuring wheel fell silent or froze, and this one went on: from the last instant at which both were well. */
function takesOver(o: Odometer, metresPerPulse: number): boolean {
  const { second, gap, wheel, wheelKnot } = o;
  const { channel, pair } = second;
  if (pair.ratio === null || !pair.seen) return false;
  if (gap.phase === 'steady' && channel.at - wheel.at <= SILENT_US) return false;
  const wentOn = (channel.total - pair.second) * pair.ratio;
  const due = (WENT_ON_SHARE * gap.rate * (channel.at - pair.at)) / 1e6;
  const least = gap.phase === 'steady' ? Math.max(WENT_ON_PULSES, WENT_ON_M / metresPerPulse) : 1;
  if (wentOn < Math.max(least, due)) return false;
  // a gap that was given up has been filled already
  second.standing =
    gap.phase === 'lost'
      ? { w: o.w, second: channel.total, first: wheel.total }
      : { w: o.w - wheelKnot.total + pair.first, second: pair.second, first: pair.first };
  second.standIns++;
  return true;
}

function standOn(o: Odometer, moved: boolean, ratio: number, metresPerPulse: number): OdometerChange {
  const { channel, standing } = o.second;
  if (standing === null) return UNREMARKABLE;
  const w = standing.w + (channel.total - standing.second) * ratio;
  const at = Math.max(channel.at, lastKnotAt(o.track) ?? channel.at);
  if (!moved) o.stillAt = at;
  if (!moved || w < o.w) return UNREMARKABLE;
  if (o.stillAt - o.wheelKnot.at > RESTED_US) keepStill(o);
  o.second.standInMetres += (w - o.w) * metresPerPulse;
  o.wheelKnot.at = at;
  o.wheelKnot.total = o.wheel.total;
  return knot(o, at, w, o.g, metresPerPulse);
}

/**
 * The measuring wheel speaks again: on from where the second stands, carried to this instant at `rate` counts a second; or by the
 * measuring wheel's own count, where that went on all the while and says the same.
 */
export function returnToFirst(o: Odometer, rate: number, counted: boolean, metresPerPulse: number): OdometerChange {
  const { second, wheel } = o;
  const { w, first } = second.standing as NonNullable<SecondWheel['standing']>;
  const lastAt = lastKnotAt(o.track) ?? wheel.at;
  const carried = o.w + (rate * Math.max(0, wheel.at - lastAt)) / 1e6;
  const own = w + wheel.total - first;
  const agrees = counted && Math.abs(own - carried) <= WENT_ON_PULSES + COUNT_AGREES * (carried - w);
  second.standing = null;
  second.pair.seen = false;
  if (!agrees) o.losses.push({ at: wheel.at, sigma: RATIO_SHARE * (carried - w) * metresPerPulse, by: 'fill' });
  o.wheelKnot.at = wheel.at;
  o.wheelKnot.total = wheel.total;
  return knot(o, Math.max(wheel.at, lastAt), agrees ? own : carried, o.g, metresPerPulse);
}
