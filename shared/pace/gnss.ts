import type { Aids } from '#shared/course/race-class.ts';
import type { FixV1 } from '#shared/journal/observation.ts';
import { shortLine } from '#shared/pace/geodesic.ts';

/**
 * Metres covered by GNSS alone: ground speed integrated (trapezoid), or lines between positions where there is no speed.
 * Runs all the time, whether or not anything rests on it; uses nothing that the class does not permit.
 */
export interface Gnss {
  /** Metres since the first usable fix. */
  metres: number;
  last: { at: number; speed: number | null; lat: number | null; lon: number | null; via: FixV1['via'] } | null;
  /** The last seconds of (instant, metres, speed), for bridging from the instant at which the wheel fell silent. */
  recent: { at: number; metres: number; speed: number }[];
  fixes: number;
  rejected: number;
  /** What the latest metres were made of. */
  by: 'speed' | 'position' | null;
}

export const makeGnss = (): Gnss => ({ metres: 0, last: null, recent: [], fixes: 0, rejected: 0, by: null });

const RECENT_US = 8_000_000;
/** A fix older than this when it comes is not believed. */
const OLDEST_US = 2_000_000;
/** While the receiver talks, the tablet's own location stays out of it. */
const RECEIVER_HOLDS_US = 3_000_000;
/** Below this a receiver at rest still reports some speed, m/s. */
const AT_REST = 0.3;
/** Beyond this gap a straight trapezoid would invent distance. */
const LONGEST_GAP_US = 30_000_000;
/** GNSS says so: the car moves, m/s. */
export const SURELY_MOVING = 3;
const SHORTEST_LINE_M = 2;
const FASTEST = 120;

/** Takes a fix; true when `metres` now stands for its instant. `now` is the latest instant known to the run. */
export function takeFix(gnss: Gnss, fix: FixV1, aids: Aids, now: number): boolean {
  const speed = aids.gnssSpeed && fix.speed !== null && fix.speed >= 0 && fix.speed <= FASTEST ? fix.speed : null;
  const placed = aids.gnssPosition && fix.lat !== null && fix.lon !== null && Math.abs(fix.lat) <= 90 && Math.abs(fix.lon) <= 180;
  const last = gnss.last;
  if (speed === null && !placed) return reject(gnss);
  if (fix.at < now - OLDEST_US || (last !== null && fix.at <= last.at)) return reject(gnss);
  if (last !== null && last.via === 'nmea' && fix.via !== 'nmea' && fix.at - last.at < RECEIVER_HOLDS_US) return reject(gnss);
  const here = { at: fix.at, speed, lat: placed ? fix.lat : null, lon: placed ? fix.lon : null, via: fix.via };
  gnss.fixes++;
  if (last === null) return keep(gnss, here, speed ?? 0);
  return advance(gnss, last, here);
}

function reject(gnss: Gnss): boolean {
  gnss.rejected++;
  return false;
}

function keep(gnss: Gnss, here: NonNullable<Gnss['last']>, speed: number): boolean {
  gnss.last = here;
  gnss.recent.push({ at: here.at, metres: gnss.metres, speed });
  let drop = 0;
  while (drop < gnss.recent.length - 2 && (gnss.recent[drop] as { at: number }).at < here.at - RECENT_US) drop++;
  if (drop > 0) gnss.recent.splice(0, drop);
  return true;
}

const moving = (speed: number): number => (speed < AT_REST ? 0 : speed);

function advance(gnss: Gnss, last: NonNullable<Gnss['last']>, here: NonNullable<Gnss['last']>): boolean {
  const us = here.at - last.at;
  if (last.speed !== null && here.speed !== null && us <= LONGEST_GAP_US) {
    gnss.metres += ((moving(last.speed) + moving(here.speed)) / 2) * (us / 1e6);
    gnss.by = 'speed';
    return keep(gnss, here, here.speed);
  }
  const line = lineBetween(last, here);
  if (line === null) return keep(gnss, here, here.speed ?? 0);
  const implied = line / (us / 1e6);
  // a position that moved too little is noise, one that moved too far is wrong: the next is measured from the same place
  if (line < SHORTEST_LINE_M && here.speed === null) return false;
  if (implied > FASTEST) return reject(gnss);
  gnss.metres += line;
  gnss.by = 'position';
  return keep(gnss, here, here.speed ?? implied);
}

function lineBetween(a: NonNullable<Gnss['last']>, b: NonNullable<Gnss['last']>): number | null {
  if (a.lat === null || a.lon === null || b.lat === null || b.lon === null) return null;
  return shortLine(a.lat, a.lon, b.lat, b.lon);
}

/** Metres by GNSS at an instant of the last seconds, straight between fixes, at the last speed for up to 2 s beyond. Null before any. */
export function gnssMetresAt(gnss: Gnss, at: number): number | null {
  const { recent } = gnss;
  const last = recent[recent.length - 1];
  if (last === undefined) return null;
  if (at >= last.at) return last.metres + (moving(last.speed) * Math.min(at - last.at, OLDEST_US)) / 1e6;
  for (let i = recent.length - 1; i > 0; i--) {
    const [a, b] = [recent[i - 1] as Gnss['recent'][number], recent[i] as Gnss['recent'][number]];
    if (at < a.at) continue;
    return a.metres + (b.metres - a.metres) * ((at - a.at) / (b.at - a.at));
  }
  return (recent[0] as Gnss['recent'][number]).metres;
}
