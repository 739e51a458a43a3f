/**
 * A sensor that misses pulses: records come, but the count falls short of what the car must have covered, however hard it brakes.
 *
 * Over a window of W seconds at mean rate v, and the dt seconds after it, mean rates cannot differ by more than a·(W + dt)/2 for a
 * car that brakes by no more than a: at least dt·(v − a·(W + dt)/2) pulses are due. Fewer than that, by more than counting and
 * jitter explain, opens a gap. Nothing is decided until the count goes on at a speed a car can have: then what fell short of the
 * mean of the speeds before and after is filled. Records that were only late have caught up by then, and nothing is.
 */
export interface PulseGap {
  phase: 'steady' | 'open' | 'lost';
  /** The sensor has made its first step. */
  begun: boolean;
  /** Last record that advanced as a car does. */
  at: number;
  total: number;
  /** Counts per second over the window that ended there, and the window's length in seconds. */
  rate: number;
  span: number;
  /** Begin of that window, and of the next one. */
  fromAt: number;
  fromTotal: number;
  nextAt: number;
  nextTotal: number;
  /** While a gap is open: since when the count may have gone on, and the end of the first stage of that. */
  backAt: number;
  backTotal: number;
  midAt: number;
  midTotal: number;
  /** Of the last gap that ended: pulses to add, and one sigma of what was missed, in pulses. */
  filled: number;
  sigma: number;
}

export const makePulseGap = (): PulseGap => ({
  phase: 'steady',
  begun: false,
  at: 0,
  total: 0,
  rate: 0,
  span: 0,
  fromAt: 0,
  fromTotal: 0,
  nextAt: 0,
  nextTotal: 0,
  backAt: 0,
  backTotal: 0,
  midAt: 0,
  midTotal: 0,
  filled: 0,
  sigma: 0,
});

/**
 * count: as any record; hold: not yet; resumed: count it and what was held, and `filled` more (0 where it was only late);
 * lost: the same, 2 s into a gap that goes on; found: count it, the gap is over, and `sigma` went by unmeasured.
 */
export type GapVerdict = 'count' | 'hold' | 'resumed' | 'lost' | 'found';

/** What else is known: another wheel measures meanwhile, or GNSS says that the car has come to rest. */
export type GapHelp = 'none' | 'second' | 'rest';

/** Braking on a dry road with road tyres stays below this, m/s². From memory. */
const HARDEST_BRAKING = 12;
/** Slower than this nothing is filled, m/s. */
const SLOWEST = 5;
const WINDOW_US = 125_000;
const WINDOW_PULSES = 3;
/** Looked at no more often than this; a quick box sends every other record sooner. */
export const LOOK_US = 15_000;
/** Instants of records err by up to this, s. */
const JITTER_S = 0.03;
/** A count that goes on is believed when it did so at one speed over two stages of at least this. */
const STAGE_US = 50_000;
const STAGE_PULSES = 3;
const STAGE_SHARE = 0.1;
/** A gap is filled for no longer than this. */
const LONGEST_US = 2_000_000;
/** A count that has begun to go on is believed, or not, within this. */
const BACK_WITHIN_US = 1_500_000;
/** A wheel that turns more slowly than this, m/s, or than this share of its speed before, has not come back. */
const BACK_SLOWEST = 1;
const BACK_SHARE = 0.25;
const DITHER_PULSES = 2;
const FILL_SHARE = 0.1;
/** Share of what the mean of two speeds may be off by, where they differ: when the car slowed is not known. */
const SLOWING_SHARE = 0.25;
/** Unresumed: a dead sensor and a wheel locked to rest look the same. */
const UNRESUMED_SHARE = 0.3;

/** A new baseline: nothing is known of the speed before. */
export function restartGap(gap: PulseGap, at: number, total: number): void {
  gap.phase = 'steady';
  gap.begun = false;
  gap.rate = 0;
  gap.at = gap.fromAt = gap.nextAt = at;
  gap.total = gap.fromTotal = gap.nextTotal = total;
}

/**
 * Takes a believed record: instant, unwrapped count, by how much that changed, microseconds since the record before. What must be
 * added is left in `filled` and `sigma`.
 */
export function watchGap(
  gap: PulseGap,
  at: number,
  total: number,
  step: number,
  since: number,
  help: GapHelp,
  metresPerPulse: number,
): GapVerdict {
  if (gap.phase !== 'steady') return watchOpen(gap, at, total, isMove(gap, step, since) ? since : 0, help, metresPerPulse);
  const dt = (at - gap.at) / 1e6;
  const short = dt * (gap.rate - (HARDEST_BRAKING / metresPerPulse) * 0.5 * (gap.span + dt)) - (total - gap.total);
  if (short <= 1 || gap.rate * metresPerPulse <= SLOWEST) {
    if (step !== 0) advance(gap, at, total);
    return 'count';
  }
  // where the last mark lay within its pulse is known as well as records are close
  const edge = Math.min(1, (gap.rate * since) / 1e6);
  if (short <= 1 + edge * (1 + dt / gap.span) + gap.rate * JITTER_S) return 'count';
  gap.phase = 'open';
  beginBack(gap, at, total);
  return 'hold';
}

function beginBack(gap: PulseGap, at: number, total: number): void {
  gap.backAt = gap.midAt = at;
  gap.backTotal = gap.midTotal = total;
}

function advance(gap: PulseGap, at: number, total: number): void {
  // the first step of a sensor is no speed: its two records may lie anyhow beside each other
  if (!gap.begun) {
    restartGap(gap, at, total);
    gap.begun = true;
    return;
  }
  gap.at = at;
  gap.total = total;
  if (at - gap.nextAt >= WINDOW_US && Math.abs(total - gap.nextTotal) >= WINDOW_PULSES) {
    gap.fromAt = gap.nextAt;
    gap.fromTotal = gap.nextTotal;
    gap.nextAt = at;
    gap.nextTotal = total;
  }
  const us = at - gap.fromAt;
  gap.span = us / 1e6;
  gap.rate = us > 0 ? ((total - gap.fromTotal) * 1e6) / us : 0;
}

/** A standing encoder dithers by a count or two, where a turning wheel would make many. */
const isMove = (gap: PulseGap, step: number, since: number): boolean =>
  step !== 0 && (Math.abs(step) > DITHER_PULSES || BACK_SHARE * gap.rate * since < 4e6 * DITHER_PULSES);

/** `since` is 0 where the count did not go on. */
function watchOpen(gap: PulseGap, at: number, total: number, since: number, help: GapHelp, metresPerPulse: number): GapVerdict {
  const isLost = gap.phase === 'lost';
  const atRest = help === 'rest' && !isLost;
  const back = atRest ? 0 : since > 0 ? goesOnAt(gap, at, total, since, metresPerPulse) : null;
  if (back === null) {
    if (isLost) return 'count';
    return help === 'none' && isOver(gap, at, total) ? lose(gap, at, total) : 'hold';
  }
  if (isLost) {
    gap.filled = 0;
    // a car that comes away from rest had stopped, and what was filled is unsure by that already
    gap.sigma = back * metresPerPulse > SLOWEST ? (gap.rate * Math.max(0, gap.backAt - gap.at - LONGEST_US)) / 1e6 : 0;
  } else {
    fillBetween(gap, atRest ? at : gap.backAt, at, total, back);
  }
  goOn(gap, at, total, back);
  return isLost ? 'found' : 'resumed';
}

/** What fell short of the mean of the speeds before and after, from the last good record until the count went on. */
function fillBetween(gap: PulseGap, until: number, at: number, total: number, back: number): void {
  const dt = (until - gap.at) / 1e6;
  const missed = Math.round(0.5 * (gap.rate + back) * dt - (gap.backTotal - gap.total));
  // records that were late have caught up with the speed before
  const behind = (gap.rate * (at - gap.at)) / 1e6 - (total - gap.total);
  const least = Math.max(2, gap.rate * JITTER_S);
  gap.filled = missed >= least && behind >= least ? missed : 0;
  gap.sigma = gap.filled === 0 ? 0 : FILL_SHARE * gap.filled + SLOWING_SHARE * Math.abs(gap.rate - back) * dt;
}

function goOn(gap: PulseGap, at: number, total: number, rate: number): void {
  const [fromAt, fromTotal] = [gap.backAt, gap.backTotal];
  restartGap(gap, at, total);
  gap.fromAt = fromAt;
  gap.fromTotal = fromTotal;
  gap.begun = true;
  gap.rate = rate;
  gap.span = (at - fromAt) / 1e6;
}

/** Too long to be filled any further, unless the count is just about to go on. */
const isOver = (gap: PulseGap, at: number, total: number): boolean =>
  at - gap.at > LONGEST_US && (total === gap.backTotal || at - gap.at > LONGEST_US + BACK_WITHIN_US);

/** Counts per second since the count may have gone on, once it did so at one speed, and a car's, for two stages; else null. */
function goesOnAt(gap: PulseGap, at: number, total: number, since: number, metresPerPulse: number): number | null {
  const [pulses, us] = [total - gap.backTotal, at - gap.backAt];
  const [midPulses, midUs] = [total - gap.midTotal, at - gap.midAt];
  const hardest = HARDEST_BRAKING / metresPerPulse;
  const change = hardest * ((at - gap.at) / 1e6 + gap.span);
  const least = Math.max(gap.rate - change, BACK_SHARE * gap.rate, BACK_SLOWEST / metresPerPulse);
  if (pulses < 0 || pulses + 1 < (least * us) / 1e6) {
    beginBack(gap, at, total);
    return null;
  }
  if (midUs < STAGE_US || midPulses < STAGE_PULSES) return null;
  const rate = (pulses * 1e6) / us;
  const later = (midPulses * 1e6) / midUs;
  const isFirst = gap.midAt === gap.backAt;
  const earlier = isFirst ? 0 : ((gap.midTotal - gap.backTotal) * 1e6) / (gap.midAt - gap.backAt);
  const edge = Math.min(1, (later * since) / 1e6);
  const edges = isFirst ? 0 : edge * (1e6 / midUs + 1e6 / (gap.midAt - gap.backAt));
  // counts that come faster than any car are records that were late
  const isOne = Math.abs(later - earlier) <= (hardest * us) / 2e6 + edges + STAGE_SHARE * later && rate <= gap.rate + change;
  if (!isFirst && isOne) return rate;
  if (!isFirst) {
    gap.backAt = gap.midAt;
    gap.backTotal = gap.midTotal;
  }
  gap.midAt = at;
  gap.midTotal = total;
  return null;
}

function lose(gap: PulseGap, at: number, total: number): GapVerdict {
  gap.filled = Math.max(0, Math.round((gap.rate * LONGEST_US) / 1e6) - (total - gap.total));
  gap.sigma = UNRESUMED_SHARE * gap.filled;
  gap.phase = 'lost';
  beginBack(gap, at, total);
  return 'lost';
}

/** Counts since the last good record that the car has gone on by, at its last speed, for no longer than a gap is filled. */
export const carriedThrough = (gap: PulseGap, at: number): number => (gap.rate * Math.min(LONGEST_US, Math.max(0, at - gap.at))) / 1e6;
