import type { Band } from '#shared/pace/readout.ts';
import type { RunState } from '#shared/pace/run-state.ts';
import { targetSpeedAt } from '#shared/pace/schedule.ts';
import type { Situation } from '#shared/pace/situation.ts';
import { seconds } from '#shared/units.ts';

/** The driver's picture of the time error: level, or how far off and on which side. */

/** Within this, or within the uncertainty where that is more, the band is level. */
const LEVEL_S = 0.15;
/** Once it is not, it must come this much closer before it is level again. */
const BACK_TO_LEVEL = 0.7;
/** This long before the finish plan and schedule are one. */
const NEAR_FINISH_S = 30;

export const isNearFinish = (s: Situation): boolean =>
  s.finish !== null || s.model.finish - s.distance <= NEAR_FINISH_S * targetSpeedAt(s.model.schedule, s.model.finish);

function offLine(s: Situation): number | null {
  if (s.timeError === null) return null;
  return isNearFinish(s) ? s.timeError : s.timeError - s.planned;
}

/** Level or not, given whether it was. */
function isLevel(value: number, sigma: number, was: boolean): boolean {
  return Math.abs(value) < Math.max(LEVEL_S, sigma) * (was ? 1 : BACK_TO_LEVEL);
}

/** Part of the fold: what the band remembers. */
export function rememberBand(state: RunState, s: Situation): void {
  const value = offLine(s);
  state.shown.bandLevel = value === null ? true : isLevel(value, s.sigma, state.shown.bandLevel);
}

/** Null where the band is silent: before the start, while stopped or under escort, after the end. */
export function bandOf(state: RunState, s: Situation): Band | null {
  const value = offLine(s);
  if (value === null || state.acts.escort) return null;
  if (s.phase !== 'running' && s.phase !== 'held' && s.phase !== 'finished') return null;
  const near = isNearFinish(s);
  const level = isLevel(value, s.sigma, state.shown.bandLevel);
  return {
    side: level ? 'level' : near ? (value > 0 ? 'late' : 'early') : value > 0 ? 'below' : 'above',
    against: near ? 'schedule' : 'plan',
    magnitude: seconds(Math.abs(value)),
    decimals: near ? 2 : 1,
  };
}
