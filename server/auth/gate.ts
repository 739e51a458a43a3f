/** Lets a few tasks run at once and a bounded number wait; the rest are turned away at once. */
export interface Gate {
  /** Null when too many wait already. */
  run<T>(task: () => Promise<T>): Promise<T> | null;
}

export function createGate(atOnce: number, waitingAtMost: number): Gate {
  const waiting: (() => void)[] = [];
  let running = 0;

  async function enter<T>(task: () => Promise<T>): Promise<T> {
    if (running >= atOnce) await new Promise<void>((resolve) => waiting.push(resolve));
    else running += 1;
    try {
      return await task();
    } finally {
      // The place goes straight to the next in line, so `running` falls only when nobody waits.
      const next = waiting.shift();
      if (next) next();
      else running -= 1;
    }
  }

  return { run: (task) => (running >= atOnce && waiting.length >= waitingAtMost ? null : enter(task)) };
}
