import { begin, type RunState, step } from '#shared/pace/run.ts';
import type { Observation, UnknownObservation } from './observation.ts';
import type { RunHeader } from './run-header.ts';

/**
 * The state of a run: the fold of its journal, through the very steps the cockpit took.
 * @param observations In order of seq, from 0, without a gap.
 */
export function replay(header: RunHeader, observations: Iterable<Observation | UnknownObservation>): RunState {
  const state = begin(header.pack);
  for (const observation of observations) step(state, observation);
  return state;
}
