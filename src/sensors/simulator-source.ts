import type { Pack } from '#shared/course/pack.ts';
import { createDrive, type Drive, type DriveDisplay } from '#shared/drive/drive-model.ts';
import type { DriveOptions } from '#shared/drive/drive-options.ts';
import { ok } from '#shared/result.ts';
import { pageStamp, type SensorClock } from './sensor-clock.ts';
import type { SensorListener, SensorSource } from './sensor-source.ts';

/** A drive at a desk: pulses and fixes of a simulated car, and the touches of a simulated navigator. */
export interface SimulatorSourceDeps {
  readonly clock: SensorClock;
  readonly pack: Pack;
  readonly seed: number;
  /** What the cockpit shows now; the simulated driver follows it. Null while there is nothing to follow. */
  readonly display?: () => Omit<DriveDisplay, 'at'> | null;
  /**
   * Where the simulated navigator's touches go. Left out: nobody taps. A touch is no sensor observation: it takes the way a
   * hand's does, with the stamp a DOM event would carry (`RunSession.act` fits).
   */
  readonly act?: (
    act: { readonly type: 'tap.v1'; readonly input: 'glass'; readonly checkpoint: string | null },
    eventTimeStamp: number,
  ) => void;
  /** Habits, faults, release, and where to go on after a reload. */
  readonly drive?: Omit<DriveOptions, 'pack' | 'seed'>;
}

/**
 * Session time between two deliveries, and the real time that it may take: the engine takes a wheel for quiet after a second
 * of session time, and thirtyfold that is two frames of the screen.
 */
const DELIVER_MS = 240;
const TICK_MS = { least: 8, most: 50 } as const;
const REPORT_US = 1_000_000;
/** Longest stretch driven on one reading of the display: late timers and fast clocks are caught up in such steps. */
const SLICE_US = 500_000;

/**
 * Drives against the session clock, whatever its rate: a late timer is caught up by time, not by ticks. The world goes on
 * while the source is closed; what would have arrived then is lost, as with a real box.
 */
export function createSimulatorSource(deps: SimulatorSourceDeps): SensorSource {
  let drive: Drive | null = null;
  let stop: (() => void) | null = null;
  const close = async (): Promise<void> => {
    stop?.();
    stop = null;
  };
  return {
    name: 'simulator',
    async open(listener) {
      await close();
      const now = deps.clock.now();
      drive ??= createDrive({
        navigator: deps.act === undefined ? null : {},
        beginAt: now,
        ...deps.drive,
        pack: deps.pack,
        seed: deps.seed,
      });
      drive.advance(now, null);
      stop = run(drive, deps, listener, now);
      return ok(undefined);
    },
    close,
  };
}

function run(drive: Drive, { clock, display, act }: SimulatorSourceDeps, listener: SensorListener, from: number): () => void {
  let driven = from;
  let goodLines = 0;
  let told = from;
  let open = true;
  const tell = (state: 'live' | 'closed'): void => listener.status({ state, goodLines, garbledLines: 0, failure: null });

  const slice = (to: number): void => {
    const shown = display?.() ?? null;
    const all = drive.advance(to, shown === null ? null : { ...shown, at: clock.now() });
    driven = to;
    const sensed = all.filter((o) => o.type !== 'tap.v1');
    goodLines += sensed.length;
    if (sensed.length > 0) listener.observed(sensed);
    for (const o of all) {
      if (o.type === 'tap.v1') act?.({ type: 'tap.v1', input: 'glass', checkpoint: o.checkpoint }, pageStamp(clock, o.at));
    }
  };
  const deliver = (): void => {
    const now = clock.now();
    while (open && driven < now) slice(Math.min(now, driven + SLICE_US));
    if (!open || now - told < REPORT_US * clock.rate) return;
    told = now;
    tell('live');
  };
  const timer = setInterval(deliver, Math.min(TICK_MS.most, Math.max(TICK_MS.least, DELIVER_MS / clock.rate)));
  tell('live');
  return () => {
    open = false;
    clearInterval(timer);
    tell('closed');
  };
}
