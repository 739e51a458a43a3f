import type { PulseGap } from '#shared/pace/pulse-gap.ts';

/**
 * Two wheels compared over stretches of the road: what one count of the second is worth in counts of the first, learnt robustly,
 * and whether they go on saying the same. Which of the two is wrong cannot be told from them alone.
 */
export interface WheelPair {
  /** The last instant at which both were known. `of`: instant of the first wheel's record that this came from. */
  seen: boolean;
  at: number;
  first: number;
  second: number;
  of: number;
  /** Where the stretch under way began; null where it must begin anew. */
  from: { first: number; second: number } | null;
  /** Counts of the first per count of the second; null until enough stretches have been driven. Negative: mounted the other way. */
  ratio: number | null;
  /** Ratios of the first stretches; their median begins. */
  early: number[];
  stretches: number;
  /** Metres by which the first went further, and less far, beyond what is usual; see `judge`. */
  further: number;
  shorter: number;
  /** Stretches in a row that agreed. */
  quiet: number;
  disagree: boolean;
  disagreements: number;
  /** End of the last stretch that disagreed. */
  disagreedAt: number | null;
}

export const makeWheelPair = (): WheelPair => ({
  seen: false,
  at: 0,
  first: 0,
  second: 0,
  of: -1,
  from: null,
  ratio: null,
  early: [],
  stretches: 0,
  further: 0,
  shorter: 0,
  quiet: 0,
  disagree: false,
  disagreements: 0,
  disagreedAt: null,
});

const STRETCH_M = 100;
const STRETCH_PULSES = 200;
const EARLY = 5;
const EARLY_ENOUGH = 3;
/** Left and right wheel differ by up to this much over the same road (recorded drives: 0.18 %). */
const USUAL = 0.004;
/** Stretches averaged over. */
const MEMORY = 20;
const DOUBTED = 0.2;
/** Stretches in a row that agree end a disagreement. */
const QUIET = 2;
/**
 * A full turn makes 2π × the track's width, some 10 m, between a left and a right wheel, and no bend makes more: recorded curves
 * of a motorway go 0.7 % apart over 500 m. What goes on to the same side for longer is no bend.
 */
const FULL_TURN_M = 11;

/** Both wheels at the instant of the second's record, by the first's last good record and its speed. True where that is news. */
export function pairUp(pair: WheelPair, gap: PulseGap, { at, total }: { readonly at: number; readonly total: number }): boolean {
  if (pair.seen && pair.of === gap.at) return false;
  if (!pair.seen) pair.from = null;
  pair.seen = true;
  pair.of = gap.at;
  pair.at = at;
  pair.first = gap.total + (gap.rate * (at - gap.at)) / 1e6;
  pair.second = total;
  return true;
}

/** At the end of a stretch: learns the ratio, and judges. */
export function compareWheels(pair: WheelPair, metresPerPulse: number): void {
  const { from, ratio } = pair;
  if (from === null) {
    pair.from = { first: pair.first, second: pair.second };
    return;
  }
  const first = pair.first - from.first;
  const other = pair.second - from.second;
  const longest = Math.max(first, ratio === null ? 0 : other * ratio);
  if (longest * metresPerPulse < STRETCH_M || longest < STRETCH_PULSES) return;
  from.first = pair.first;
  from.second = pair.second;
  if (ratio !== null)
    judge(pair, (first - ratio * other) * metresPerPulse, longest * metresPerPulse, (1 + Math.abs(ratio)) * metresPerPulse);
  if (other !== 0 && first > 0) learn(pair, first / other);
}

/** Sums what the stretches go apart by, beyond the usual, to either side: what a pulse makes in one is taken back in the next. */
function judge(pair: WheelPair, difference: number, length: number, pulses: number): void {
  const usual = USUAL * length;
  pair.further = Math.min(FULL_TURN_M, Math.max(0, pair.further + difference - usual));
  pair.shorter = Math.min(FULL_TURN_M, Math.max(0, pair.shorter - difference - usual));
  pair.quiet = Math.abs(difference) <= usual + pulses ? pair.quiet + 1 : 0;
  if (pair.disagree && pair.quiet >= QUIET) {
    pair.further = pair.shorter = 0;
    pair.disagree = false;
  }
  if (Math.max(pair.further, pair.shorter) < FULL_TURN_M) return;
  if (!pair.disagree) pair.disagreements++;
  pair.disagree = true;
  pair.disagreedAt = pair.at;
}

function learn(pair: WheelPair, measured: number): void {
  if (pair.stretches < EARLY) {
    pair.stretches++;
    pair.early.push(measured);
    const sorted = pair.early.toSorted((a, b) => a - b);
    if (sorted.length >= EARLY_ENOUGH) pair.ratio = sorted[sorted.length >> 1] as number;
    return;
  }
  if (pair.ratio === null) return;
  pair.stretches = Math.min(pair.stretches + 1, MEMORY);
  // a stretch that is far off says little: a hairpin, a slide; still less once much has been seen
  const off = Math.max(-USUAL, Math.min(USUAL, measured / pair.ratio - 1));
  const share = pair.quiet === 0 && pair.stretches === MEMORY ? DOUBTED : 1;
  pair.ratio *= 1 + (share * off) / pair.stretches;
}
