import { rewindLaunches } from '#shared/pace/launch.ts';
import type { Odometer } from '#shared/pace/odometer.ts';
import { restartGap } from '#shared/pace/pulse-gap.ts';
import type { Knots } from '#shared/pace/track.ts';

/**
 * Which way round the measuring wheel's sensor is mounted: told by how the car drives after the first record. A car backs onto
 * the start line at a walk; what gathers speed backwards is a car going forwards with a sensor that counts down. What was counted
 * since the baseline is then mirrored. Once a car has gone well forwards this is settled, and nothing is looked at any more.
 */
export interface WheelDirection {
  baseAt: number;
  /** Counts at the baseline, at the last turn, and at the furthest since. */
  base: number;
  turn: number;
  furthest: number;
  /** Speed is read from here on. */
  markAt: number;
  mark: number;
}

export const makeWheelDirection = (): WheelDirection => ({ baseAt: 0, base: 0, turn: 0, furthest: 0, markAt: 0, mark: 0 });

/** Steadily backwards for this far, and at more than this speed in the end, m and m/s: no car reverses so. Judgement, no source. */
const MIRRORED_M = 10;
const MIRRORED_SPEED = 5;
const FORWARDS_M = 100;
const MARK_US = 500_000;
/** A turn is more than this, and more than a dither. */
const TURN_M = 0.3;
const TURN_PULSES = 2;

/** A new baseline: nothing is known of the way round. */
export function beginDirection(o: Odometer): void {
  const { direction, wheel } = o;
  direction.baseAt = direction.markAt = wheel.at;
  direction.base = direction.turn = direction.furthest = direction.mark = wheel.total;
}

/** After a record that moved, before its knot: true where the count was found to run down, and all since the baseline is mirrored. */
export function findDirection(o: Odometer, metresPerPulse: number): boolean {
  const { direction: d, wheel } = o;
  const { at, total } = wheel;
  const back = (d.furthest - total) * Math.sign(d.furthest - d.turn);
  if (back <= 0) d.furthest = total;
  else if (back > Math.max(TURN_PULSES, TURN_M / metresPerPulse)) {
    d.turn = d.furthest;
    d.furthest = total;
  }
  const us = at - d.markAt;
  if (us < MARK_US) return false;
  const speed = ((total - d.mark) * metresPerPulse * 1e6) / us;
  d.markAt = at;
  d.mark = total;
  const run = (total - d.turn) * metresPerPulse;
  if (run >= FORWARDS_M && speed > MIRRORED_SPEED) wheel.forward = wheel.sign;
  if (run > -MIRRORED_M || speed > -MIRRORED_SPEED) return false;
  mirror(o, metresPerPulse);
  return true;
}

function mirror(o: Odometer, metresPerPulse: number): void {
  const { direction: d, wheel, track, wheelKnot } = o;
  const about = o.w - wheelKnot.total + d.base;
  wheel.sign = -wheel.sign as 1 | -1;
  wheel.total = 2 * d.base - wheel.total;
  wheelKnot.total = 2 * d.base - wheelKnot.total;
  o.w = 2 * about - o.w;
  const from = lastNotAfter(track.trace, d.baseAt);
  mirrorFrom(track.recent.w, firstFrom(track.recent, d.baseAt), about);
  mirrorFrom(track.trace.w, firstFrom(track.trace, d.baseAt), about);
  for (const sum of [track.trace.h, track.trace.u]) mirrorFrom(sum, from, sum[from] ?? 0);
  rewindLaunches(o.launches, d.baseAt, about, metresPerPulse);
  restartGap(o.gap, wheel.at, wheel.total);
  o.second.pair.seen = false;
  o.comparison.last = null;
  d.turn = d.base;
  d.furthest = d.mark = wheel.total;
}

function mirrorFrom(values: number[], from: number, about: number): void {
  for (let i = from; i < values.length; i++) values[i] = 2 * about - (values[i] as number);
}

function firstFrom({ head, at }: Knots, instant: number): number {
  let i = at.length;
  while (i > head && (at[i - 1] as number) >= instant) i--;
  return i;
}

const lastNotAfter = (k: Knots, instant: number): number => {
  const i = firstFrom(k, instant);
  return k.at[i] === instant ? i : Math.max(0, i - 1);
};
