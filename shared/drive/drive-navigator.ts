import type { Pack } from '#shared/course/pack.ts';
import type { TapV1, Unnumbered } from '#shared/journal/observation.ts';
import type { DrivePlace } from './drive-course.ts';
import { createRandom } from './random.ts';

/** The navigator's touches: late or early by a habit, scattered, sometimes forgotten, sometimes wrong. */
export interface NavigatorHabits {
  /** Mean of touch less passing, ms; negative anticipates. */
  readonly leadMs: number;
  /** One standard deviation around it, ms. */
  readonly scatterMs: number;
  /** Share of places with no touch. */
  readonly missed: number;
  /** Share of touches that are 3 s late or at a wrong place. */
  readonly mistaken: number;
  /** Checkpoints whose touch is so for certain. */
  readonly mistakenAt: readonly string[];
}

export type Tap = Unnumbered<TapV1>;

export interface DriveNavigator {
  /** Places whose passing leads to a touch, with the distance at which this navigator sees them. */
  readonly targets: readonly { readonly checkpoint: string; readonly at: number }[];
  /** The touch for a target passed at `at` (session microseconds). */
  tap(checkpoint: string, at: number): Tap;
}

/** Nobody anticipates by more than the model runs ahead of what it gives out. */
const EARLIEST_US = -900_000;
const LATE_MISTAKE_US = 3e6;
const WRONG_PLACE = { low: 200, high: 1500 };
const LEAD_SIGMA_MS = 50;
const TOUCHED: ReadonlySet<string> = new Set(['settle', 'scale', 'place']);

/** A navigator whose lead the pack knows to 50 ms. */
export function usualHabits(pack: Pack, seed: number): NavigatorHabits {
  const { tapLeadMs, tapScatterMs } = pack.settings;
  return {
    leadMs: tapLeadMs.glass + createRandom(seed, 'lead').gauss(LEAD_SIGMA_MS),
    scatterMs: tapScatterMs,
    missed: 0.05,
    mistaken: 0,
    mistakenAt: [],
  };
}

export function createDriveNavigator(places: readonly DrivePlace[], habits: NavigatorHabits, seed: number): DriveNavigator {
  const random = createRandom(seed, 'navigator');
  const late = new Set<string>();
  const targets = places
    .filter(({ checkpoint }) => TOUCHED.has(checkpoint.duty) && random.unit() >= habits.missed)
    .map(({ checkpoint, at }) => {
      const mistaken = random.unit() < habits.mistaken || habits.mistakenAt.includes(checkpoint.id);
      const wrongPlace = mistaken && random.unit() < 0.5;
      if (mistaken && !wrongPlace) late.add(checkpoint.id);
      const off = wrongPlace ? random.range(WRONG_PLACE.low, WRONG_PLACE.high) * (random.unit() < 0.5 ? -1 : 1) : 0;
      return { checkpoint: checkpoint.id, at: at + off };
    });
  return {
    targets,
    tap(checkpoint, at) {
      const usual = (habits.leadMs + random.gauss(habits.scatterMs)) * 1000;
      const after = Math.max(EARLIEST_US, usual) + (late.has(checkpoint) ? LATE_MISTAKE_US : 0);
      return { type: 'tap.v1', at: Math.round(at + after), input: 'glass', checkpoint };
    },
  };
}
