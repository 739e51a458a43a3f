import type { Pack } from '#shared/course/pack.ts';
import type { Observation } from '#shared/journal/observation.ts';
import { begin, step } from '#shared/pace/run.ts';
import { targetSpeedAt } from '#shared/pace/schedule.ts';
import { situationAt } from '#shared/pace/situation.ts';
import type { Follower } from './follower.ts';

/** The engine itself, fed as a tablet feeds it. */
export function followByEngine(pack: Pack): Follower {
  const state = begin(pack);
  let seq = 0;
  const take: Follower['take'] = (o) => {
    const numbered = o as { seq?: number };
    // not a copy: copies of so many kinds would have the engine look up every field the slow way
    numbered.seq = seq++;
    step(state, o as Observation);
  };
  // under escort the engine works out no advice, which nobody reads here, and everything else as ever
  take({ type: 'run-resumed.v1', at: 0, as: 'escort' });
  return {
    take,
    shown(at) {
      const { timeError, planned, sigma, distance, finish, model } = situationAt(state, at);
      if (timeError === null) return null;
      // the passing of the finish is told with the next knot of the trace; until then the schedule has ended and the distance goes on
      const beyond = finish === null ? Math.max(0, distance - model.finish) / targetSpeedAt(model.schedule, model.finish) : 0;
      return { timeError: timeError - beyond, planned, sigma };
    },
  };
}
