import type { Pack } from '#shared/course/pack.ts';
import type { NavigatorHabits } from './drive-navigator.ts';
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
  readonly faults?: { readonly driven?: boolean; readonly dropouts?: boolean; readonly gnssOutages?: boolean };
  /** Goes on from the middle of a run (a page that was reloaded): the car at `beginAt`, and the box's counters. */
  readonly resume?: { readonly distance: number; readonly speed: number } & PulseBoxStart;
}
