import type { Place } from '#shared/pace/course-model.ts';
import type { Anchor, PlacePassing, RunState, TapAct, TapRaw } from '#shared/pace/run-state.ts';

/** What a rule makes of one tap: how far off it is from a place, and the anchor that it would lead to. */

/**
 * plain: a touch at its place, taken in by the rule. rescale: the same, but the tyre had changed more than tyres do, so less is
 * thought of the scale before it. jump: right, but the distance had jumped before it (counts lost or wrong). mistaken: a touch
 * too late or at another place.
 */
export type TakenFor = 'plain' | 'rescale' | 'jump' | 'mistaken';

/** What each tap, by its seq, is taken for; one that is not named is plain. */
export type Story = ReadonlyMap<number, TakenFor>;

export interface TapJudge {
  /** Official distance of the navigator's eye at the touch as believed before it, m, and its variance, m². */
  readonly measured: number;
  readonly grown: number;
  /** Scale in force, official mm per pulse. */
  readonly scale: number;
  misfit(place: Place): Misfit;
  take(place: Place, story: TakenFor): Taken;
}

export interface Misfit {
  /** Official less believed, m; its variance, m²; and how much of that is this tap's own (hand and survey). */
  readonly moved: number;
  readonly variance: number;
  readonly own: number;
}

export interface Taken {
  readonly anchor: Anchor;
  /** How far the distance moved, m. */
  readonly moved: number;
  readonly scaleAfter: number;
  readonly kept: PlacePassing['scaleKept'];
}

export interface TapAt {
  readonly state: RunState;
  readonly anchors: readonly Anchor[];
  readonly tap: TapAct;
  readonly raw: TapRaw;
}

/** Variance of reading between two pulses, m². */
export const PULSE_VARIANCE = 0.1;
