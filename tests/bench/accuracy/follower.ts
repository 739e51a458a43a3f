import type { NewObservation } from '#shared/journal/observation.ts';

/** What keeps the time error in a simulated car: the engine, or what it is compared with. */
export interface Follower {
  take(o: NewObservation): void;
  /** The metres really covered along the driven line, at a session instant (microseconds): for a bound that may know them. */
  know?(at: number, driven: number): void;
  /** Shown at a session instant; null while there is nothing to show. */
  shown(at: number): ShownError | null;
}

/** Seconds. Time error late positive; `planned`: what the plan has it be there; `sigma`: its stated uncertainty. */
export interface ShownError {
  readonly timeError: number;
  readonly planned: number;
  readonly sigma: number;
}
