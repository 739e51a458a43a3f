import type { Aids } from '#shared/course/race-class.ts';
import type { FixV1 } from '#shared/journal/observation.ts';
import { shortLine } from '#shared/pace/geodesic.ts';
import { type GnssStamp, makeGnssStamp, stampOf } from '#shared/pace/gnss-stamp.ts';

/**
 * Metres covered by GNSS alone: ground speed integrated (trapezoid), or lines between positions where there is no speed.
 * Runs all the time, whether or not anything rests on it; uses nothing that the class does not permit. Instants in here are
 * those at which fixes came; `lag` says how much earlier what they tell was true.
 */
export interface Gnss {
  /** Metres since the first usable fix. */
  metres: number;
  last: LastFix | null;
  /** The last seconds of (instant, metres, speed), for bridging from the instant at which the wheel fell silent. */
  recent: GnssKnot[];
  fixes: number;
  rejected: number;
  /** What the latest metres were made of. */
  by: 'speed' | 'position' | null;
  /** Latest fix before which metres were not measured speed by speed: an outage, or lines between positions. */
  brokenAt: number;
  readonly stamp: GnssStamp;
  /** How late fixes come, µs, and one sigma of that. */
  lag: { us: number; sigmaUs: number };
}

export interface GnssKnot {
  readonly at: number;
  readonly metres: number;
  readonly speed: number;
}

interface LastFix {
  readonly at: number;
  readonly speed: number | null;
  readonly lat: number | null;
  readonly lon: number | null;
  readonly via: FixV1['via'];
}

/** Lateness before any has been measured, µs. Judgement, no source: a receiver's sentences, a tablet's own location. */
export const LAG_BEFORE = {
  nmea: { us: 150_000, sigmaUs: 150_000 },
  geolocation: { us: 900_000, sigmaUs: 500_000 },
} as const;

export const makeGnss = (): Gnss => ({
  metres: 0,
  last: null,
  recent: [],
  fixes: 0,
  rejected: 0,
  by: null,
  brokenAt: 0,
  stamp: makeGnssStamp(),
  lag: { ...LAG_BEFORE.nmea },
});

const RECENT_US = 8_000_000;
const CUT = 32;
/** A fix older than this when it comes is not believed. */
const OLDEST_US = 2_000_000;
/** While the receiver talks, the tablet's own location stays out of it. */
const RECEIVER_HOLDS_US = 3_000_000;
/** Below this a receiver at rest still reports some speed, m/s. */
const AT_REST = 0.3;
/** Longer than this between two speeds is an outage. */
export const OUTAGE_US = 3_000_000;
/** GNSS says so: the car moves, m/s. */
export const SURELY_MOVING = 3;
/** Beyond this gap a straight trapezoid would invent distance, where positions tell a better one. */
const LONGEST_GAP_US = 30_000_000;
const SHORTEST_LINE_M = 2;
/** What the positions at both ends may add to a line. */
const UNSURE_LINE_M = 10;
const FASTEST = 120;

/** Takes a fix; true when `metres` now stands for its instant. `now` is the latest instant known to the run. */
export function takeFix(gnss: Gnss, fix: FixV1, aids: Aids, now: number): boolean {
  const speed = aids.gnssSpeed && fix.speed !== null && fix.speed >= 0 && fix.speed <= FASTEST ? fix.speed : null;
  const placed = aids.gnssPosition && isPlaced(fix);
  const last = gnss.last;
  if (speed === null && !placed) return reject(gnss);
  if (fix.at < now - OLDEST_US) return reject(gnss);
  if (last !== null && last.via === 'nmea' && fix.via !== 'nmea' && fix.at - last.at < RECEIVER_HOLDS_US) return reject(gnss);
  const other = last !== null && last.via !== fix.via;
  const at = stampOf(gnss.stamp, fix, other);
  if (last !== null && at <= last.at) return reject(gnss);
  if (last === null || other) gnss.lag = { ...LAG_BEFORE[fix.via] };
  const here: LastFix = { at, speed, lat: placed ? fix.lat : null, lon: placed ? fix.lon : null, via: fix.via };
  gnss.fixes++;
  if (last === null) {
    gnss.brokenAt = at;
    return keep(gnss, here, speed ?? 0);
  }
  return advance(gnss, last, here);
}

export const isPlaced = ({ lat, lon }: FixV1): boolean => lat !== null && lon !== null && Math.abs(lat) <= 90 && Math.abs(lon) <= 180;

function reject(gnss: Gnss): boolean {
  gnss.rejected++;
  return false;
}

function keep(gnss: Gnss, here: LastFix, speed: number): boolean {
  gnss.last = here;
  gnss.recent.push({ at: here.at, metres: gnss.metres, speed });
  // cut back now and then, not at every fix
  const oldest = gnss.recent.length > CUT + 2 ? (gnss.recent[CUT] as GnssKnot).at : here.at;
  if (oldest < here.at - RECENT_US) gnss.recent.splice(0, CUT);
  return true;
}

/** Speed as far as it is movement. */
export const moving = (speed: number): number => (speed < AT_REST ? 0 : speed);

function advance(gnss: Gnss, last: LastFix, here: LastFix): boolean {
  const us = here.at - last.at;
  const swept = last.speed !== null && here.speed !== null ? ((moving(last.speed) + moving(here.speed)) / 2) * (us / 1e6) : null;
  if (us > OUTAGE_US || swept === null) gnss.brokenAt = here.at;
  if (swept !== null && us <= OUTAGE_US) return sweep(gnss, here, swept);
  const line = lineBetween(last, here);
  if (swept !== null && (us <= LONGEST_GAP_US || line === null)) {
    // the straight line is the least that can have been driven
    const short = line !== null && line > swept + UNSURE_LINE_M && line <= (FASTEST * us) / 1e6;
    return sweep(gnss, here, short ? line : swept);
  }
  if (line === null) return keep(gnss, here, here.speed ?? 0);
  const implied = line / (us / 1e6);
  // a position that moved too little is noise, one that moved too far is wrong: the next is measured from the same place
  if (line < SHORTEST_LINE_M && here.speed === null) return false;
  if (implied > FASTEST) return reject(gnss);
  gnss.metres += line;
  gnss.by = 'position';
  return keep(gnss, here, here.speed ?? implied);
}

function sweep(gnss: Gnss, here: LastFix, metres: number): boolean {
  gnss.metres += metres;
  gnss.by = 'speed';
  return keep(gnss, here, here.speed as number);
}

function lineBetween(a: LastFix, b: LastFix): number | null {
  if (a.lat === null || a.lon === null || b.lat === null || b.lon === null) return null;
  return shortLine(a.lat, a.lon, b.lat, b.lon);
}

/** Metres by GNSS as of an instant of the last seconds, its lateness taken off. Null before any. */
export const gnssMetresAt = (gnss: Gnss, at: number): number | null => metresAtArrival(gnss, at + gnss.lag.us);

/** The same by the instants at which fixes came: straight between fixes, at the last speed for up to 2 s beyond. */
export function metresAtArrival({ recent }: Gnss, at: number): number | null {
  const last = recent[recent.length - 1];
  if (last === undefined) return null;
  if (at >= last.at) return last.metres + (moving(last.speed) * Math.min(at - last.at, OLDEST_US)) / 1e6;
  for (let i = recent.length - 1; i > 0; i--) {
    const [a, b] = [recent[i - 1] as GnssKnot, recent[i] as GnssKnot];
    if (at < a.at) continue;
    return a.metres + (b.metres - a.metres) * ((at - a.at) / (b.at - a.at));
  }
  return (recent[0] as GnssKnot).metres;
}
