/** What really happened, tick by tick: for tests, and for nobody in the car. */
export interface DriveHistory {
  /** Instants never run back. */
  add(at: number, x: number, v: number): void;
  /** True official distance (m, negative behind the line) and speed (m/s) at a session instant within the history. */
  truth(at: number): { readonly distance: number; readonly speed: number };
}

export function createDriveHistory(): DriveHistory {
  const ats: number[] = [];
  const xs: number[] = [];
  const vs: number[] = [];
  return {
    add(at, x, v) {
      ats.push(at);
      xs.push(x);
      vs.push(v);
    },
    truth(at) {
      const i = lastBefore(ats, at);
      const [t0, t1] = [ats[i] ?? 0, ats[i + 1] ?? ats[i] ?? 0];
      const share = t1 > t0 ? Math.max(0, Math.min(1, (at - t0) / (t1 - t0))) : 0;
      const [x0, x1] = [xs[i] ?? 0, xs[i + 1] ?? xs[i] ?? 0];
      const [v0, v1] = [vs[i] ?? 0, vs[i + 1] ?? vs[i] ?? 0];
      return { distance: x0 + share * (x1 - x0), speed: v0 + share * (v1 - v0) };
    },
  };
}

/** Index of the last instant not after `at` that another one follows; 0 where there is none. */
function lastBefore(ats: readonly number[], at: number): number {
  let [low, high] = [0, Math.max(0, ats.length - 2)];
  while (low < high) {
    const middle = (low + high + 1) >> 1;
    if ((ats[middle] as number) <= at) low = middle;
    else high = middle - 1;
  }
  return low;
}
