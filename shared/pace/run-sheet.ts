import type { DerivedTap } from '#shared/pace/run-state.ts';

/** The story of a run afterwards, told by leg. Plain JSON: metres, seconds (positive = late), mm per pulse. */
export interface RunSheet {
  readonly engine: string;
  readonly runId: string;
  readonly outcome: 'open' | 'finished' | 'rerun' | 'void' | 'retired';
  readonly practice: boolean;
  readonly clockRate: number;
  readonly releaseMs: number | null;
  readonly targetTimeS: number;
  /** From the instant that starts the time to the car's first movement, extrapolated back to rest. */
  readonly reactionS: number | null;
  readonly legs: readonly LegRow[];
  readonly finish: { readonly elapsedS: number; readonly timeErrorS: number; readonly sigmaS: number } | null;
  /** What the cockpit journalled at the finish, and whether this derivation agrees to the millisecond. */
  readonly shown: { readonly engine: string; readonly elapsedS: number; readonly timeErrorS: number; readonly agrees: boolean } | null;
  /** Time error and planned time error along the course, at most a few hundred points. */
  readonly trace: readonly {
    readonly d: number;
    readonly elapsedS: number;
    readonly timeErrorS: number;
    readonly plannedS: number;
    readonly speed: number;
  }[];
  readonly stops: readonly { readonly fromS: number; readonly toS: number | null; readonly d: number }[];
  readonly taps: readonly TapRow[];
  readonly aidsUsed: readonly ('wheel' | 'gnss speed' | 'gnss position')[];
  readonly pulses: number;
  readonly observations: number;
  /** Types this engine did not know: the result needs a newer Evenline. */
  readonly unknownTypes: readonly string[];
  readonly warnings: readonly string[];
}

export interface TapRow {
  readonly seq: number;
  readonly checkpoint: string | null;
  readonly verdict: DerivedTap['verdict'];
  readonly movedM: number;
  /** What the navigator's lead and scatter are learnt from. Left out by engines before 2.0. */
  readonly figures?: {
    readonly input: DerivedTap['input'];
    /** Official less believed, m, and the variance of what was believed, m². */
    readonly misfitM: number;
    readonly varianceM2: number;
    readonly surveySigmaM: number;
    readonly speed: number;
  };
}

export interface LegRow {
  readonly checkpointId: string;
  readonly name: string;
  readonly duty: string;
  readonly officialM: number;
  readonly by: 'tap' | 'distance' | 'skipped' | 'not reached';
  /** Session-clock instant of the passing, microseconds; null if not reached. */
  readonly atUs: number | null;
  readonly elapsedS: number | null;
  readonly targetS: number;
  readonly timeErrorS: number | null;
  readonly plannedS: number;
  /** Distance shown at the tap's instant, before it moved, and official less measured. Null where no tap was used. */
  readonly measuredM: number | null;
  readonly movedM: number | null;
  readonly scaleBefore: number;
  readonly scaleAfter: number;
  readonly scaleKept: string | null;
}
