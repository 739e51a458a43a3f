/** The course strip: distance along the even line, time error across it (early above, late below). */
export interface StripSize {
  readonly width: number;
  readonly height: number;
}

export interface TracePoint {
  readonly d: number;
  /** Seconds, positive = late. */
  readonly errorS: number;
}

export const STRIP_PAD = 36;
/** Room kept under the line's field for the zones' limits. */
const FOOT = 40;
const HEAD = 16;
const KNEE_S = 2;
const FULL_S = 60;

export const stripX = (size: StripSize, lengthM: number, d: number): number =>
  STRIP_PAD + Math.min(1, Math.max(0, d / lengthM)) * (size.width - 2 * STRIP_PAD);

export const stripMiddle = (size: StripSize): number => HEAD + (size.height - HEAD - FOOT) / 2;

export const stripFoot = (size: StripSize): number => size.height - FOOT;

export function stripY(size: StripSize, errorS: number): number {
  const reach = (size.height - HEAD - FOOT) / 2;
  const share = Math.min(1, Math.asinh(Math.abs(errorS) / KNEE_S) / Math.asinh(FULL_S / KNEE_S));
  return stripMiddle(size) + (errorS < 0 ? -share : share) * reach;
}

export function stripPath(size: StripSize, lengthM: number, points: readonly TracePoint[]): string {
  return points
    .map((p, i) => `${i === 0 ? 'M' : 'L'}${stripX(size, lengthM, p.d).toFixed(1)} ${stripY(size, p.errorS).toFixed(1)}`)
    .join('');
}

/** Labels that would run into the one before are left out; the first of two neighbours is the next to matter. */
export function labelsWithRoom<T extends { readonly x: number; readonly text: string }>(labels: readonly T[], width: number): readonly T[] {
  const ADVANCE = 12;
  const GAP = 14;
  let freeFrom = 0;
  return labels.filter((label) => {
    const half = (label.text.length * ADVANCE) / 2;
    if (label.x - half < freeFrom || label.x + half > width) return false;
    freeFrom = label.x + half + GAP;
    return true;
  });
}

/** The own error so far: one point per step of the course, so that it stays small however long the run. */
export interface Trace {
  /** True when the path changed. */
  add(point: TracePoint): boolean;
  points(): readonly TracePoint[];
}

export function createTrace(lengthM: number, steps: number, seed: readonly TracePoint[]): Trace {
  const byStep = new Map<number, TracePoint>();
  let last = -1;
  const add = (point: TracePoint): boolean => {
    const step = Math.floor((point.d / lengthM) * steps);
    if (step === last || step < 0 || step > steps) return false;
    last = step;
    byStep.set(step, point);
    // A tap that moved the distance back leaves points ahead of the car that are no longer true.
    for (const known of byStep.keys()) if (known > step) byStep.delete(known);
    return true;
  };
  for (const point of seed) add(point);
  return { add, points: () => [...byStep.entries()].sort(([a], [b]) => a - b).map(([, p]) => p) };
}
