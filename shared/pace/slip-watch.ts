import { type Latency, rebase } from '#shared/pace/gnss-latency.ts';

/**
 * Does the wheel count what the car drives? GNSS's reading is held against what the wheel made of it since a mark some seconds
 * ago. Counts too many: the wheel slips. Too few: it is locked, or pulses are lost. What differs follows GNSS, and teaches nothing.
 */
export interface SlipWatch {
  /** Readings expected from some seconds ago on, by the wheel alone; the older one judges. */
  marks: Mark[];
  /** Slipping or losing now: since when, metres to be added to the wheel's so far; samples in a row without more, and what they add up to. */
  active: { from: number; metres: number; quiet: number; drift: number } | null;
  /** What is over. */
  done: Slip[];
}

export interface Slip {
  readonly from: number;
  readonly to: number;
  /** Driven less counted, metres: negative where the wheel slipped. */
  readonly metres: number;
}

interface Mark {
  readonly at: number;
  /** Speed, the ratio held then, and variances of the expected reading, of that ratio and of the lateness. */
  readonly v: number;
  readonly ratio: number;
  readonly variance: number;
  readonly ratioVariance: number;
  readonly lagVariance: number;
  /** Expected reading now, and nominal metres by the wheel since. */
  reading: number;
  wheel: number;
  /** Variance gathered since, m². */
  gathered: number;
}

export const makeSlipWatch = (): SlipWatch => ({ marks: [], active: null, done: [] });

/** A mark judges until it is twice this old, µs. */
const MARK_US = 3_000_000;
const GATE = 4;
/** Less than this is not worth the word, m. */
const LEAST_M = 1.2;
/** Samples in a row that agree end it. */
const QUIET = 3;
const AGREES = 2.5;
/** A slip that lasts, or comes again at once, is another ratio, which may be off by this. */
const LONGEST_US = 15_000_000;
const AGAIN_US = 8_000_000;
const DOUBT = 0.01;
/** More than this in one look is no slip: one of the two is broken, and what to believe is not decided here. */
const MOST_M = 60;

/** Carries the marks on: nominal metres by the wheel, metres by others, and the variance gathered, m². */
export function carryMarks(watch: SlipWatch, wheel: number, other: number, gathered: number): void {
  for (const mark of watch.marks) {
    mark.reading += mark.ratio * wheel + other;
    mark.wheel += wheel;
    mark.gathered += gathered;
  }
}

/** A new mark where the filter stands, and the oldest dropped. */
function setMark(watch: SlipWatch, f: Latency, at: number, v: number): void {
  const [variance, , , ratioVariance, , lagVariance] = f.p;
  watch.marks.push({ at, v, ratio: f.ratio, variance, ratioVariance, lagVariance, reading: f.reading, wheel: 0, gathered: 0 });
  if (watch.marks.length > 2) watch.marks.shift();
}

/** Forgets the past: from here on the two agree by definition. */
export function agreeFrom(watch: SlipWatch, f: Latency, { at, reading, v, noise }: Reading): void {
  rebase(f, reading, noise);
  watch.marks = [];
  setMark(watch, f, at, v);
}

/** One reading. */
export interface Reading {
  readonly at: number;
  readonly reading: number;
  readonly v: number;
  /** Its noise against the wheel, m². */
  readonly noise: number;
  /** Lateness is held to be known no better than this here, s: what speed changes make of it is no slip. */
  readonly late: number;
}

/** Metres to be added to the wheel's from here on, with one sigma; null where the two agree. */
export function judge(watch: SlipWatch, f: Latency, r: Reading): { readonly metres: number; readonly sigma: number } | null {
  const mark = watch.marks[0];
  if (mark === undefined) return null;
  const off = r.reading - mark.reading;
  const late = (r.v - mark.v) ** 2 * Math.max(mark.lagVariance, r.late * r.late);
  const variance = mark.variance + mark.gathered + r.noise + mark.wheel * mark.wheel * mark.ratioVariance + late;
  const sigma = Math.sqrt(variance);
  if (watch.active === null) {
    const last = watch.marks[watch.marks.length - 1] as Mark;
    if (Math.abs(off) <= Math.max(GATE * sigma, LEAST_M)) {
      if (r.at - last.at >= MARK_US) setMark(watch, f, r.at, r.v);
      return null;
    }
    watch.active = { from: mark.at, metres: 0, quiet: 0, drift: 0 };
    const before = watch.done[watch.done.length - 1];
    if (before !== undefined && mark.at - before.to < AGAIN_US) doubtRatio(f);
    // what was learnt since is the slip's
    else f.ratio = mark.ratio;
  } else {
    const { active } = watch;
    active.drift += off;
    active.quiet = Math.abs(off) <= AGREES * sigma && Math.abs(active.drift) <= AGREES * sigma ? active.quiet + 1 : 0;
    if (active.quiet === 0) active.drift = 0;
  }
  agreeFrom(watch, f, r);
  const { active } = watch;
  const metres = Math.abs(off) > MOST_M ? 0 : off;
  active.metres += metres;
  const lasts = r.at - active.from > LONGEST_US;
  if (lasts) doubtRatio(f);
  if (lasts || active.quiet >= QUIET) finish(watch, r.at);
  return { metres, sigma };
}

/** It is over, or can no longer be told. */
export function finish(watch: SlipWatch, at: number): void {
  const { active } = watch;
  if (active === null) return;
  watch.done.push({ from: active.from, to: at, metres: active.metres });
  watch.active = null;
}

/** The ratio is learnt anew. */
function doubtRatio(f: Latency): void {
  f.p[3] = Math.max(f.p[3], DOUBT * DOUBT);
  f.p[4] = 0;
}
