import type { Pack } from '#shared/course/pack.ts';
import { courseTimes } from './course-times.ts';
import type { Follower } from './follower.ts';
import { makePast } from './past.ts';

/**
 * The bound: told the metres really driven and which touches are mistaken, so that only honest touches, the survey and the line
 * are left to err. A Kalman filter over official distance, the line's constant and wandering part (as logarithms), and the lead
 * beyond the one known; every figure in it is the simulation's own. No wheel can do better.
 */
export interface Limits {
  readonly scatterS: number;
  /** Mean and sigma of the navigators' leads, s. */
  readonly lead: { readonly mean: number; readonly sigma: number };
  readonly surveySigma: number;
  readonly line: { readonly sigma: number; readonly wanderSigma: number; readonly spanM: number };
  readonly mistaken: ReadonlySet<string>;
}

const N = 4;
const [D, LINE, WANDER, LEAD] = [0, 1, 2, 3] as const;
/** Where the car stands on the grid, m². */
const START_VARIANCE = 0.09;

export function followByLimit(pack: Pack, releaseAt: number, limits: Limits): Follower {
  const course = courseTimes(pack);
  const past = makePast();
  const seatM = pack.car.behindNose?.seatM ?? 0;
  const p = new Float64Array(N * N);
  const x = [course.model.start - pack.attempt.stagedBehindM, 0, 0, 0];
  const { line, lead } = limits;
  for (const [i, variance] of [START_VARIANCE, line.sigma ** 2, line.wanderSigma ** 2, lead.sigma ** 2].entries()) p[i * N + i] = variance;
  let driven = 0;

  const distanceFrom = (metres: number): number =>
    (x[D] as number) + metres * (1 + (x[LINE] as number)) + spanned(metres, line.spanM) * (x[WANDER] as number);

  /** Carries the state on by metres driven, in steps short against the line's own span. */
  const carryTo = (to: number): void => {
    while (to - driven > 1e-9) {
      const ds = Math.min(100, to - driven);
      const keep = Math.exp(-ds / line.spanM);
      x[D] = distanceFrom(ds);
      x[WANDER] = (x[WANDER] as number) * keep;
      const f = [1, ds, ds, 0];
      transition(p, f, keep);
      p[WANDER * N + WANDER] = (p[WANDER * N + WANDER] as number) + line.wanderSigma ** 2 * (1 - keep * keep);
      driven += ds;
    }
  };

  return {
    take(o) {
      const place = o.type === 'tap.v1' && !limits.mistaken.has(o.checkpoint ?? '') ? course.placeOf(o.checkpoint) : null;
      if (place === null) return;
      const t = o.at - lead.mean * 1e6;
      const v = past.rateAt(t);
      carryTo(past.at(t));
      const misfit = place.d + seatM - (x[D] as number) + v * (x[LEAD] as number);
      absorb(p, x, [1, 0, 0, -v], misfit, (limits.scatterS * v) ** 2 + limits.surveySigma ** 2);
    },
    know: (at, metres) => past.add(at, metres),
    shown(at) {
      if (at < releaseAt) return null;
      const metres = past.at(at) - driven;
      const distance = distanceFrom(metres);
      const variance = grown(p, metres, line) + limits.surveySigma ** 2;
      return { ...course.errorAt(distance, (at - releaseAt) / 1e6), sigma: Math.sqrt(variance) / targetSpeed(pack) };
    },
  };
}

const targetSpeed = (pack: Pack): number => {
  const finish = pack.courseBook.checkpoints.find((c) => c.duty === 'finish');
  return (Number(finish?.at.text) * 1e6) / pack.raceClass.targetTimeMs;
};

/** P ← F·P·Fᵀ for an F whose first row is `f`, whose wander row keeps its share, and that leaves the rest. */
function transition(p: Float64Array, f: readonly number[], keep: number): void {
  const row = Array.from({ length: N }, (_, j) => f.reduce((sum, fi, i) => sum + fi * (p[i * N + j] as number), 0));
  const dd = row.reduce((sum, value, j) => sum + value * (f[j] as number), 0);
  for (let j = 1; j < N; j++) {
    const value = (row[j] as number) * (j === WANDER ? keep : 1);
    p[D * N + j] = value;
    p[j * N + D] = value;
  }
  p[0] = dd;
  for (let j = 1; j < N; j++) {
    if (j !== WANDER) {
      p[WANDER * N + j] = (p[WANDER * N + j] as number) * keep;
      p[j * N + WANDER] = (p[j * N + WANDER] as number) * keep;
    }
  }
  p[WANDER * N + WANDER] = (p[WANDER * N + WANDER] as number) * keep * keep;
}

function absorb(p: Float64Array, x: number[], h: readonly number[], misfit: number, own: number): void {
  const c = Array.from({ length: N }, (_, i) => h.reduce((sum, hj, j) => sum + hj * (p[i * N + j] as number), 0));
  const s = h.reduce((sum, hi, i) => sum + hi * (c[i] as number), 0) + own;
  for (let i = 0; i < N; i++) {
    x[i] = (x[i] as number) + ((c[i] as number) * misfit) / s;
    for (let j = 0; j < N; j++) p[i * N + j] = (p[i * N + j] as number) - ((c[i] as number) * (c[j] as number)) / s;
  }
}

/** Metres for which what wanders now counts in full, when it dies away over a span. */
const spanned = (metres: number, spanM: number): number => spanM * (1 - Math.exp(-metres / spanM));

/** Variance of the distance so many metres on, m²; the wandering part averages out over its span. */
function grown(p: Float64Array, metres: number, line: Limits['line']): number {
  const span = spanned(metres, line.spanM);
  const f = [1, metres, span, 0];
  const known = f.reduce((sum, fi, i) => sum + f.reduce((inner, fj, j) => inner + fi * fj * (p[i * N + j] as number), 0), 0);
  const w = line.wanderSigma ** 2 * (2 * line.spanM * (metres - span) - span * span);
  return known + Math.max(0, w);
}
