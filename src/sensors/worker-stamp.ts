/**
 * A worker's own monotonic stamp, ms. It counts from the worker's start, and its `timeOrigin` differs from the page's where
 * the system clock was stepped in between, so the page finds the difference by asking (see serial-exchange.ts).
 */
export const workerStamp = (): number => performance.now();
