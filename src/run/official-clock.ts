/** Arithmetic of a clock exchange. All four stamps in milliseconds: T1 and T4 by the device's clock, T2 and T3 by the server's. */
export interface Exchange {
  readonly t1: number;
  readonly t2: number;
  readonly t3: number;
  readonly t4: number;
}

export interface ExchangeResult {
  /** Server less device, ms. */
  readonly offset: number;
  /** Round trip without the server's own time, ms. The offset is wrong by at most half of it. */
  readonly delay: number;
}

/** Source: RFC 5905 section 8, on-wire protocol. */
export function exchangeOffset({ t1, t2, t3, t4 }: Exchange): ExchangeResult {
  return { offset: (t2 - t1 + (t3 - t4)) / 2, delay: t4 - t1 - (t3 - t2) };
}

/** The exchange with the least delay, never a mean: a queue on the way makes a sample late, and only ever late. Null for none. */
export function leastDelay(results: readonly ExchangeResult[]): ExchangeResult | null {
  return results.reduce<ExchangeResult | null>((best, next) => (best === null || next.delay < best.delay ? next : best), null);
}

/**
 * One sigma of the official clock by an exchange, ms. The error is anywhere within half the delay; evenly spread, that is
 * delay / sqrt(12). The server's own stamps are whole milliseconds at best, hence the floor.
 */
export const exchangeSigma = (delay: number): number => Math.max(0.5, delay / Math.sqrt(12));

/**
 * The official time to journal at session instant `atUs`, when the official clock reads `realMs` in truth. A session clock
 * that runs faster takes official time along with it, from the start of the run; at rate 1 nothing is added.
 */
export function officialAt(realMs: number, atUs: number, rate: number): number {
  return realMs + (atUs / 1000) * (1 - 1 / rate);
}
