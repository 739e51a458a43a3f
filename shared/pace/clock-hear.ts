import type { ClockV1 } from '#shared/journal/observation.ts';
import { type Clock, fallBack, publish } from './clock.ts';
import {
  type ClockFilter,
  type ClockSample,
  type ClockSource,
  clockEstimate,
  makeClockFilter,
  moveEvent,
  moveOffset,
  moveSource,
  moveUtc,
  predictClock,
  type Surprise,
  surpriseOf,
  updateClock,
} from './clock-filter.ts';
import { takeEdge } from './clock-pps.ts';

/** Surprises beyond this many sigma are doubted; as many in a row that agree are the truth. */
const GATE = 4;
const CONVINCED = 3;
/** Where a state was moved by a surprise, what was known of it before counts for a hundredth. */
const ROOM = 100;
const REMEMBERED = 12;
/** The whole second of an edge is told by a clock that is surer than this, one sigma, ms: 0.4 s at two and a half. */
const TELLS_SECOND_MS = 160;
/** Floors of what a source's samples have in common, ms: a receiver's latency, a person's rhythm, the wire of the box. */
const FLOOR = { nmea: 80, tap: 12, pps: 1.5 } as const;
/** Share of a stated variance that a path or a person repeats in every sample: asymmetry, anticipation. */
const COMMON = 0.8;

/** Offers a sample; true when the line changed. `started`: the release has passed, so the line stands but for a clearly better one. */
export function offerClock(clock: Clock, o: ClockV1, now: number, started: boolean): boolean {
  clock.samples++;
  const z = o.officialMs - o.at / 1000;
  const sigma = Math.max(0.1, Math.abs(o.uncertaintyMs));
  if (o.source === 'wall') return fallBack(clock, { at: o.at, offsetMs: z, sigmaMs: sigma, source: 'wall' }, started);
  const bias = commonVariance(o.source, sigma);
  return hear(clock, { at: o.at, source: o.source, z, bias, own: Math.max(0.01, sigma * sigma - bias) }, now, started);
}

function commonVariance(source: ClockSource, sigma: number): number {
  if (source === 'pps') return FLOOR.pps ** 2;
  if (source === 'nmea') return Math.min(FLOOR.nmea ** 2, sigma * sigma);
  return Math.max(source === 'tap' ? FLOOR.tap ** 2 : 0, COMMON * sigma * sigma);
}

/** An edge of the receiver's pulse per second, at its instant by the box; true when the line changed. */
export function takePps(clock: Clock, at: number, now: number, started: boolean): boolean {
  const second = takeEdge(clock.pps, at);
  const { filter } = clock;
  if (second === null || filter === null) return false;
  const { offset, rate, variance, utc } = clockEstimate(filter);
  if (variance > TELLS_SECOND_MS * TELLS_SECOND_MS) return false;
  const expected = second.at / 1000 + offset + (rate * (second.at - filter.at)) / 1e6;
  const z = Math.round((expected + utc) / 1000) * 1000 - second.at / 1000;
  return hear(clock, { at: second.at, source: 'pps', z, bias: FLOOR.pps ** 2, own: second.sigmaMs ** 2 }, now, started);
}

function hear(clock: Clock, s: ClockSample, now: number, started: boolean): boolean {
  clock.filter ??= makeClockFilter(s);
  const { filter, heard } = clock;
  predictClock(filter, s.at);
  let surprise = surpriseOf(filter, s);
  if (surprise.by ** 2 > GATE * GATE * surprise.variance) {
    if (!makeRoom(clock, filter, s, surprise, started)) return false;
    surprise = surpriseOf(filter, s);
  }
  for (const doubt of clock.doubts) if (doubt.source === s.source) doubt.open = false;
  const weight = updateClock(filter, surprise);
  if (s.source === 'tap') heard.tap = true;
  else if (s.source === 'exchange') heard.server = true;
  else heard.receiver = true;
  if (clock.life !== null) clock.life.guessedFilter = 0;
  if (clock.asleep !== null) clock.asleep.addedFilter = 0;
  return publish(clock, filter, weight > 0.5 ? s.source : null, now, started);
}

/**
 * For a sample that surprises: may it be believed all the same, and what was wrong then? Touches along the event's own clock may,
 * for that clock is what counts; the first exchange may against a receiver's time of unknown latency; a receiver's latency may be
 * anything. All others must say so three times running, and never after the release. Every case is noted.
 */
function makeRoom(clock: Clock, filter: ClockFilter, s: ClockSample, { by, variance }: Surprise, started: boolean): boolean {
  const { heard } = clock;
  const times = noteDoubt(clock, s, by, Math.sqrt(variance));
  const room = ROOM * variance;
  if (s.source === 'nmea') {
    if (heard.receiver && times < CONVINCED) return false;
    moveSource(filter, 'nmea', by, room);
  } else if (started) return false;
  else if (s.source === 'tap') {
    if (heard.server || heard.receiver) moveEvent(filter, by, room);
    else moveOffset(filter, by, room);
  } else if (s.source === 'exchange' && !heard.server) {
    if (heard.tap) moveUtc(filter, by, room);
    else moveOffset(filter, by, room);
  } else if (times < CONVINCED) return false;
  else if (heard.tap) moveSource(filter, s.source, by, room);
  else moveOffset(filter, by, room);
  return true;
}

/** Notes a doubted sample; how many in a row have said about the same. */
function noteDoubt(clock: Clock, { source, at }: ClockSample, byMs: number, sigma: number): number {
  const last = clock.doubts.find((d) => d.source === source && d.open);
  if (last === undefined) {
    clock.doubts.push({ source, at, byMs, times: 1, open: true });
    if (clock.doubts.length > REMEMBERED) clock.doubts.shift();
    return 1;
  }
  last.times = Math.abs(byMs - last.byMs) <= GATE * sigma ? last.times + 1 : 1;
  last.at = at;
  last.byMs = byMs;
  return last.times;
}
