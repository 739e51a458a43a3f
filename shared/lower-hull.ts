/**
 * The lower envelope, with slope, of messages that are late by a jitter that is never negative: a line under all points that lies
 * as close to them as a line can. Of all lines below the points the sum of distances is least for the edge of the lower convex
 * hull that spans the mean of x. Plain data; a point costs O(1) on average, and only the hull is kept.
 */
export interface LowerHull {
  /** Vertices, in order of x. */
  x: number[];
  y: number[];
  /** Of all points taken in. */
  n: number;
  sumX: number;
  sumY: number;
}

/** `y` at `x`, the mean of all x; `slope` in y per x. `excess`: mean of what the points lie above the line. */
export interface HullLine {
  readonly x: number;
  readonly y: number;
  readonly slope: number;
  readonly excess: number;
}

export const makeLowerHull = (): LowerHull => ({ x: [], y: [], n: 0, sumX: 0, sumY: 0 });

/** Takes in a point; one whose x does not lie after the last is left out. Give y near 0: it is summed. */
export function addToHull(hull: LowerHull, px: number, py: number): void {
  const { x, y } = hull;
  if (x.length > 0 && px <= (x[x.length - 1] as number)) return;
  hull.n++;
  hull.sumX += px;
  hull.sumY += py;
  while (x.length > 1 && !turnsUp(x, y, px, py)) {
    x.pop();
    y.pop();
  }
  x.push(px);
  y.push(py);
}

function turnsUp(x: readonly number[], y: readonly number[], px: number, py: number): boolean {
  const i = x.length - 1;
  const [ax, ay, bx, by] = [x[i - 1], y[i - 1], x[i], y[i]] as [number, number, number, number];
  return (by - ay) * (px - bx) < (py - by) * (bx - ax);
}

/** The envelope, its slope held to ±`steepest`; null without points. */
export function hullLine({ x, y, n, sumX, sumY }: LowerHull, steepest: number): HullLine | null {
  if (n === 0) return null;
  const mean = sumX / n;
  let i = 1;
  while (i < x.length - 1 && (x[i] as number) < mean) i++;
  const edge = x.length > 1 ? ((y[i] as number) - (y[i - 1] as number)) / ((x[i] as number) - (x[i - 1] as number)) : 0;
  const slope = Math.min(steepest, Math.max(-steepest, edge));
  // the highest line of that slope that lies under all vertices
  let at = Number.POSITIVE_INFINITY;
  for (let k = 0; k < x.length; k++) at = Math.min(at, (y[k] as number) + slope * (mean - (x[k] as number)));
  return { x: mean, y: at, slope, excess: sumY / n - at };
}
