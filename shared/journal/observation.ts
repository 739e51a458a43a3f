import type { PrintedDistance, PrintedSpeed } from '#shared/course/course-book.ts';

/**
 * The things that can happen in a run. The journal is a list of these and nothing else; the state is their fold.
 * `seq` is gapless from 0. `at` is whole microseconds on the run's session clock, the instant it happened (not the
 * instant it was noticed); it may run back up to 2 s against `seq`. A published type never changes its meaning: a new
 * shape is a new version (`pulse.v2`) and an upcast.
 */

interface At {
  readonly seq: number;
  readonly at: number;
}

// --- sensors ---------------------------------------------------------------------------------------------------

/** Cumulative count of one wheel channel, 0..2^32-1, wrapping. `boxUs` is the pulse box's own clock, wrapping at 2^32. */
export type PulseV1 = At & { readonly type: 'pulse.v1'; readonly channel: number; readonly count: number; readonly boxUs: number };
/** A wired button, by the box: cumulative press count, wrapping. */
export type ButtonV1 = At & { readonly type: 'button.v1'; readonly button: number; readonly presses: number; readonly boxUs: number };
/** Edge of the receiver's one pulse a second, by the box's clock. */
export type PpsV1 = At & { readonly type: 'pps.v1'; readonly boxUs: number };
/** One GNSS fix. Missing is null, never 0. `speed` m/s (Doppler), `course` degrees true, `accuracy` m (95 % radius). */
export type FixV1 = At & {
  readonly type: 'fix.v1';
  readonly via: 'nmea' | 'geolocation';
  readonly lat: number | null;
  readonly lon: number | null;
  readonly speed: number | null;
  readonly course: number | null;
  readonly accuracy: number | null;
  /** The receiver's own time of the fix, unix ms. */
  readonly utcMs: number | null;
};
/** `lines`: good lines so far; `garbled`: dropped so far. */
export type SensorGainedV1 = At & { readonly type: 'sensor-gained.v1'; readonly sensor: SensorName; readonly detail: string };
export type SensorLostV1 = At & { readonly type: 'sensor-lost.v1'; readonly sensor: SensorName; readonly detail: string };
export type SensorName = 'serial' | 'geolocation' | 'simulator';

// --- clocks ----------------------------------------------------------------------------------------------------

/** A life of the page began (again). `mono` = performance.now ms, `wall` = Date.now ms at this `at`. */
export type EpochV1 = At & {
  readonly type: 'epoch.v1';
  readonly n: number;
  readonly mono: number;
  readonly wall: number;
  /** What carried the session clock over from the last life: nothing (first), the box's clock, another page's clock, or the wall. */
  readonly bridgedBy: 'first' | 'box' | 'pps' | 'gnss' | 'page' | 'wall';
  readonly uncertaintyMs: number;
};
/** At this `at` the official clock read `officialMs` (fractions allowed), give or take `uncertaintyMs` (one sigma). */
export type ClockV1 = At & {
  readonly type: 'clock.v1';
  readonly source: 'exchange' | 'nmea' | 'pps' | 'tap' | 'wall';
  readonly officialMs: number;
  readonly uncertaintyMs: number;
};
/** Every 10 s: the pair of clocks, so that a stepped wall clock or a sleep shows. */
export type ClockPairV1 = At & { readonly type: 'clock-pair.v1'; readonly mono: number; readonly wall: number };

// --- human acts ------------------------------------------------------------------------------------------------

/** The navigator's touch. `checkpoint` is what the button showed; null lets the engine find the nearest in reach. */
export type TapV1 = At & { readonly type: 'tap.v1'; readonly input: 'glass' | 'wired'; readonly checkpoint: string | null };
export type TapVoidedV1 = At & { readonly type: 'tap-voided.v1'; readonly tap: number };
/** The tap with seq `tap` belonged to another checkpoint. */
export type TapMovedV1 = At & { readonly type: 'tap-moved.v1'; readonly tap: number; readonly checkpoint: string };
/** The navigator overrules the engine's doubt: use that tap. */
export type TapAcceptedV1 = At & { readonly type: 'tap-accepted.v1'; readonly tap: number };
export type CheckpointSkippedV1 = At & { readonly type: 'checkpoint-skipped.v1'; readonly checkpoint: string };
/** Start of time seen by the crew, where the event's rule is the beam or the flag. */
export type StartMarkedV1 = At & { readonly type: 'start-marked.v1' };
export type ReleaseSetV1 = At & { readonly type: 'release-set.v1'; readonly releaseMs: number };
export type TargetSetV1 = At & { readonly type: 'target-set.v1'; readonly targetTimeMs: number };
export type StagedSetV1 = At & { readonly type: 'staged-set.v1'; readonly behindM: number };
/** A limit changed (`zone` names it) or was added (a new id). */
export type LimitSetV1 = At & {
  readonly type: 'limit-set.v1';
  readonly zone: string;
  readonly from: PrintedDistance;
  readonly to: PrintedDistance;
  readonly limit: PrintedSpeed;
};
/** A checkpoint, start or finish line was moved by the officials. */
export type LineMovedV1 = At & { readonly type: 'line-moved.v1'; readonly checkpoint: string; readonly to: PrintedDistance };
/** Red flag: the band goes silent, time and distance go on being recorded. */
export type RunStoppedV1 = At & { readonly type: 'run-stopped.v1' };
export type RunResumedV1 = At & { readonly type: 'run-resumed.v1'; readonly as: 'racing' | 'escort' };
/** The crew closed the run. `rerun` and `void` do not count; the organisers decide what does. */
export type RunEndedV1 = At & { readonly type: 'run-ended.v1'; readonly outcome: 'finished' | 'rerun' | 'void' | 'retired' };
/** What the cockpit showed at the finish, so that a later engine's difference is seen, not hidden. */
export type FinishShownV1 = At & {
  readonly type: 'finish-shown.v1';
  readonly engine: string;
  readonly elapsedMs: number;
  readonly timeErrorMs: number;
  readonly sigmaMs: number;
};
export type NoteV1 = At & { readonly type: 'note.v1'; readonly text: string };

export type SensorObservation = PulseV1 | ButtonV1 | PpsV1 | FixV1;
export type Observation =
  | SensorObservation
  | SensorGainedV1
  | SensorLostV1
  | EpochV1
  | ClockV1
  | ClockPairV1
  | TapV1
  | TapVoidedV1
  | TapMovedV1
  | TapAcceptedV1
  | CheckpointSkippedV1
  | StartMarkedV1
  | ReleaseSetV1
  | TargetSetV1
  | StagedSetV1
  | LimitSetV1
  | LineMovedV1
  | RunStoppedV1
  | RunResumedV1
  | RunEndedV1
  | FinishShownV1
  | NoteV1;

/** What a newer Evenline may have written: kept as it came, never understood. */
export interface UnknownObservation extends At {
  readonly type: string;
  readonly [key: string]: unknown;
}

/** Before the RunSession gives it a seq. */
export type Unnumbered<T extends { readonly seq: number }> = T extends unknown ? Omit<T, 'seq'> : never;
export type NewObservation = Unnumbered<Observation>;

const SENSOR_TYPES: ReadonlySet<string> = new Set(['pulse.v1', 'button.v1', 'pps.v1', 'fix.v1', 'clock-pair.v1']);
/** Sensor observations may share a block for up to 250 ms; every other act gets a block alone, at once. */
export const isSensorObservation = (o: { readonly type: string }): boolean => SENSOR_TYPES.has(o.type);
