import type { NewObservation } from '#shared/journal/observation.ts';
import type { DriveOptions } from './drive-options.ts';
import { REAL_RATES } from './drive-parameters.ts';
import { createDriveWorld } from './drive-world.ts';

/** What the cockpit shows. */
export interface DriveDisplay {
  /** Session instant at which it was read. */
  readonly at: number;
  /** Speed to hold, m/s; null while none is shown: the driver then follows the plan. */
  readonly holdSpeed: number | null;
  /** Seconds to the release, negative once it has passed; null while unknown. */
  readonly toRelease: number | null;
  /** Red flag: the car is brought to a stand, and goes on when it is lifted. */
  readonly stopped?: boolean;
}

export interface Drive {
  /** Everything that arrives up to `toUs`, in order of its instant. Never runs back; call it as often as wanted. */
  advance(toUs: number, display: DriveDisplay | null): NewObservation[];
  /** True official distance (m) and speed (m/s) at an instant already given out. */
  truth(at: number): { readonly distance: number; readonly speed: number };
  /** True instants at which the places (survey errors included) were passed, the finish among them, up to now. */
  passings(): readonly { readonly checkpoint: string; readonly at: number }[];
  /** Session instant of the first movement; null before. */
  readonly movedAt: number | null;
}

const AHEAD_US = 1_000_000;

/**
 * A believable drive of any pack: car, driver, wheel, pulse box, receiver and navigator, the same for the same seed.
 *
 * The world runs `AHEAD_US` ahead of what it gives out. What the display shows therefore reaches the car a second later,
 * which is about what a driver takes to read and follow it, and a navigator who anticipates can touch before the place.
 */
export function createDrive(options: DriveOptions): Drive {
  const world = createDriveWorld(options);
  const { tick } = options.rates ?? REAL_RATES;
  let waiting: NewObservation[] = [];
  return {
    advance(toUs, display) {
      if (display?.toRelease != null) world.release(display.at + display.toRelease * 1e6);
      const shown = { holdSpeed: display?.holdSpeed ?? null, stopped: display?.stopped ?? false };
      while (world.at + tick <= toUs + AHEAD_US) waiting.push(...world.tick(shown));
      const due = waiting.filter((o) => o.at <= toUs).sort((a, b) => a.at - b.at);
      waiting = waiting.filter((o) => o.at > toUs);
      return due;
    },
    truth: world.truth,
    passings: () => world.passed,
    get movedAt() {
      return world.movedAt;
    },
  };
}
