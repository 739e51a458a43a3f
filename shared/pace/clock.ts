import type { ClockV1 } from '#shared/journal/observation.ts';
import { type ClockFilter, type ClockSource, clockEstimate, RATE_WALK, UNKNOWN_RATE, WARMTH } from './clock-filter.ts';
import { makePpsEdges, type PpsEdges } from './clock-pps.ts';

/**
 * The official clock of the run. Samples of every source go into one filter; what the run goes by is `chosen`, a line that follows
 * the filter until the release and stands from then on, save where the filter has become clearly surer than the line: so the
 * instant of the start does not wander during the run. A wall clock that is set does nothing to either.
 */
export interface Clock {
  /** The line in force; null before any sample. */
  chosen: ClockChoice | null;
  /** Clock samples of any kind seen so far. */
  samples: number;
  /** Null before the first sample that can be checked against the officials. */
  filter: ClockFilter | null;
  pps: PpsEdges;
  /** Which kinds of source have been believed. */
  heard: { tap: boolean; server: boolean; receiver: boolean };
  /** Samples that were not believed: by how much, how often in a row, and whether that still stands. The last few. */
  doubts: ClockDoubt[];
  /** What page lives and sleeps added to the uncertainty since the line was chosen, ms². */
  bridgedVariance: number;
  /** The page life that began last, and what bridging to it by a guess added, to the line and to the filter, until a better word. */
  life: { n: number; guessed: number; guessedFilter: number } | null;
  pair: { mono: number; wall: number } | null;
  /** Instants at which the device's two clocks came apart (sleep, or a stepped wall clock), and by how many ms. */
  slept: { at: number; byMs: number }[];
  /** The last of them while it may have been a sleep that nothing has mended yet. */
  asleep: { at: number; byMs: number; box: number | null; added: number; addedFilter: number } | null;
  /** Session less box, µs, at the last line of the box; null before any. */
  box: number | null;
}

/** Official unix ms at an instant = at/1000 + offsetMs + rate·(at − this at). */
export interface ClockChoice {
  readonly at: number;
  readonly offsetMs: number;
  /** ms a second: official seconds are longer by it than the session's. */
  readonly rate: number;
  readonly sigmaMs: number;
  readonly cross: number;
  readonly rateVariance: number;
  readonly source: ClockV1['source'] | 'device';
}

export interface ClockDoubt {
  readonly source: ClockSource;
  at: number;
  byMs: number;
  times: number;
  open: boolean;
}

export const makeClock = (): Clock => ({
  chosen: null,
  samples: 0,
  filter: null,
  pps: makePpsEdges(),
  heard: { tap: false, server: false, receiver: false },
  doubts: [],
  bridgedVariance: 0,
  life: null,
  pair: null,
  slept: [],
  asleep: null,
  box: null,
});

/** During a run only a clearly better clock may take over. */
const CLEARLY_BETTER = 0.5;

/** Official unix ms at an instant of the session clock. */
export const officialMsAt = ({ at, offsetMs, rate }: ClockChoice, instant: number): number =>
  instant / 1000 + offsetMs + (rate * (instant - at)) / 1e6;

/** The session instant, microseconds, at which the official clock reads so. */
export const instantOfOfficial = ({ at, offsetMs, rate }: ClockChoice, officialMs: number): number =>
  at + ((officialMs - offsetMs - at / 1000) * 1000) / (1 + rate / 1000);

/** Official seconds between two session instants. */
export const officialSeconds = ({ chosen }: Clock, from: number, to: number): number =>
  ((to - from) / 1e6) * (1 + (chosen === null ? 0 : chosen.rate / 1000));

/**
 * One sigma of the official clock at an instant, ms. While nothing is heard it grows with the age τ:
 * σ² = σ_θ² + 2τP_θρ + τ²(σ_ρ² + (1 ppm)²) + qτ³/3, the sources' common errors being part of σ_θ; and what page lives added.
 */
export function clockSigmaMs(clock: Clock, at: number): number {
  const { chosen } = clock;
  if (chosen === null) return Number.POSITIVE_INFINITY;
  return Math.sqrt(holdoverVariance(chosen, (at - chosen.at) / 1e6) + clock.bridgedVariance);
}

/** @param seconds since the line was fixed, either way. Never less for more of them. */
export function holdoverVariance({ sigmaMs, cross, rateVariance }: ClockChoice, seconds: number): number {
  const tau = Math.abs(seconds);
  const grown = 2 * tau * Math.max(0, cross) + tau * tau * (rateVariance + WARMTH * WARMTH) + (RATE_WALK * tau ** 3) / 3;
  return sigmaMs * sigmaMs + grown;
}

/** The filter becomes the line in force where it may. */
export function publish(clock: Clock, filter: ClockFilter, source: ClockSource | null, now: number, started: boolean): boolean {
  const { offset, rate, variance, cross, rateVariance } = clockEstimate(filter);
  const sigmaMs = Math.sqrt(variance);
  const { chosen } = clock;
  if (started && chosen !== null && sigmaMs >= CLEARLY_BETTER * clockSigmaMs(clock, Math.max(now, filter.at))) return false;
  const kept = chosen === null || chosen.source === 'wall' || chosen.source === 'device' ? 'nmea' : chosen.source;
  choose(clock, { at: filter.at, offsetMs: offset, rate, sigmaMs, cross, rateVariance, source: source ?? kept });
  return true;
}

function choose(clock: Clock, choice: ClockChoice): void {
  clock.chosen = choice;
  clock.bridgedVariance = 0;
  if (clock.life !== null) clock.life.guessed = 0;
  clock.asleep = null;
}

const RANK = { wall: 1, device: 0 } as const;

/** Only where nothing can be checked against the officials: the device's wall clock by request, or as read at the page's birth. */
export function fallBack(
  clock: Clock,
  s: { readonly at: number; readonly offsetMs: number; readonly sigmaMs: number; readonly source: 'wall' | 'device' },
  started: boolean,
): boolean {
  const { chosen } = clock;
  if (chosen !== null) {
    if (chosen.source !== 'wall' && chosen.source !== 'device') return false;
    const [sigma, best] = [s.sigmaMs, clockSigmaMs(clock, s.at)];
    const wins = started ? sigma < CLEARLY_BETTER * best : RANK[s.source] > RANK[chosen.source] || sigma < best;
    if (!wins || RANK[s.source] < RANK[chosen.source]) return false;
  }
  choose(clock, { ...s, rate: 0, cross: 0, rateVariance: UNKNOWN_RATE ** 2 });
  return true;
}

/**
 * Offset and round trip of one exchange, ms: asked at t1, taken at t2, answered at t3 (their clock), back at t4 (ours).
 * offset = theirs less ours, |error| ≤ delay/2. Source: RFC 5905, section 8.
 */
export function clockExchange(t1: number, t2: number, t3: number, t4: number): { readonly offset: number; readonly delay: number } {
  return { offset: (t2 - t1 + (t3 - t4)) / 2, delay: t4 - t1 - (t3 - t2) };
}
