import type { PrintedDistance, PrintedSpeed } from '#shared/course/course-book.ts';

/** A stretch to be driven at an average, or a neutral one with a fixed time. Sections run from the end of the one before. */
export type Section =
  | { readonly kind: 'average'; readonly to: PrintedDistance; readonly average: PrintedSpeed }
  | { readonly kind: 'neutral'; readonly to: PrintedDistance; readonly timeMs: number };

/** Which aids a class permits. The engine uses no other, the cockpit shows none. */
export interface Aids {
  readonly wheel: boolean;
  readonly gnssSpeed: boolean;
  readonly gnssPosition: boolean;
  readonly dataLink: boolean;
}

export interface RaceClass {
  readonly id: string;
  readonly name: string;
  /** The official target time decides, whole milliseconds; length over average only checks it. */
  readonly targetTimeMs: number;
  /** The last section ends at the finish. */
  readonly sections: readonly Section[];
  /** Highest speed ("cap"); null for none. */
  readonly cap: PrintedSpeed | null;
  /** Lowest speed ("floor"), no stopping; null for none. */
  readonly floor: PrintedSpeed | null;
  readonly aids: Aids;
}

/** Rules of an event, as data. */
export interface EventRules {
  /** What starts the time: the scheduled second, a beam at the line, or the flag. */
  readonly timeStart: 'scheduled' | 'beam' | 'flag';
  /** Official times are cut or rounded to this many milliseconds. */
  readonly timeUnitMs: number;
  readonly rounding: 'cut' | 'round';
  /** Score from clock times cut or rounded first, or from the elapsed time cut or rounded once. */
  readonly timeBasis: 'clock' | 'elapsed';
  readonly ties: 'shared' | 'earlier run' | 'rerun';
  /** Attempts whose errors add up to the score; 1 for a single run. */
  readonly sumOfRuns: number;
  /** How a time error becomes points; left out: `PLAIN_SCORE`, one point for every millisecond either way. */
  readonly score?: ScoreRules;
}

/** Points, fewest win. Whole numbers throughout. */
export interface ScoreRules {
  readonly unitMs: number;
  /** What a part of a unit counts: nothing, a whole one from the half on, or a whole one as soon as it is begun. */
  readonly partUnit: 'cut' | 'round' | 'begun';
  readonly earlyPerUnit: number;
  readonly latePerUnit: number;
  /** Fewest and most points of a timed run, before penalties; `cap` null for no limit. */
  readonly floor: number;
  readonly cap: number | null;
  /** Points of a run without a time; null: an entry that needs such a run is not ranked. */
  readonly missing: {
    readonly didNotStart: number | null;
    readonly didNotFinish: number | null;
    readonly noTime: number | null;
    readonly excluded: number | null;
  };
  /** Which of an entry's runs count where it has more than `sumOfRuns`. */
  readonly counting: 'best' | 'first';
}

/** The score where the event's rules say no more: the sum of the time errors in milliseconds. */
export const PLAIN_SCORE: ScoreRules = {
  unitMs: 1,
  partUnit: 'cut',
  earlyPerUnit: 1,
  latePerUnit: 1,
  floor: 0,
  cap: null,
  missing: { didNotStart: null, didNotFinish: null, noTime: null, excluded: null },
  counting: 'best',
};
