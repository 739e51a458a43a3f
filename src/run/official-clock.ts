import { clockExchange } from '#shared/pace/clock.ts';

/** The official clock by exchange with a server: the arithmetic. All in milliseconds. */

/** One exchange: T1 and T4 by the device's monotonic clock, T2 and T3 by the server's. */
export interface Exchange {
  readonly t1: number;
  readonly t2: number;
  readonly t3: number;
  readonly t4: number;
}

export interface ExchangeResult {
  /** Server less device. */
  readonly offset: number;
  /** Round trip without the server's own time. The offset is wrong by at most half of it. */
  readonly delay: number;
}

/** The one believed of several, with one sigma of its offset. */
export interface BestExchange extends ExchangeResult {
  readonly sigma: number;
}

export const exchangeResult = ({ t1, t2, t3, t4 }: Exchange): ExchangeResult => clockExchange(t1, t2, t3, t4);

/** The server's stamps are milliseconds, cut; nothing known through them is finer. */
const FINEST_MS = 0.5;
/** One sigma of half of what the two ways differ by, over the round trip: ways of 59 and 41 %. Judgement. */
const ASYMMETRY = 0.09;
/** What queues leave on the least of several round trips, over the mean excess and the root of their number. By simulation. */
const QUEUE = 0.25;
/** Fewer round trips say nothing about queues. */
const TELLING = 4;

/**
 * The exchange with the least delay, never a mean: a queue on the way makes a sample late, and only ever late. Null for none.
 * Its error lies within half the delay; evenly spread that is delay / sqrt(12), and no more is known from a few. Many show how far
 * the queues reach: then what is left is the asymmetry of the way itself and a small share of the queues.
 */
export function leastDelay(results: readonly ExchangeResult[]): BestExchange | null {
  const best = results.reduce<ExchangeResult | null>((least, next) => (least === null || next.delay < least.delay ? next : least), null);
  if (best === null) return null;
  const bound = best.delay / Math.sqrt(12);
  const excess = results.reduce((sum, { delay }) => sum + delay - best.delay, 0) / results.length;
  const likely = Math.hypot(ASYMMETRY * best.delay, (QUEUE * excess) / Math.sqrt(results.length));
  return { ...best, sigma: Math.max(FINEST_MS, results.length < TELLING ? bound : Math.min(bound, likely)) };
}
