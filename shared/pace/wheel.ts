import type { PulseV1 } from '#shared/journal/observation.ts';

/**
 * One wheel channel: which records to believe, and the count unwrapped. Cumulative counts, so a lost record costs nothing.
 * A record that does not follow from the last one is held back until the next: that one either belongs to the old sequence
 * (the odd record was wild, and is dropped) or to the odd one (the box restarted, or the session clock was bridged).
 */
export interface WheelChannel {
  seen: boolean;
  /** Last believed record. */
  at: number;
  count: number;
  boxUs: number;
  /** From the record before to that one, microseconds: by the session clock, and by the box's own. */
  since: number;
  sinceBox: number;
  /** Unwrapped count since the first record, times `sign`: −1 for a sensor that counts down while the car goes forwards. */
  total: number;
  sign: 1 | -1;
  /** Sign of the raw count of a car that goes forwards, once that is known; 0 before. */
  forward: number;
  suspect: { at: number; count: number; boxUs: number } | null;
  /** The next record comes from another box: it is a baseline, whatever it says. */
  anew: boolean;
  /** Believed records, dropped wild ones, restarts of the box. */
  records: number;
  wild: number;
  restarts: number;
}

export const makeWheelChannel = (): WheelChannel => ({
  seen: false,
  at: 0,
  count: 0,
  boxUs: 0,
  since: 0,
  sinceBox: 0,
  total: 0,
  sign: 1,
  forward: 0,
  suspect: null,
  anew: false,
  records: 0,
  wild: 0,
  restarts: 0,
});

/** first: baseline; moved: the total changed; same: alive, unchanged; restarted: new baseline (the box began anew, or is another), the gap is lost; held: not believed yet. */
export type WheelVerdict = 'first' | 'moved' | 'same' | 'restarted' | 'held' | 'stale';

/** No car on a closed road is faster; one going backwards is far slower. m/s */
const FASTEST = 120;
const FASTEST_BACKWARDS = 10;
/** Box clock and session clock may differ by this much between two records (sensors are up to 2 s late). */
const CLOCKS_APART_US = 2_500_000;
const SLACK_PULSES = 2;
const SLACK_M = 1;

interface Mark {
  readonly at: number;
  readonly count: number;
  readonly boxUs: number;
}

/** Signed difference of two counters that wrap at 2^32, by the shorter way round. */
export const wrappedDifference = (later: number, earlier: number): number => (later - earlier) | 0;

function plausible(pulses: number, us: number, forward: number, metresPerPulse: number): boolean {
  const slack = Math.max(SLACK_PULSES * metresPerPulse, SLACK_M);
  const fastest = pulses * forward < 0 ? FASTEST_BACKWARDS : FASTEST;
  return Math.abs(pulses) * metresPerPulse <= (fastest * us) / 1e6 + slack;
}

/** Does `next` follow from `last`, by both clocks and by what a car can do? */
function follows(last: Mark, next: Mark, forward: number, metresPerPulse: number): boolean {
  const us = next.at - last.at;
  const boxUs = (next.boxUs - last.boxUs) >>> 0;
  if (Math.abs((boxUs - us) | 0) > CLOCKS_APART_US) return false;
  return plausible(wrappedDifference(next.count, last.count), Math.max(us, boxUs), forward, metresPerPulse);
}

function believe(c: WheelChannel, o: Mark, pulses: number): WheelVerdict {
  c.since = o.at - c.at;
  c.sinceBox = (o.boxUs - c.boxUs) >>> 0;
  c.at = o.at;
  c.count = o.count;
  c.boxUs = o.boxUs;
  c.total += c.sign * pulses;
  c.suspect = null;
  c.records++;
  return pulses === 0 ? 'same' : 'moved';
}

/** Another box takes over: its counter and clock are its own. */
export function beginAnew(c: WheelChannel): void {
  c.anew = c.seen;
  c.suspect = null;
  c.forward = 0;
}

/** Takes one record of this channel. `metresPerPulse` only judges what is plausible. */
export function takeRecord(c: WheelChannel, o: PulseV1, metresPerPulse: number): WheelVerdict {
  // fast backwards is believed of two records that agree, and while the way round is not known
  if (c.seen && !c.anew && o.at >= c.at && follows(c, o, c.forward === 0 ? c.sign : c.forward, metresPerPulse)) {
    if (c.suspect !== null) c.wild++;
    return believe(c, o, wrappedDifference(o.count, c.count));
  }
  return takeOdd(c, o, metresPerPulse);
}

/** A baseline, or a record that does not follow. */
function takeOdd(c: WheelChannel, o: PulseV1, metresPerPulse: number): WheelVerdict {
  if (!c.seen) {
    c.seen = true;
    believe(c, o, 0);
    return 'first';
  }
  if (o.at < c.at) return 'stale';
  if (c.anew) {
    c.anew = false;
    believe(c, o, 0);
    return 'restarted';
  }
  const suspect = c.suspect;
  // the same record again proves nothing: a living box's clock goes on
  if (suspect !== null && o.boxUs === suspect.boxUs) {
    c.wild++;
    return 'held';
  }
  if (suspect === null || o.at < suspect.at || !follows(suspect, o, c.forward, metresPerPulse)) {
    if (suspect !== null) c.wild++;
    c.suspect = { at: o.at, count: o.count, boxUs: o.boxUs };
    return 'held';
  }
  return settle(c, suspect, o, metresPerPulse);
}

/** Two records in a row agree with each other and not with what came before. */
function settle(c: WheelChannel, suspect: Mark, o: Mark, metresPerPulse: number): WheelVerdict {
  const gap = suspect.at - c.at;
  const pulses = wrappedDifference(suspect.count, c.count);
  // a box that restarted has been running for less than the gap, and has counted from nothing since
  const young = suspect.boxUs <= gap + CLOCKS_APART_US && plausible(suspect.count | 0, suspect.boxUs, c.forward, metresPerPulse);
  if (!young && plausible(pulses, gap, c.forward, metresPerPulse)) return believe(c, o, pulses + wrappedDifference(o.count, suspect.count));
  c.restarts++;
  // what a restarted box has counted since is measured; what went by before is lost
  believe(c, o, (young ? suspect.count | 0 : 0) + wrappedDifference(o.count, suspect.count));
  return 'restarted';
}
