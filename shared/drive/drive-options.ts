import type { Pack } from '#shared/course/pack.ts';
import type { NavigatorHabits } from './drive-navigator.ts';
import type { DriveParameters, DriveRates } from './drive-parameters.ts';
import type { DriveRoad } from './drive-road.ts';
import type { PulseBoxStart } from './pulse-box.ts';

/** What a drive is made from. */
export interface DriveOptions {
  readonly pack: Pack;
  readonly seed: number;
  /** Session instant at which the world begins, microseconds; the car stands behind the line. 0 where left out. */
  readonly beginAt?: number;
  /** Session instant of the release, where known from the start; a display may tell it later. */
  readonly releaseAt?: number | null;
  /** Official time at session instant 0, unix ms; null: fixes carry no time. */
  readonly utcMsAtZero?: number | null;
  /** Left out: the usual habits. Null: nobody taps. */
  readonly navigator?: Partial<NavigatorHabits> | null;
  readonly faults?: DriveFaults;
  /** Goes on from the middle of a run (a page that was reloaded): the car at `beginAt`, and the box's counters. */
  readonly resume?: { readonly distance: number; readonly speed: number } & PulseBoxStart;
  /** Left out: the usual ones, at the rates of real sensors. */
  readonly parameters?: DriveParameters;
  readonly rates?: DriveRates;
  /** Left out: by the book's positions, or invented from the seed. */
  readonly road?: DriveRoad;
}

export interface DriveFaults {
  /** The measured wheel is driven: it spins at the launch and slips with speed. Left out: as the pack says. */
  readonly driven?: boolean;
  /** Pulses get lost now and then. */
  readonly dropouts?: boolean;
  readonly gnssOutages?: boolean;
  /** Nobody asks the receiver: no fixes at all. */
  readonly noGnss?: boolean;
}
