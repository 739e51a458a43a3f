import type { ClockPairV1, ClockV1, EpochV1 } from '#shared/journal/observation.ts';

/** Which clock sample the run trusts. Official unix ms at an instant = at/1000 + offset. */
export interface Clock {
  /** The chosen sample; null before any. */
  chosen: ClockChoice | null;
  /** Clock samples of any kind seen so far. */
  samples: number;
  /** What page lives added to the uncertainty since the sample was taken, ms². */
  bridgedVariance: number;
  /** The page life that began last, and what bridging to it by a guess adds to that variance until the guess is replaced. */
  life: { n: number; guessed: number } | null;
  pair: { mono: number; wall: number } | null;
  /** Instants at which the device's two clocks came apart (sleep, or a stepped wall clock), and by how many ms. */
  slept: { at: number; byMs: number }[];
}

export interface ClockChoice {
  readonly at: number;
  readonly offsetMs: number;
  readonly sigmaMs: number;
  readonly source: ClockV1['source'] | 'device';
}

export const makeClock = (): Clock => ({ chosen: null, samples: 0, bridgedVariance: 0, life: null, pair: null, slept: [] });

/** The device's crystal against the official clock, relative, per second of age. */
const DRIFT = 1e-6;
/** Nobody set the device's own clock for this job. ms, judgement. */
const DEVICE_SIGMA_MS = 2000;
const SLEPT_MS = 50;
/** During a run only a clearly better clock may take over. */
const CLEARLY_BETTER = 0.5;

/** checked against the officials / the device's wall clock by request / read at the page's birth. */
const RANK: Readonly<Record<ClockChoice['source'], number>> = { exchange: 2, pps: 2, nmea: 2, tap: 2, wall: 1, device: 0 };

/** One sigma of the official clock at an instant, ms: the sample's own, 1 ppm of its age, and what page lives added. */
export function clockSigmaMs(clock: Clock, at: number): number {
  const { chosen } = clock;
  if (chosen === null) return Number.POSITIVE_INFINITY;
  return Math.sqrt(sampleVariance(chosen, at) + clock.bridgedVariance);
}

function sampleVariance(sample: ClockChoice, at: number): number {
  const drift = (DRIFT * Math.abs(at - sample.at)) / 1000;
  return sample.sigmaMs * sample.sigmaMs + drift * drift;
}

/** Offers a sample; true when it was chosen. `started`: the release has passed, so the choice is frozen but for a clearly better one. */
export function offerClock(clock: Clock, o: ClockV1, now: number, started: boolean): boolean {
  clock.samples++;
  return consider(
    clock,
    { at: o.at, offsetMs: o.officialMs - o.at / 1000, sigmaMs: Math.abs(o.uncertaintyMs), source: o.source },
    now,
    started,
  );
}

function consider(clock: Clock, sample: ClockChoice, now: number, started: boolean): boolean {
  const { chosen } = clock;
  if (chosen !== null) {
    const [rank, best] = [RANK[sample.source], RANK[chosen.source]];
    if (rank < best) return false;
    const [sigma, sigmaBest] = [Math.sqrt(sampleVariance(sample, now)), clockSigmaMs(clock, now)];
    const wins = started ? sigma < CLEARLY_BETTER * sigmaBest : rank > best || sigma < sigmaBest;
    if (!wins) return false;
  }
  clock.chosen = sample;
  clock.bridgedVariance = 0;
  if (clock.life !== null) clock.life.guessed = 0;
  return true;
}

/** A page life began: its wall clock is the last resort, and bridging it to the last life has cost some certainty. */
export function takeEpoch(clock: Clock, o: EpochV1, now: number, started: boolean): boolean {
  clock.pair = { mono: o.mono, wall: o.wall };
  if (o.bridgedBy !== 'first') bridge(clock, o);
  return consider(clock, { at: o.at, offsetMs: o.wall - o.at / 1000, sigmaMs: DEVICE_SIGMA_MS, source: 'device' }, now, started);
}

/**
 * A life is first bridged by a wall clock or another page, then, once it is heard, by the box: the better word replaces the guess
 * for the same life. What the box says of a later sleep within that life is a gap of its own and adds up.
 */
function bridge(clock: Clock, o: EpochV1): void {
  const added = o.uncertaintyMs * o.uncertaintyMs;
  const replaced = clock.life !== null && clock.life.n === o.n ? clock.life.guessed : 0;
  clock.bridgedVariance = Math.max(0, clock.bridgedVariance - replaced) + added;
  clock.life = { n: o.n, guessed: o.bridgedBy === 'wall' || o.bridgedBy === 'page' ? added : 0 };
}

/** True when the device's monotonic and wall clock came apart by more than 50 ms since the last pair. */
export function takeClockPair(clock: Clock, o: ClockPairV1): boolean {
  const before = clock.pair;
  clock.pair = { mono: o.mono, wall: o.wall };
  if (before === null) return false;
  const byMs = o.wall - before.wall - (o.mono - before.mono);
  if (Math.abs(byMs) <= SLEPT_MS) return false;
  clock.slept.push({ at: o.at, byMs });
  return true;
}

/**
 * Offset and round trip of one exchange, ms: asked at t1, taken at t2, answered at t3 (their clock), back at t4 (ours).
 * offset = theirs less ours, |error| ≤ delay/2. Source: RFC 5905, section 8.
 */
export function clockExchange(t1: number, t2: number, t3: number, t4: number): { readonly offset: number; readonly delay: number } {
  return { offset: (t2 - t1 + (t3 - t4)) / 2, delay: t4 - t1 - (t3 - t2) };
}
