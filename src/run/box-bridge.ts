/**
 * The pulse box's clock carries the session clock over a gap in the page's life (a reload, a sleep) to within milliseconds,
 * because the box never stopped. What a line's way adds is taken off by the least of many: a way makes late, and only ever late.
 */
export interface BoxSample {
  readonly at: number;
  readonly boxUs: number;
  readonly channel: number;
  readonly count: number;
}

export interface BoxShift {
  readonly shiftUs: number;
  readonly uncertaintyMs: number;
}

const WRAP = 2 ** 32;
const RECENT_US = 5_000_000;
const BRIDGE_MS = 5;
/** Agreement with the other clocks that a restarted box has one chance in four hundred of showing. */
const AGREES_US = 5_000_000;
/** With a count that went on, even a wall clock set wrong by this much is corrected. */
const BELIEVED_US = 600_000_000;
/** Pulses before the gap from which on a count that goes on proves that the box did not begin again. */
const TELLING_COUNT = 1000;
/** Counts a second of the finest encoder in use (20 000 a metre) at 50 m/s. Common practice, no source. */
const FASTEST = 1e6;

/** What is known of the box: its latest samples, five seconds of them. */
export function createBoxMemory() {
  let samples: BoxSample[] = [];
  let newest = Number.NEGATIVE_INFINITY;
  return {
    take(sample: BoxSample): void {
      samples.push(sample);
      newest = Math.max(newest, sample.at);
      // Trimmed now and then: at 100 pulses a second a shift of the whole list at each would be waste.
      if (samples.length > 2000) samples = samples.filter(({ at }) => at >= newest - RECENT_US);
    },
    recent: (): readonly BoxSample[] => samples.filter(({ at }) => at >= newest - RECENT_US),
  };
}
export type BoxMemory = ReturnType<typeof createBoxMemory>;

/**
 * How far the session clock is off after a gap, by the box: what to add to every instant from the gap on. Null where the box
 * cannot tell, because there is no sample on one side, or because it may have been restarted meanwhile.
 */
export function boxShift(before: readonly BoxSample[], after: readonly BoxSample[]): BoxShift | null {
  const [first, last] = [after[0], before[before.length - 1]];
  if (first === undefined || last === undefined) return null;
  // The session instant of the box reading first.boxUs, by the line before the gap, less that by the line after it.
  const shift = nearest(leastOffset(before, last.boxUs) + first.boxUs - last.boxUs - leastOffset(after, first.boxUs));
  const size = Math.abs(shift);
  const believed = size <= AGREES_US || (size <= BELIEVED_US && countsWentOn(before, after));
  return believed ? { shiftUs: Math.round(shift), uncertaintyMs: BRIDGE_MS } : null;
}

/** Least of session instant less box time, the box time counted from `origin` so that a wrap between samples does no harm. */
function leastOffset(samples: readonly BoxSample[], origin: number): number {
  return Math.min(...samples.map(({ at, boxUs }) => at - nearest(boxUs - origin)));
}

/** Of all numbers that are the same modulo 2^32, the one nearest to 0. */
function nearest(difference: number): number {
  return difference - WRAP * Math.round(difference / WRAP);
}

/** The box's clock ran forward, and its count by no more than a wheel can turn in that time. */
function countsWentOn(before: readonly BoxSample[], after: readonly BoxSample[]): boolean {
  const first = after.find((sample) => before.some(({ channel }) => channel === sample.channel));
  const last = before.findLast(({ channel }) => channel === first?.channel);
  if (first === undefined || last === undefined) return false;
  const seconds = nearest(first.boxUs - last.boxUs) / 1e6;
  const step = nearest(first.count - last.count);
  return seconds > 0 && step >= 0 && step <= seconds * FASTEST && last.count >= TELLING_COUNT;
}
