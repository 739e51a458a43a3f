import type { NewObservation } from '#shared/journal/observation.ts';
import { type RunState, readout } from '#shared/pace/run.ts';
import { fail, ok, type Result } from '#shared/result.ts';
import type { SessionClock } from './clock.ts';
import { checkOfficialClock, clockSample } from './clock-check.ts';
import type { OpenRunOptions } from './open-run.ts';
import type { RunEnvironment } from './run-environment.ts';
import type { RunFailure } from './run-session-contract.ts';

/** Compares the clock with the server's: when asked, at the start, and every few minutes while that is permitted. */
export interface ClockKeeper {
  check(): Promise<Result<{ readonly uncertaintyMs: number }, RunFailure>>;
  stop(): void;
}

interface KeeperOptions {
  readonly state: RunState;
  readonly clock: SessionClock;
  readonly exchangeTime: OpenRunOptions['exchangeTime'];
  readonly environment: RunEnvironment;
  readonly act: (make: () => NewObservation) => void;
}

const LOOK_EVERY_MS = 30_000;
const AGAIN_AFTER_MS = 300_000;

export function createClockKeeper({ state, clock, exchangeTime, environment, act }: KeeperOptions): ClockKeeper {
  const { clocks, every } = environment;
  let stopped = false;
  let lastGood = Number.NEGATIVE_INFINITY;

  /** No data to or from a car on the course, unless its class permits it. */
  const permitted = (): boolean => {
    const { phase } = readout(state, clock.now());
    return state.pack.raceClass.aids.dataLink || phase === 'grid' || phase === 'finished' || phase === 'ended';
  };
  const check: ClockKeeper['check'] = async () => {
    if (!permitted()) return fail(FORBIDDEN);
    const best = exchangeTime === undefined ? null : await checkOfficialClock(exchangeTime, clocks, () => !stopped && permitted());
    if (best === null || stopped) return fail(NO_CONNECTION);
    act(() => clockSample(best, clock, clocks));
    lastGood = clocks.mono();
    return ok({ uncertaintyMs: best.sigma });
  };
  const look = (): void => {
    // a device that may have slept is not sure of anything until it has asked
    const due = state.clock.asleep !== null || clocks.mono() - lastGood >= AGAIN_AFTER_MS;
    if (exchangeTime !== undefined && due && permitted()) void check();
  };
  look();
  const stopLooking = every(LOOK_EVERY_MS, look);
  return {
    check,
    stop: () => {
      stopped = true;
      stopLooking();
    },
  };
}

const FORBIDDEN: RunFailure = {
  code: 'car-moving',
  message: 'The class permits no data link, so clocks are compared before the countdown or after the finish.',
};
const NO_CONNECTION: RunFailure = {
  code: 'no-connection',
  message: 'The server does not answer. Check the connection, or set the clock by the receiver or by taps.',
};
