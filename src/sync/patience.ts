/** Which runs are due, how often each failed in a row, and the bell that wakes the outbox. Timers only, no clock. */
export interface Patience {
  due(runId: string): boolean;
  /** The run is being attended to: not due again until a wait is over or the bell rings. */
  begin(runId: string): void;
  /** Counts a failure and answers how many in a row, from 1. */
  failed(runId: string): number;
  progressed(runId: string): void;
  wait(runId: string, ms: number): void;
  /** Resolves at the next bell after this call. */
  nextWake(): Promise<void>;
  /** Everything is due now. */
  wake(): void;
}

export function createPatience(delay: (ms: number) => Promise<void>): Patience {
  /** The wait that holds each run; an older wait that ends late frees nothing. */
  const waiting = new Map<string, symbol>();
  const failures = new Map<string, number>();
  let ring = (): void => undefined;

  return {
    due: (runId) => !waiting.has(runId),
    begin: (runId) => {
      waiting.set(runId, Symbol());
    },
    failed: (runId) => {
      const count = (failures.get(runId) ?? 0) + 1;
      failures.set(runId, count);
      return count;
    },
    progressed: (runId) => {
      failures.delete(runId);
    },
    wait: (runId, ms) => {
      const held = Symbol();
      waiting.set(runId, held);
      void delay(ms).then(() => {
        if (waiting.get(runId) !== held) return;
        waiting.delete(runId);
        ring();
      });
    },
    nextWake: () =>
      new Promise((resolve) => {
        ring = resolve;
      }),
    wake: () => {
      waiting.clear();
      ring();
    },
  };
}
