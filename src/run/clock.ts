import { type Micros, micros } from '#shared/units.ts';

/**
 * The session clock: whole microseconds since the run's first page opened, running `rate` times as fast as the device's
 * monotonic clock. The only reader of `performance`; the wall clock is read here too, as a witness and never as the time.
 */

/** A monotonic and a wall clock, both in milliseconds. */
export interface DeviceClocks {
  mono(): number;
  wall(): number;
}

export const deviceClocks: DeviceClocks = { mono: () => performance.now(), wall: () => Date.now() };

/**
 * One reading of all clocks at once, ms. Both device clocks are given as they would read if they ran at the session's rate from
 * the run's beginning on: at rate 1 that is what they read, and at any rate wall less session time is the same at every reading.
 */
export interface ClockReading {
  readonly at: Micros;
  readonly mono: number;
  readonly wall: number;
}

/** What a clock that runs at the session's rate is ahead of the device's own, `atUs` after the run's beginning. */
export const aheadMs = (atUs: number, rate: number): number => (atUs / 1000) * (1 - 1 / rate);

export interface SessionClock {
  readonly rate: number;
  now(): Micros;
  /** The instant of a stamp of this page's monotonic clock: a DOM event's `timeStamp`, or a worker's stamp bridged by `measureClockOffset`. */
  at(performanceTimeStamp: number): Micros;
  /** The present, for the journal. */
  reading(): ClockReading;
  /** Moves every later reading by so many microseconds: a new life of the page was bridged better than at first. */
  shift(byUs: number): void;
}

/** @param from What the clock reads now: 0 for a new run, the bridged instant for a resumed one. @param rate Above zero. */
export function createSessionClock(options: {
  readonly rate: number;
  readonly from: Micros;
  readonly clocks?: DeviceClocks;
}): SessionClock {
  const { rate, clocks = deviceClocks } = options;
  if (!(rate > 0)) throw new RangeError(`the rate of the session clock must be above zero, got ${rate}`);
  const monoAtStart = clocks.mono();
  let base: number = options.from;
  const at = (stamp: number) => micros(base + (stamp - monoAtStart) * 1000 * rate);
  return {
    rate,
    at,
    now: () => at(clocks.mono()),
    reading: () => {
      const mono = clocks.mono();
      const now = at(mono);
      const ahead = aheadMs(now, rate);
      return { at: now, mono: mono + ahead, wall: clocks.wall() + ahead };
    },
    shift: (byUs) => {
      base += byUs;
    },
  };
}

/** What to add to the other side's stamps to have this side's, and how far off that may be (half the round trip). */
export interface ClockOffset {
  readonly offset: number;
  readonly uncertainty: number;
}

/**
 * Bridges two clocks of one device by asking, never by `timeOrigin`: a worker started after the system clock was stepped has
 * another origin than its page. The exchange with the least round trip counts.
 * @param ask Resolves with the other side's reading. @param mine This side's reading; both in the same unit.
 */
export async function measureClockOffset(ask: () => Promise<number>, mine: () => number, times = 8): Promise<ClockOffset> {
  let best: ClockOffset = { offset: 0, uncertainty: Number.POSITIVE_INFINITY };
  for (let i = 0; i < times; i++) {
    const before = mine();
    const theirs = await ask();
    const after = mine();
    const uncertainty = (after - before) / 2;
    if (uncertainty < best.uncertainty) best = { offset: (before + after) / 2 - theirs, uncertainty };
  }
  return best;
}
