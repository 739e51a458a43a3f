import type { DistanceUnit, SpeedUnit } from '#shared/units.ts';

/**
 * The official description of a course, and the crew's own places over it.
 * Distances are kept as printed: the number of decimals tells how finely the survey was printed.
 */

/** As printed, for example `{ text: '12.345', unit: 'km' }`. Turned into metres once, by `printedMetres`. */
export interface PrintedDistance {
  readonly text: string;
  readonly unit: DistanceUnit;
}

export interface PrintedSpeed {
  readonly text: string;
  readonly unit: SpeedUnit;
}

export const DUTIES = ['start', 'settle', 'scale', 'place', 'finish', 'stop board'] as const;
/** What a checkpoint is for: `settle` places only (tyres warming), `scale` places and corrects the wheel scale. */
export type Duty = (typeof DUTIES)[number];

export interface Checkpoint {
  readonly id: string;
  readonly name: string;
  readonly duty: Duty;
  readonly at: PrintedDistance;
  /** official: from the course book; own: the crew's, from the recce, private to the team. */
  readonly source: 'official' | 'own';
  /** Side of the road as driven, null where it does not matter. */
  readonly side: 'left' | 'right' | null;
  /** What to look for and which edge counts, in the crew's or the book's words; '' for none. */
  readonly note: string;
  /** WGS84 degrees where the book carries geometry, else null. */
  readonly position: { readonly lat: number; readonly lon: number } | null;
}

/** A stretch with its own highest speed. */
export interface Zone {
  readonly id: string;
  readonly name: string;
  readonly from: PrintedDistance;
  readonly to: PrintedDistance;
  readonly limit: PrintedSpeed;
  /** official: the officials' limit; crew: the crew's own choice. */
  readonly source: 'official' | 'crew';
}

/** One point of the surveyed line along which the officials measured: WGS84 degrees, and its official distance in metres. */
export interface SurveyedPoint {
  readonly lat: number;
  readonly lon: number;
  readonly d: number;
}

export interface CourseBook {
  readonly id: string;
  readonly version: number;
  readonly name: string;
  readonly unit: DistanceUnit;
  /** In order of distance: the first is the start at 0, one is the finish, a stop board may follow it. */
  readonly checkpoints: readonly Checkpoint[];
  readonly zones: readonly Zone[];
  /** What comes after the finish, for the crew to read: limit of the slow-down stretch. Null if not printed. */
  readonly slowDownLimit: PrintedSpeed | null;
  readonly notes: string;
  /** The surveyed line from before the start to past the finish, in order of distance; left out where the book carries none. */
  readonly geometry?: readonly SurveyedPoint[];
}
