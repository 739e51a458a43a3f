import type { Pack } from '#shared/course/pack.ts';
import type { Observation, UnknownObservation } from '#shared/journal/observation.ts';
import type { Readout } from '#shared/pace/readout.ts';
import { readoutAt } from '#shared/pace/readout-at.ts';
import { ENGINE_VERSION as CURRENT, copyState, makeRunState, type RunState as State } from '#shared/pace/run-state.ts';
import { settle, step as take } from '#shared/pace/step.ts';
import type { Micros } from '#shared/units.ts';

/** The engine's front door: a run is the fold of its journal. `state = observations.reduce(step, begin(pack))`. */

/** Of the derivation: a state or result of another version is made anew from the journal. */
export const ENGINE_VERSION: string = CURRENT;

/** Plain data, JSON-safe. What is inside is the engine's own business. */
export type RunState = State;

/** @throws RangeError where the pack's course or class cannot be driven: they are checked before a pack is made. */
export function begin(pack: Pack): RunState {
  const state = makeRunState(pack);
  settle(state);
  return state;
}

/** Folds one observation into the state, in order of seq. Total and deterministic; changes the state that `begin` made. */
export function step(state: RunState, observation: Observation | UnknownObservation): void {
  take(state, observation);
}

/** A deep copy, JSON-safe: may be stored and stepped on from there. The pack, which never changes, is shared. */
export const snapshot = (state: RunState): RunState => copyState(state);

/** What to show at an instant of the session clock, microseconds. Cheap enough for every frame; changes nothing. */
export const readout = (state: RunState, at: Micros): Readout => readoutAt(state, at);
