import type { Checkpoint } from '#shared/course/course-book.ts';
import type { Metres, MetresPerSecond, Seconds, UnixMs } from '#shared/units.ts';

/** What the crew is shown at one instant. Derived from the state and nothing else. */
export interface Readout {
  readonly phase: Phase;
  /** Official clock now, and one sigma of it; null before any clock sample. */
  readonly official: { readonly now: UnixMs; readonly sigma: Seconds; readonly source: string; readonly age: Seconds } | null;
  readonly release: UnixMs | null;
  /** Until the release; negative once it has passed. */
  readonly toRelease: Seconds | null;
  /** Since the time started, by the event's rule; null before. */
  readonly elapsed: Seconds | null;
  readonly targetTime: Seconds;
  /** Official distance; negative while staged behind the line. */
  readonly distance: Metres;
  readonly speed: MetresPerSecond | null;
  /** `changedBy`: present scale over the pack's, less one (0.004 = 0.4 % longer). */
  readonly scale: { readonly mmPerPulse: number; readonly changedBy: number };
  /** Positive = late, negative = early; against the schedule. Null before the start. */
  readonly timeError: Seconds | null;
  /** Planned time error here, by the plan in force. */
  readonly planned: Seconds;
  /** timeError - planned: positive = below plan (less in hand than planned), negative = above. */
  readonly againstPlan: Seconds | null;
  /** One sigma of the time error. */
  readonly sigma: Seconds;
  readonly band: Band | null;
  readonly hold: Hold;
  /** The place after which zero cannot be reached if the present speed is held; null while that is over a minute away, or never. */
  readonly noReturn: { readonly at: Metres; readonly in: Seconds } | null;
  readonly next: NextCheckpoint | null;
  readonly zone: ZoneAhead | null;
  readonly zoneAhead: ZoneAhead | null;
  /** Where distance comes from at this instant. */
  readonly source: 'wheel' | 'gnss' | 'none';
  readonly lastTap: TapVerdict | null;
  readonly warnings: readonly Warning[];
  readonly finish: {
    readonly elapsed: Seconds;
    readonly timeError: Seconds;
    readonly sigma: Seconds;
    readonly stopBoardIn: Metres | null;
  } | null;
}

/** grid: before the release; held: released, not rolling 5 s later; ended: the crew closed the run. */
export type Phase = 'grid' | 'countdown' | 'held' | 'running' | 'stopped' | 'finished' | 'ended';

/** The driver's picture. `level` within max(0.15 s, sigma), with hysteresis. */
export interface Band {
  readonly side: 'level' | 'late' | 'early' | 'below' | 'above';
  /** Near the finish plan and schedule are one: then late/early and hundredths; else below/above plan and tenths. */
  readonly against: 'schedule' | 'plan';
  readonly magnitude: Seconds;
  readonly decimals: 1 | 2;
}

export type Hold =
  | { readonly kind: 'hold'; readonly speed: MetresPerSecond; readonly frozen: boolean }
  | { readonly kind: 'cannot be made up'; readonly by: Seconds; readonly speed: MetresPerSecond }
  | { readonly kind: 'cannot be given back'; readonly by: Seconds; readonly speed: MetresPerSecond }
  | { readonly kind: 'none' };

export interface NextCheckpoint {
  readonly checkpoint: Checkpoint;
  readonly at: Metres;
  /** 1-based among the checkpoints a crew touches or passes, start excluded. */
  readonly index: number;
  readonly of: number;
  readonly toGo: Metres;
  readonly eta: Seconds | null;
  readonly planned: Seconds;
  /** 0 far away, 1 at the place: how full the button is. */
  readonly nearness: number;
  readonly inReach: boolean;
}

export interface ZoneAhead {
  readonly name: string;
  readonly limit: MetresPerSecond;
  readonly startsIn: Metres;
  readonly endsIn: Metres;
}

/** What became of a tap, in the engine's words. */
export interface TapVerdict {
  readonly seq: number;
  readonly checkpoint: Checkpoint | null;
  readonly verdict: 'provisional' | 'used' | 'doubted' | 'no place near' | 'repeated' | 'voided';
  /** Official less measured, metres: how far the distance moved (or would). */
  readonly moved: Metres;
  readonly scaleBefore: number;
  readonly scaleAfter: number;
  readonly scaleKept: 'settle' | 'place' | 'leg too short' | 'rule' | null;
}

export type Warning =
  | {
      readonly code:
        | 'wheel-lost'
        | 'wheel-slipping'
        | 'wheel-losing'
        | 'pulses-filled'
        | 'second-wheel'
        | 'wheels-disagree'
        | 'gnss-lost'
        | 'no-distance'
        | 'clock-unchecked'
        | 'over-limit'
        | 'over-cap'
        | 'newer-evenline'
        | 'slept'
        | 'clock-disagrees';
    }
  /** The wheel's count went on unheard, and moved the distance by this, metres. */
  | { readonly code: 'wheel-back'; readonly moved: number }
  | { readonly code: 'checkpoint-missed'; readonly checkpoint: string };
