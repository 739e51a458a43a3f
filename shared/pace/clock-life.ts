import type { ClockPairV1, EpochV1 } from '#shared/journal/observation.ts';
import { type Clock, fallBack } from './clock.ts';
import { doubtOffset } from './clock-filter.ts';

/** What the device's own clocks tell: lives of the page, sleeps, and a wall clock that somebody set. */

/** Nobody set the device's own clock for this job. ms, judgement. */
const DEVICE_SIGMA_MS = 2000;
const SLEPT_MS = 50;
const REMEMBERED = 32;

/** A page life began: its wall clock is the last resort, and bridging it to the last life has cost some certainty. */
export function takeEpoch(clock: Clock, o: EpochV1, started: boolean): boolean {
  clock.pair = { mono: o.mono, wall: o.wall };
  if (o.bridgedBy !== 'first') bridge(clock, o);
  return fallBack(clock, { at: o.at, offsetMs: o.wall - o.at / 1000, sigmaMs: DEVICE_SIGMA_MS, source: 'device' }, started);
}

/**
 * A life is first bridged by a wall clock or another page, then, once it is heard, by the box: the better word replaces the guess
 * for the same life, and the doubt of a sleep within it. What the box says of a later sleep is a gap of its own and adds up.
 */
function bridge(clock: Clock, o: EpochV1): void {
  const added = o.uncertaintyMs * o.uncertaintyMs;
  const same = clock.life !== null && clock.life.n === o.n ? clock.life : null;
  wakeUp(clock);
  widen(clock, added - (same?.guessed ?? 0), added - (same?.guessedFilter ?? 0));
  const guessed = o.bridgedBy === 'wall' || o.bridgedBy === 'page' ? added : 0;
  clock.life = { n: o.n, guessed, guessedFilter: guessed };
}

function widen(clock: Clock, line: number, filter: number): void {
  clock.bridgedVariance = Math.max(0, clock.bridgedVariance + line);
  if (clock.filter !== null) doubtOffset(clock.filter, filter);
}

/**
 * True when the device's monotonic and wall clock came apart by more than 50 ms since the last pair. If the wall ran ahead the
 * device may have slept, with the session clock standing still: the clock is unsure by as much until the box, or a sample, tells.
 */
export function takeClockPair(clock: Clock, o: ClockPairV1): boolean {
  const before = clock.pair;
  clock.pair = { mono: o.mono, wall: o.wall };
  if (before === null) return false;
  const byMs = o.wall - before.wall - (o.mono - before.mono);
  if (Math.abs(byMs) <= SLEPT_MS) return false;
  clock.slept.push({ at: o.at, byMs });
  if (clock.slept.length > REMEMBERED) clock.slept.shift();
  if (byMs > 0) {
    const added = byMs * byMs;
    const still = clock.asleep;
    widen(clock, added, added);
    clock.asleep = {
      at: o.at,
      byMs: byMs + (still?.byMs ?? 0),
      box: still === null ? clock.box : still.box,
      added: added + (still?.added ?? 0),
      addedFilter: added + (still?.addedFilter ?? 0),
    };
  }
  return true;
}

/** Every line of the box: its clock never slept, so it tells a sleep from a wall clock that was set. */
export function hearBox(clock: Clock, at: number, boxUs: number): void {
  const { asleep } = clock;
  const now = at - boxUs;
  // modulo 2^32: the box's clock wraps
  if (asleep !== null && asleep.box !== null && at > asleep.at && Math.abs((now - asleep.box) | 0) < asleep.byMs * 500) wakeUp(clock);
  clock.box = now;
}

/** What looked like a sleep was none, or has been mended. */
function wakeUp(clock: Clock): void {
  const { asleep } = clock;
  if (asleep === null) return;
  widen(clock, -asleep.added, -asleep.addedFilter);
  clock.asleep = null;
}
