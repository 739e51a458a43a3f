/** What really happened, tick by tick: for tests, and for nobody in the car. */
export interface DriveHistory {
  add(x: number, v: number): void;
  /** True official distance (m, negative behind the line) and speed (m/s) at a session instant within the history. */
  truth(at: number): { readonly distance: number; readonly speed: number };
}

/** @param begin session microseconds of the first entry @param tick microseconds between entries */
export function createDriveHistory(begin: number, tick: number): DriveHistory {
  const xs: number[] = [];
  const vs: number[] = [];
  return {
    add(x, v) {
      xs.push(x);
      vs.push(v);
    },
    truth(at) {
      const place = Math.max(0, Math.min(xs.length - 1, (at - begin) / tick));
      const i = Math.min(Math.floor(place), Math.max(0, xs.length - 2));
      const share = place - i;
      const [x0, x1] = [xs[i] ?? 0, xs[i + 1] ?? xs[i] ?? 0];
      const [v0, v1] = [vs[i] ?? 0, vs[i + 1] ?? vs[i] ?? 0];
      return { distance: x0 + share * (x1 - x0), speed: v0 + share * (v1 - v0) };
    },
  };
}
