/** Locks that hold across the windows and workers of this origin and end with their holder, however it ends. */
export interface ExclusiveLocks {
  /** The lock if nobody holds it, else null. Call the result to let go. */
  take(name: string): Promise<(() => void) | null>;
  /** Waits for the lock in line; null when `signal` aborts first. */
  wait(name: string, signal: AbortSignal): Promise<(() => void) | null>;
}

/** Source: W3C Web Locks API. A lock is held until the promise its callback returned settles. */
export const webLocks: ExclusiveLocks = {
  take: (name) => hold(name, { ifAvailable: true }),
  wait: (name, signal) => hold(name, { signal }),
};

function hold(name: string, options: LockOptions): Promise<(() => void) | null> {
  return new Promise((resolve, reject) => {
    const held = (lock: Lock | null): Promise<void> | null => {
      if (lock === null) {
        resolve(null);
        return null;
      }
      return new Promise<void>((release) => resolve(release));
    };
    navigator.locks.request(name, options, held).catch((error: unknown) => {
      if (options.signal?.aborted === true) resolve(null);
      else reject(error);
    });
  });
}
