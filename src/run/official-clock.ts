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

export const exchangeResult = ({ t1, t2, t3, t4 }: Exchange): ExchangeResult => clockExchange(t1, t2, t3, t4);

/** The exchange with the least delay, never a mean: a queue on the way makes a sample late, and only ever late. Null for none. */
export function leastDelay(results: readonly ExchangeResult[]): ExchangeResult | null {
  return results.reduce<ExchangeResult | null>((best, next) => (best === null || next.delay < best.delay ? next : best), null);
}

/** The server's stamps are milliseconds, cut; nothing known through them is finer. */
const FINEST_MS = 0.5;

/** One sigma of the offset, ms: the error is anywhere within half the delay, and evenly spread that is delay / sqrt(12). */
export const exchangeSigma = (delay: number): number => Math.max(FINEST_MS, delay / Math.sqrt(12));
