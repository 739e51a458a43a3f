import type { DriveParameters } from './drive-parameters.ts';
import type { Random } from './random.ts';

/** What goes wrong on the way, by distance: the same for the same seed, however finely the way is cut into ticks. */

/** Events at random places, one in `everyM` metres on average; true when at least one lay on the way to `x`. */
export function createEvents(random: Random, everyM: number): (x: number) => boolean {
  const gap = (): number => -everyM * Math.log(1 - random.unit());
  let next = gap();
  return (x) => {
    if (x < next) return false;
    while (next <= x) next += gap();
    return true;
  };
}

/** Stretches of time in which the wheel turns and no pulse is counted. */
export interface Losses {
  /** True when the tick of `dt` seconds that ends at `x` lies in one. */
  take(x: number, dt: number): boolean;
  /** One is under way, ended less than a moment ago, or begins within `v` times that moment. */
  isNear(x: number, v: number): boolean;
}

const MOMENT_S = 1.5;

export function createLosses({ losses }: DriveParameters, random: Random, courseEnd: number): Losses {
  const due = Array.from({ length: losses.count }, () => ({
    at: random.range(0.03, 0.99) * courseEnd,
    s: random.range(losses.low, losses.high),
  })).sort((a, b) => b.at - a.at);
  let left = 0;
  let sinceS = Number.POSITIVE_INFINITY;
  return {
    take(x, dt) {
      sinceS += dt;
      const next = due[due.length - 1];
      if (next !== undefined && x >= next.at) {
        due.pop();
        left = next.s;
      }
      if (left <= 0) return false;
      left -= dt;
      sinceS = 0;
      return true;
    },
    isNear(x, v) {
      if (sinceS < MOMENT_S) return true;
      const next = due[due.length - 1];
      return next !== undefined && next.at - x < MOMENT_S * v;
    },
  };
}
