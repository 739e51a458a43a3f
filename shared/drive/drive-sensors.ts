import type { NewObservation } from '#shared/journal/observation.ts';
import type { CarState } from './drive-driver.ts';
import type { DriveGnss } from './drive-gnss.ts';
import type { DriveRates } from './drive-parameters.ts';
import type { DriveWheel } from './drive-wheel.ts';
import type { PulseBox } from './pulse-box.ts';

/** What box and receiver make of a tick. */
export interface Sensors {
  /** The car has moved by `dx` metres of official distance from one session instant to another. */
  sense(moved: Moved): NewObservation[];
  /** True where the box should speak at every fine tick. */
  isFine(x: number, v: number): boolean;
  /** ln(official / driven metres) here. */
  readonly line: number;
}

export interface Moved {
  readonly car: CarState;
  readonly dx: number;
  readonly from: number;
  readonly at: number;
}

export interface SensorParts {
  readonly beginAt: number;
  readonly rates: DriveRates;
  readonly aerialM: number;
  readonly wheel: DriveWheel;
  readonly box: PulseBox;
  readonly second: { readonly wheel: DriveWheel; readonly box: PulseBox } | null;
  readonly gnss: DriveGnss | null;
}

export function createSensors({ beginAt, rates, aerialM, wheel, box, second, gnss }: SensorParts): Sensors {
  const channels = second === null ? [{ wheel, box }] : [{ wheel, box }, second];
  return {
    sense({ car, dx, from, at }) {
      const out: NewObservation[] = [];
      const isDue = at - from < rates.tick || (at - beginAt) % rates.pulse === 0;
      for (const channel of channels) {
        const record = channel.box.turn(channel.wheel.pulses(dx, car.x, car.v, (at - from) / 1e6), from, at, isDue);
        if (record !== null) out.push(record);
      }
      if (gnss === null || (at - beginAt) % rates.fix !== 0) return out;
      const fix = gnss.fix(at, car.x - aerialM, car.v * Math.exp(-wheel.line));
      if (fix !== null) out.push(fix);
      return out;
    },
    isFine: (x, v) => wheel.losses.isNear(x, v),
    get line() {
      return wheel.line;
    },
  };
}
